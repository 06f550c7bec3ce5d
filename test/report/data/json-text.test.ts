import fc from 'fast-check';
import { expect, test } from 'vitest';
import { jsonText } from '../../../src/report/data/json-text.ts';

test('any JSON value comes back, strings that look like rows of numbers too', () => {
  fc.assert(
    fc.property(fc.jsonValue({ noUnicodeString: false }), (value) => {
      expect(JSON.parse(jsonText(value))).toEqual(JSON.parse(JSON.stringify(value)));
    }),
    { seed: 8259 },
  );
  const text = { a: '[\n  1,\n  2\n]', b: '[ 1, 2 ]' };
  expect(JSON.parse(jsonText(text))).toEqual(text);
});

test('a position stays on one line', () => {
  expect(jsonText({ at: [-1.5, 50.25, 3e-7] })).toBe('{\n  "at": [-1.5, 50.25, 3e-7]\n}\n');
});

test('a number that is not finite throws, with its key', () => {
  expect(() => jsonText({ grade_pct: Number.NaN })).toThrow('grade_pct is NaN');
  expect(() => jsonText({ list: [1, Number.POSITIVE_INFINITY] })).toThrow('Infinity');
});
