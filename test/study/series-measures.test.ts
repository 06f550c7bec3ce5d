import { describe, expect, it } from 'vitest';
import type { FullSeries } from '../../src/loop/result.ts';
import { passageOf, recoveryOf, sampleAt, thinSeries } from '../../src/study/series-measures.ts';
import { expectClose } from '../compare.ts';

const UPPER = 1;
const LOWER = 2;

/** A series sampled every 0.1 s at 20 m/s, with error and limit as functions of time. */
function seriesOf(seconds: number, error: (t: number) => number, limit: (t: number) => number): FullSeries {
  const size = Math.round(seconds * 10);
  const time = Float64Array.from({ length: size }, (_, i) => i / 10);
  const zeros = new Float64Array(size);
  return {
    size,
    time,
    distance: time.map((t) => 20 * t),
    setSpeed: new Float64Array(size).fill(20),
    reference: zeros,
    speed: time.map((t) => 20 + error(t)),
    measured: zeros,
    command: time.map((t) => (t * 7) % 1),
    actuator: zeros,
    proportional: zeros,
    integral: zeros,
    feedforward: zeros,
    limit: Uint8Array.from(time, (t) => limit(t)),
    gear: new Uint8Array(size),
    driveForce: zeros,
    brakeForce: zeros,
    acceleration: zeros,
  };
}

const KMH = 1 / 3.6;

describe('recovery', () => {
  const measure = (series: FullSeries, first: number, last: number, whole = true) =>
    recoveryOf(series, first, last, 2 * KMH, 1 * KMH, whole);

  it('runs from leaving the limit to the beginning of 3 s within 1 km/h', () => {
    // At the limit from 10 s to 20 s; the error falls to 1 km/h at 27 s.
    const series = seriesOf(
      60,
      (t) => (t < 10 ? 0 : t < 27 ? -1 : 0.1),
      (t) => (t >= 10 && t < 20 ? UPPER : 0),
    );
    expectClose(measure(series, 80, 220).time as number, 7, 0.051);
  });

  it('takes the longest stay, and a break shorter than half a second does not end it', () => {
    const series = seriesOf(
      80,
      (t) => (t > 5 && t < 50 ? -1 : 0),
      (t) => {
        if (t >= 10 && t < 12) return LOWER;
        if (t >= 20 && t < 40) return Math.abs(t - 30) < 0.15 ? 0 : UPPER;
        return 0;
      },
    );
    expectClose(measure(series, 0, 450).time as number, 10, 0.051);
  });

  it('runs from leaving the band where no limit was met', () => {
    const series = seriesOf(
      60,
      (t) => (t >= 10 && t < 18.5 ? -1 : 0),
      () => 0,
    );
    expectClose(measure(series, 0, 300).time as number, 8.5, 0.051);
  });

  it('starts anew when the error leaves 1 km/h again within the 3 s', () => {
    const series = seriesOf(
      60,
      (t) => ((t >= 10 && t < 12) || (t >= 14 && t < 15) ? 1 : 0),
      () => 0,
    );
    expectClose(measure(series, 0, 300).time as number, 5, 0.051);
  });

  it('is 0 where there was nothing to recover from, and says why where it never came', () => {
    const calm = seriesOf(
      20,
      () => 0,
      () => 0,
    );
    expect(measure(calm, 0, 100).time).toBe(0);
    const lost = seriesOf(
      30,
      (t) => (t > 5 ? -3 : 0),
      () => 0,
    );
    expect(measure(lost, 0, 200, true).time).toEqual({
      none: 'it was not back within 1 km/h for 3 s in two minutes',
    });
    expect(measure(lost, 0, 200, false).time).toEqual({
      none: 'the run ended before it was back within 1 km/h for 3 s',
    });
  });
});

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
