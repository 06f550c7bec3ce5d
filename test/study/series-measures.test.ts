import { describe, expect, it } from 'vitest';
import { passageOf, sampleAt, thinSeries } from '../../src/study/series-measures.ts';
import { expectClose } from '../compare.ts';
import { seriesOf } from './series-of.ts';

const UPPER = 1;
const LOWER = 2;

describe('a passage', () => {
  it('has the extreme error with its sign, the time lost and the time at the limits', () => {
    const series = seriesOf(
      40,
      (t) => (t >= 10 && t < 20 ? -4 : t >= 20 && t < 22 ? 1 : 0),
      (t) => (t >= 10 && t < 15 ? UPPER : t >= 20 && t < 21 ? LOWER | 4 : 0),
    );
    const passage = passageOf(series, 50, 300);
    expect(passage.extreme).toBe(-4);
    // 10 s at 16 of 20 m/s lose 2 s; 2 s at 21 of 20 m/s gain 0.1 s.
    expectClose(passage.timeLost, 2 - 0.1, 1e-9);
    expectClose(passage.timeAtLimit, 6, 1e-9);
  });

  it('finds samples by distance', () => {
    const series = seriesOf(
      10,
      () => 0,
      () => 0,
    );
    expect(sampleAt(series, 0)).toBe(0);
    expect(sampleAt(series, 19.9)).toBe(10);
    expect(sampleAt(series, 20.1)).toBe(11);
    expect(sampleAt(series, 1e9)).toBe(series.size);
  });
});

describe('a thinned series', () => {
  it('keeps ends and extremes within the rows it is given', () => {
    const series = seriesOf(
      600,
      (t) => (Math.abs(t - 321.7) < 0.05 ? -9 : Math.abs(t - 12.3) < 0.05 ? 5 : 0),
      () => 0,
    );
    const thin = thinSeries(series, 10, 5990, 400);
    expect(thin.size).toBeLessThanOrEqual(400);
    expect(thin.time[0]).toBe(1);
    expect(thin.time.at(-1)).toBe(598.9);
    expectClose(
      Array.from(thin.speed).reduce((a, b) => Math.min(a, b)),
      11,
      1e-12,
    );
    expectClose(
      Array.from(thin.speed).reduce((a, b) => Math.max(a, b)),
      25,
      1e-12,
    );
    for (let i = 1; i < thin.size; i++) expect(thin.time[i]!).toBeGreaterThan(thin.time[i - 1]!);
  });

  it('is the series itself where that is short enough', () => {
    const series = seriesOf(
      10,
      (t) => t,
      () => 0,
    );
    const thin = thinSeries(series, 20, 60, 400);
    expect(Array.from(thin.speed)).toEqual(Array.from(series.speed.subarray(20, 60)));
    expect(thin.size).toBe(40);
  });
});
