import { describe, expect, it } from 'vitest';
import { medianOf, runningMedian, windowsWithin } from '../../src/numeric/running-median.ts';
import { expectClose } from '../compare.ts';
import { randomness } from '../road/synthetic-road.ts';

const sortedMiddle = (values: number[]): number => {
  const s = values.toSorted((a, b) => a - b);
  const h = s.length >> 1;
  return s.length % 2 === 1 ? s[h]! : (s[h - 1]! + s[h]!) / 2;
};

describe('running median', () => {
  it('agrees with sorting each window anew, ties and all', () => {
    for (let seed = 1; seed <= 30; seed++) {
      const random = randomness(seed);
      const n = 1 + Math.floor(80 * random.uniform());
      const places = Float64Array.from({ length: n }, () => 100 * random.uniform()).sort();
      const values = Float64Array.from({ length: n }, () =>
        seed % 3 === 0 ? Math.round(3 * random.normal()) : random.normal(),
      );
      const reach = 12 * random.uniform();
      const { first, last } = windowsWithin(places, reach, 2);
      const { median, deviation } = runningMedian(values, first, last);
      for (let i = 0; i < n; i++) {
        const window = Array.from(values).filter(
          (_, j) => Math.abs(places[j]! - places[i]!) <= reach || Math.abs(j - i) <= 2,
        );
        const middle = sortedMiddle(window);
        expectClose(median[i]!, middle, 0, `median ${i} of seed ${seed}`);
        expectClose(
          deviation[i]!,
          sortedMiddle(window.map((v) => Math.abs(v - middle))),
          1e-15,
          `deviation ${i}`,
        );
      }
    }
  });

  it('has the textbook median and deviation of a list with an outlier', () => {
    // 1 1 2 2 4 6 9: median 2, deviations 1 1 0 0 2 4 7, their median 1 (a usual textbook example, from memory).
    const values = Float64Array.of(1, 1, 2, 2, 4, 6, 9);
    const whole = { first: new Int32Array(7), last: new Int32Array(7).fill(7) };
    const { median, deviation } = runningMedian(values, whole.first, whole.last);
    expect([median[3], deviation[3]]).toEqual([2, 1]);
    expect(medianOf(values)).toBe(2);
    expect(medianOf(new Float64Array())).toBeNaN();
  });
});
