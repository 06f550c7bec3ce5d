import { describe, it } from 'vitest';
import { gradientAtKnots, gradientSdAtKnots } from '../../src/numeric/uniform-gradient.ts';
import { expectClose } from '../compare.ts';
import { randomness } from '../road/synthetic-road.ts';

describe('gradient at uniform knots', () => {
  it('is exact for a parabola, ends and all', () => {
    const x = Float64Array.from({ length: 12 }, (_, i) => 0.5 * i);
    expectClose(
      gradientAtKnots(
        x.map((v) => 3 - v + 2 * v * v),
        0.5,
      ),
      x.map((v) => 4 * v - 1),
      1e-12,
    );
  });

  it('has the s.d. that drawing values with that covariance gives', () => {
    // Moving averages of white noise over four values: covariance (4 - |j|) / 16.
    const random = randomness(3);
    const n = 7;
    const band = Float64Array.from({ length: 4 * n }, (_, k) => (4 - (k % 4)) / 16);
    const sd = gradientSdAtKnots(band, 2);
    const squares = new Float64Array(n);
    const draws = 40_000;
    for (let d = 0; d < draws; d++) {
      const white = Float64Array.from({ length: n + 3 }, () => random.normal());
      const values = Float64Array.from(
        { length: n },
        (_, i) => (white[i]! + white[i + 1]! + white[i + 2]! + white[i + 3]!) / 4,
      );
      gradientAtKnots(values, 2).forEach((g, i) => {
        squares[i]! += (g * g) / draws;
      });
    }
    for (let i = 0; i < n; i++) expectClose(Math.sqrt(squares[i]!) / sd[i]!, 1, 0.015, `knot ${i}`);
  });
});
