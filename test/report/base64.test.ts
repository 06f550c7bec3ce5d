import fc from 'fast-check';
import { expect, it } from 'vitest';
import { base64 } from '../../src/report/base64.ts';

it('base64 gives the test vectors of RFC 4648, section 10', () => {
  const vectors = {
    '': '',
    f: 'Zg==',
    fo: 'Zm8=',
    foo: 'Zm9v',
    foob: 'Zm9vYg==',
    fooba: 'Zm9vYmE=',
    foobar: 'Zm9vYmFy',
  };
  for (const [text, code] of Object.entries(vectors))
    expect(base64(new TextEncoder().encode(text))).toBe(code);
});

it('base64 agrees with the host for any bytes', () => {
  fc.assert(
    fc.property(fc.uint8Array({ maxLength: 70 }), (bytes) => {
      expect(base64(bytes)).toBe(Buffer.from(bytes).toString('base64'));
    }),
    { seed: 5 },
  );
});
