import { describe, expect, it } from 'vitest';
import { turningPlaces } from '../../src/study/turning-places.ts';
import { roadOf } from './road-of.ts';

// Up 30 m, down 10 m, up 20 m, down 40 m.
const ROAD = roadOf([
  { length: 1000, grade: 0.03 },
  { length: 500, grade: -0.02 },
  { length: 1000, grade: 0.02 },
  { length: 1000, grade: -0.04 },
]);
const WHOLE = { from: 0, to: 3500 };

describe('turning places', () => {
  it('are the crests and valleys that stand out by the height', () => {
    expect(turningPlaces(ROAD, WHOLE, 8)).toEqual([1000, 1500, 2500]);
    expect(turningPlaces(ROAD, WHOLE, 15)).toEqual([2500]);
    expect(turningPlaces(ROAD, WHOLE, 45)).toEqual([]);
  });

  it('need their height on both sides within the stretch', () => {
    // From 900 m the first crest stands 3 m above the start; up to 2600 m the last one 4 m above the end.
    expect(turningPlaces(ROAD, { from: 900, to: 2600 }, 8)).toEqual([1500]);
    expect(turningPlaces(ROAD, { from: 100, to: 900 }, 8)).toEqual([]);
  });

  it('alternate and stand out on both sides, on seeded random roads', () => {
    let state = 99;
    const random = (): number => {
      state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
      return state / 4294967296;
    };
    for (let k = 0; k < 40; k++) {
      const road = roadOf(Array.from({ length: 40 }, () => ({ length: 100, grade: 0.2 * (random() - 0.5) })));
      const height = 2 + 10 * random();
      const places = turningPlaces(road, { from: 0, to: 4000 }, height);
      const at = (x: number) => road.elevation[road.distance.indexOf(x)]!;
      const heights = places.map(at);
      for (let i = 1; i < heights.length; i++)
        expect(Math.abs(heights[i]! - heights[i - 1]!)).toBeGreaterThanOrEqual(height);
      for (let i = 2; i < heights.length; i++)
        expect((heights[i]! - heights[i - 1]!) * (heights[i - 1]! - heights[i - 2]!)).toBeLessThan(0);
    }
  });
});
