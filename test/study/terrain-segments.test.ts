import { describe, expect, it } from 'vitest';
import { segmentStarts, segmentsByTerrain } from '../../src/study/terrain-segments.ts';
import { expectClose } from '../compare.ts';
import { roadOf } from './road-of.ts';

/** Best segmentation by trying every last cut, O(n^2), with sums made anew for each: no code shared with the pruned one. */
function bruteForce(weight: readonly number[], value: readonly number[], penalty: number) {
  const n = weight.length;
  const cost = (i: number, j: number): number => {
    let w = 0;
    let s = 0;
    for (let k = i; k < j; k++) {
      w += weight[k]!;
      s += weight[k]! * value[k]!;
    }
    let sum = 0;
    for (let k = i; k < j; k++) sum += weight[k]! * (value[k]! - s / w) * (value[k]! - s / w);
    return sum;
  };
  const best = [0];
  const last = [0];
  for (let j = 1; j <= n; j++) {
    best[j] = Number.POSITIVE_INFINITY;
    for (let i = 0; i < j; i++) {
      const c = best[i]! + cost(i, j) + penalty;
      if (c < best[j]!) {
        best[j] = c;
        last[j] = i;
      }
    }
  }
  const starts: number[] = [];
  for (let j = n; j > 0; j = last[j]!) starts.push(last[j]!);
  return { starts: starts.reverse(), total: best[n]! };
}

/** Small linear congruential generator (Numerical Recipes constants, from memory): seeded noise for tests. */
function noise(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 4294967296;
  };
}

describe('segments by terrain', () => {
  it('are those of a search through every segmentation, on seeded random steps with noise', () => {
    for (let seed = 1; seed <= 40; seed++) {
      const random = noise(seed);
      const n = 20 + Math.floor(random() * 100);
      const weight: number[] = [];
      const value: number[] = [];
      let level = 0;
      for (let i = 0; i < n; i++) {
        if (random() < 0.08) level = (random() - 0.5) * 0.2;
        weight.push(1 + 20 * random());
        value.push(level + (random() - 0.5) * 0.03);
      }
      const penalty = [0.001, 0.01, 0.1, 1][seed % 4]!;
      const expected = bruteForce(weight, value, penalty);
      expect(
        segmentStarts(Float64Array.from(weight), Float64Array.from(value), penalty),
        `seed ${seed}`,
      ).toEqual(expected.starts);
    }
  });

  it('find the pieces of a written road exactly', () => {
    const road = roadOf([
      { length: 1000, grade: 0 },
      { length: 600, grade: 0.06 },
      { length: 400, grade: 0.02 },
      { length: 900, grade: -0.05, headwind: 3 },
    ]);
    const segments = segmentsByTerrain(road);
    expectClose(
      segments.map((s) => s.from),
      [0, 1000, 1600, 2000],
      1e-9,
    );
    expectClose(
      segments.map((s) => s.to),
      [1000, 1600, 2000, 2900],
      1e-9,
    );
    expectClose(
      segments.map((s) => s.meanGrade),
      [0, 0.06, 0.02, -0.05],
      1e-12,
    );
    expectClose(
      segments.map((s) => s.meanHeadwind),
      [0, 0, 0, 3],
      1e-12,
    );
  });

  it('leave a hill alone below length x difference^2 of twice the penalty, and cut it above', () => {
    // The hill is cut out of a long level when its squared difference saves more than two penalties: 0.2 m. With a
    // level road of length M on each side the exact saving is L d^2 (1 - L / (2 M + L)).
    const between = (length: number) =>
      segmentsByTerrain(
        roadOf([
          { length: 50_000, grade: 0 },
          { length, grade: 0.04 },
          { length: 50_000, grade: 0 },
        ]),
      ).length;
    expect(between(120)).toBe(1);
    expect(between(130)).toBe(3);
  });

  it('are one on a road of one grade, whatever its length', () => {
    expect(segmentsByTerrain(roadOf([{ length: 30, grade: 0.05 }])).length).toBe(1);
    expect(segmentsByTerrain(roadOf([{ length: 100_000, grade: 0.05 }])).length).toBe(1);
  });
});
