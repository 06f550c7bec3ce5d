import { describe, expect, it } from 'vitest';
import { decodeText } from '../../src/track/decode-text.ts';

const utf16 = (text: string): Uint8Array =>
  Uint8Array.from([...text].flatMap((c) => [c.charCodeAt(0) & 255, c.charCodeAt(0) >> 8]));
const latin1 = (text: string): Uint8Array => Uint8Array.from(text, (c) => c.charCodeAt(0));
const text = '<?xml version="1.0" encoding="XX"?>\n<gpx>é</gpx>';
const swapped = (bytes: Uint8Array): Uint8Array => bytes.map((_, i) => bytes[i ^ 1]!);

describe('the text of a file', () => {
  it.each([
    ['UTF-8', new TextEncoder().encode(text.replace('XX', 'UTF-8'))],
    ['UTF-8 with a byte order mark', new TextEncoder().encode(`\ufeff${text.replace('XX', 'UTF-8')}`)],
    ['UTF-8 although the declaration differs from the mark', new TextEncoder().encode(`\ufeff${text}`)],
    ['Latin-1 that says so', latin1(text.replace('XX', 'ISO-8859-1'))],
    ['UTF-16, little end first', utf16(`\ufeff${text.replace('XX', 'UTF-16')}`)],
    ['UTF-16, big end first', swapped(utf16(`\ufeff${text.replace('XX', 'UTF-16')}`))],
  ])('is decoded from %s', (_what, bytes) => {
    const decoded = decodeText(bytes, 'a.gpx');
    expect(decoded.startsWith('<?xml')).toBe(true);
    expect(decoded.endsWith('<gpx>é</gpx>')).toBe(true);
  });

  it('is not read beyond 64 MiB', () => {
    expect(() => decodeText(new Uint8Array(64 * 1024 * 1024 + 1).fill(32), 'a.gpx')).toThrow('64 MiB');
  });
});
