import { expect, it } from 'vitest';
import { localRegression } from '../../src/numeric/local-regression.ts';
import { expectClose } from '../compare.ts';
import { randomness } from '../road/synthetic-road.ts';

it('gives a parabola and its slope back, at uneven abscissae and at the ends', () => {
  const random = randomness(7);
  const x = new Float64Array(200);
  for (let i = 1; i < x.length; i++) x[i] = x[i - 1]! + 0.2 + 1.6 * random.uniform();
  const y = x.map((t) => 3 - 2 * t + 0.05 * t * t);
  const { value, slope } = localRegression(x, y, 4, 0);
  expectClose(value, y, 1e-8);
  expectClose(
    slope,
    x.map((t) => -2 + 0.1 * t),
    1e-8,
  );
});

it('takes the line through two points, and a single point as it is', () => {
  const two = localRegression(Float64Array.of(1, 3), Float64Array.of(10, 16), 1, 0);
  expectClose(two.value, [10, 16], 1e-9);
  expectClose(two.slope, [3, 3], 1e-9);
  const one = localRegression(Float64Array.of(1), Float64Array.of(10), 1, 0);
  expect([one.value[0], one.slope[0]]).toEqual([10, 0]);
  expect(localRegression(new Float64Array(0), new Float64Array(0), 1, 0).value.length).toBe(0);
});

it('does not heed single values far off', () => {
  const random = randomness(11);
  const x = Float64Array.from({ length: 300 }, (_, i) => i);
  const clean = x.map((t) => 5 * t);
  const y = clean.map((v, i) => v + 0.3 * random.normal() + (i % 29 === 14 ? 60 : 0));
  const { value, slope } = localRegression(x, y, 6, 0);
  expectClose(value, clean, 1.2);
  expectClose(slope, new Float64Array(300).fill(5), 0.7);
});

// A slope that is a weighted sum of independent values has the variance sigma^2 sum (w t)^2 / (sum w t^2)^2: any textbook of regression.
it('spreads as the sums of its weights say', () => {
  const random = randomness(23);
  const size = 20_000;
  const x = Float64Array.from({ length: size }, (_, i) => i);
  const y = x.map(() => random.normal());
  const weights = [-3, -2, -1, 0, 1, 2, 3].map((t) => (1 - Math.abs(t / 4) ** 3) ** 3);
  const second = weights.reduce((sum, w, k) => sum + w * (k - 3) ** 2, 0);
  const expected = Math.sqrt(weights.reduce((sum, w, k) => sum + (w * (k - 3)) ** 2, 0)) / second;
  const { slope } = localRegression(x, y, 4, 0);
  const inner = slope.subarray(10, size - 10);
  const sd = Math.sqrt(inner.reduce((sum, b) => sum + b * b, 0) / inner.length);
  // Outlier weights take a little of what a normal spread has.
  expectClose(sd / expected, 1, 0.06);
});

it('takes a bend in exact values for what it is, within the grain', () => {
  // Exact but for one place at which the slope steps: all other residuals are rounding.
  const x = Float64Array.from({ length: 120 }, (_, i) => i);
  const y = x.map((t) => (t < 60 ? 10 * t : 600 + 12 * (t - 60)));
  const { value, slope } = localRegression(x, y, 4, 3);
  expectClose(value, y, 1.5);
  expectClose(
    slope,
    x.map((t) => (t < 56 ? 10 : t > 64 ? 12 : 11)),
    1.3,
  );
});
