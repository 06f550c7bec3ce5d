import { describe, expect, it } from 'vitest';
import { distanceAt, indexAt, valueAt } from '../../src/road/lookup.ts';
import { roadOfProfile } from '../../src/road/road-of-profile.ts';
import { expectClose } from '../compare.ts';
import { roadOptions } from './road-fixtures.ts';

const level = { heading: null, headwind: null };
const road = roadOfProfile(
  {
    by: 'length',
    verticalCurve: 0,
    startElevation: 0,
    pieces: [
      { extent: 20, grade: 0, ...level },
      { extent: 20, grade: 0.75, ...level },
    ],
  },
  roadOptions(),
);

describe('looking up a road', () => {
  it('finds the knot at or before a place, the later of two at a step', () => {
    // Knots: 0, 10, 20, 20, 30, 40.
    expect([-5, 0, 9, 10, 20, 25, 40, 99].map((x) => indexAt(road, x))).toEqual([0, 0, 0, 1, 3, 3, 5, 5]);
  });

  it('is linear between knots and holds the ends', () => {
    expectClose(
      [-1, 5, 20, 25, 40, 50].map((x) => valueAt(road, 'elevation', x)),
      [0, 0, 0, 3.75, 15, 15],
      1e-12,
    );
    expectClose(
      [19.99, 20].map((x) => valueAt(road, 'grade', x)),
      [0, 0.75],
      0,
    );
  });

  it('turns a station along the slope into plan distance', () => {
    // 3-4-5 triangle: 25 m along a grade of 0.75 are 20 m in plan.
    expectClose(
      [10, 20, 32.5, 45].map((s) => distanceAt(road, s)),
      [10, 20, 30, 40],
      1e-12,
    );
  });
});
