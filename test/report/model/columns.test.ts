import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { columnsOf, extentOf, peaksOf, plainCurve, unbrokenRuns } from '../../../src/report/model/columns.ts';

describe('columns of a curve', () => {
  it('hold least, mean and greatest of what falls into them', () => {
    const curve = {
      size: 4,
      at: [0, 1, 2, 3],
      low: [1, -5, 2, 0],
      mean: [2, 0, 4, 1],
      high: [3, 1, 9, 2],
    };
    expect(columnsOf(curve, 0, 2)).toEqual([
      { at: 0.5, low: -5, mean: 1, high: 3 },
      { at: 2.5, low: 0, mean: 2.5, high: 9 },
    ]);
  });

  it('do not go over a gap', () => {
    const nan = Number.NaN;
    const curve = plainCurve([0, 1, 2, 3, 4, 5], [nan, 7, 8, nan, nan, 9]);
    const runs = unbrokenRuns(curve).map((run) => columnsOf(run, 0, 1).map(({ at, mean }) => [at, mean]));
    expect(runs).toEqual([
      [
        [1, 7],
        [2, 8],
      ],
      [[5, 9]],
    ]);
    expect(unbrokenRuns(plainCurve([0, 1], [1, 2]))).toHaveLength(1);
    expect(unbrokenRuns(plainCurve([0], [nan]))).toEqual([]);
  });

  it('lose no peak however wide they are', () => {
    const values = fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), {
      minLength: 1,
      maxLength: 300,
    });
    fc.assert(
      fc.property(values, fc.double({ min: 0.1, max: 500, noNaN: true }), (list, width) => {
        const curve = plainCurve(
          list.map((_, i) => i),
          list,
        );
        const columns = columnsOf(curve, 0, width);
        expect(Math.min(...columns.map((c) => c.low))).toBe(Math.min(...list));
        expect(Math.max(...columns.map((c) => c.high))).toBe(Math.max(...list));
        expect(columns.length).toBeLessThanOrEqual(Math.ceil(list.length / width) + 1);
      }),
      { seed: 21 },
    );
  });

  it('leave out what is not finite', () => {
    const curve = plainCurve([0, 1, 2], [1, Number.NaN, 3]);
    expect(columnsOf(curve, 0, 10)).toEqual([{ at: 1, low: 1, mean: 2, high: 3 }]);
    expect(extentOf([curve])).toEqual([1, 3]);
    expect(extentOf([plainCurve([0], [Number.NaN])])).toBeNull();
  });
});

describe('the peaks of a line', () => {
  it('are the least and greatest value of each column, the nearer to the one before first', () => {
    const curve = plainCurve([0, 1, 2, 3, 4], [5, 9, 8, 1, 4]);
    expect(peaksOf(curve, 2)).toEqual([
      [0.5, 5],
      [0.5, 9],
      [2.5, 8],
      [2.5, 1],
      [4, 4],
    ]);
  });
});
