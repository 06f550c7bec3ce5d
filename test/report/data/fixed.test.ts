import fc from 'fast-check';
import { expect, test } from 'vitest';
import { fixed, NotFiniteError, rounded } from '../../../src/report/data/fixed.ts';

test('a number keeps its decimals, with a decimal point and an ASCII minus', () => {
  expect(fixed(1234.5, 2)).toBe('1234.50');
  expect(fixed(-0.126, 2)).toBe('-0.13');
  expect(fixed(7, 0)).toBe('7');
});

test('nothing is written as minus zero', () => {
  expect(fixed(-0, 2)).toBe('0.00');
  expect(fixed(-0.004, 2)).toBe('0.00');
  expect(Object.is(rounded(-0.004, 2), 0)).toBe(true);
});

test('a number that is not finite never reaches a file', () => {
  for (const bad of [Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY])
    expect(() => fixed(bad, 2, 'speed_kmh, row 3')).toThrow(NotFiniteError);
  expect(() => fixed(Number.NaN, 2, 'speed_kmh, row 3')).toThrow('speed_kmh, row 3');
});

test('what is written is within half of the last decimal of what was there', () => {
  fc.assert(
    fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), fc.integer({ min: 0, max: 6 }), (x, d) => {
      const text = fixed(x, d);
      expect(text).toMatch(/^-?\d+(\.\d+)?$/);
      expect(Math.abs(Number(text) - x)).toBeLessThanOrEqual(0.5000001 * 10 ** -d + 1e-9);
    }),
    { seed: 20260101 },
  );
});
