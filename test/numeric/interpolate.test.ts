import { describe, expect, it } from 'vitest';
import { cellOf, interpolateLinear, intervalOf } from '../../src/numeric/interpolate.ts';
import { expectClose } from '../compare.ts';
import { randomness } from '../road/synthetic-road.ts';

describe('linear interpolation', () => {
  it('is exact on a line at random places', () => {
    for (let seed = 1; seed <= 20; seed++) {
      const random = randomness(seed);
      const x = Float64Array.from({ length: 30 }, () => random.uniform()).sort();
      const at = Float64Array.from({ length: 50 }, () => x[0]! + (x[29]! - x[0]!) * random.uniform()).sort();
      expectClose(
        interpolateLinear(
          x,
          x.map((v) => 3 - 2 * v),
          at,
        ),
        at.map((v) => 3 - 2 * v),
        1e-12,
      );
    }
  });

  it('holds the ends, takes the later value at a step, and accepts one point', () => {
    const x = Float64Array.of(0, 1, 1, 2);
    const y = Float64Array.of(0, 1, 5, 6);
    expect(Array.from(interpolateLinear(x, y, Float64Array.of(-1, 0, 0.5, 1, 1.5, 2, 3)))).toEqual([
      0, 0, 0.5, 5, 5.5, 6, 6,
    ]);
    expect(
      Array.from(interpolateLinear(Float64Array.of(4), Float64Array.of(7), Float64Array.of(1, 4, 9))),
    ).toEqual([7, 7, 7]);
    expect([-1, 0, 0.9, 1, 2, 9].map((place) => intervalOf(x, place))).toEqual([0, 0, 0, 2, 3, 3]);
    expect([-1, 0, 0.9, 1, 2, 9].map((place) => cellOf(x, place))).toEqual([0, 0, 0, 2, 2, 2]);
  });
});
