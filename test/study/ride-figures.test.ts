import { describe, expect, it } from 'vitest';
import type { HoldCourse } from '../../src/study/hold-course.ts';
import type { LoggedRide } from '../../src/study/logged-ride.ts';
import type { FigureContext } from '../../src/study/measure-figure.ts';
import { type RideResult, rideResult } from '../../src/study/ride-figures.ts';
import { expectClose } from '../compare.ts';

const SET = 20;
const BAND = 2;
const course = (changes: HoldCourse['changes'] = []): HoldCourse => ({
  setSpeed: SET,
  startSpeed: SET,
  changes,
  settling: [],
  following: [],
});
const nothing = {} as FigureContext & { readonly hills: [] };

/** Rows at times, with a speed over time [m/s]; the way is its integral by the trapezoidal rule. */
function ride(time: number[], speed: (t: number) => number, some: Partial<LoggedRide> = {}): LoggedRide {
  const distance = new Float64Array(time.length);
  for (let i = 1; i < time.length; i++)
    distance[i] =
      distance[i - 1]! + ((time[i]! - time[i - 1]!) * (speed(time[i]!) + speed(time[i - 1]!))) / 2;
  return {
    name: 'ridden',
    size: time.length,
    distance,
    time: Float64Array.from(time),
    speed: Float64Array.from(time, speed),
    throttle: null,
    gaps: [],
    laidBy: 'distance',
    rmsOffset: null,
    pauses: [],
    covered: distance.at(-1)!,
    speedFrom: 'log',
    leftOut: 0,
    ...some,
  };
}
const seconds = (count: number): number[] => Array.from({ length: count }, (_, i) => i);
const figuresOf = (given: LoggedRide, on = course()): RideResult => rideResult(given, on, BAND, [], nothing);

describe('the figures of a ride', () => {
  it('are those of a straight course of the speed, in closed form', () => {
    // e goes from -4 m/s to +4 m/s in 100 s: half of the time within 2 m/s; the mean of e squared is 16 / 3.
    const { figures, worstLowAt, meanSpeed } = figuresOf(ride(seconds(101), (t) => SET - 4 + 0.08 * t));
    expectClose(figures.time_s as number, 100, 1e-9);
    expectClose(figures.within_band_pct as number, 50, 1e-9);
    expectClose(figures.mean_error_kmh as number, 0, 1e-9);
    expectClose(figures.rms_error_kmh as number, 3.6 * Math.sqrt(16 / 3), 1e-9);
    expectClose(figures.worst_low_kmh as number, -14.4, 1e-9);
    expectClose(figures.worst_high_kmh as number, 14.4, 1e-9);
    // |e| is spread evenly over 0 to 4 m/s.
    expectClose(figures.p95_abs_error_kmh as number, 0.95 * 14.4, 0.1);
    expectClose(figures.time_lost_s as number, 0, 1e-9);
    expectClose(meanSpeed, SET, 1e-9);
    expect(worstLowAt).toBe(0);
  });

  it('count the time lost against the set speed in force', () => {
    // 100 s at half of the set speed, then 50 s at the new one, which is as slow: 50 s are lost.
    const slow = figuresOf(
      ride(seconds(151), () => 10),
      course([{ at: 1000, setSpeed: 10 }]),
    );
    expectClose(slow.figures.time_lost_s as number, 50, 1e-9);
    expectClose(slow.figures.worst_low_kmh as number, -36, 1e-9);
    expect(slow.worstHighAt).toBeNull();
    expectClose(slow.setSpeed.subarray(99, 102), [20, 10, 10], 0);
  });

  it('leave the gaps out', () => {
    const whole = ride(seconds(101), (t) => (t > 40 && t < 60 ? 2 : SET));
    const gap = { from: whole.distance[40]!, to: whole.distance[41]!, reason: 'no fix' };
    const kept = [...seconds(41), ...seconds(41).map((i) => i + 60)];
    const pick = (values: Float64Array) => Float64Array.from(kept, (i) => values[i]!);
    const cut = figuresOf({
      ...whole,
      size: kept.length,
      distance: pick(whole.distance),
      time: pick(whole.time),
      speed: pick(whole.speed),
      gaps: [gap],
    });
    expectClose(cut.figures.time_s as number, 80, 1e-9);
    expectClose(cut.figures.within_band_pct as number, 100, 1e-9);
    expect(cut.figures.worst_low_kmh).toBe(0);
  });

  it('mean the throttle over the time that it is known for, and say where it is not', () => {
    const throttle = Float64Array.from(seconds(101), (t) => (t < 51 ? 0.2 : t < 90 ? 0.4 : Number.NaN));
    const { figures } = figuresOf(ride(seconds(101), () => SET, { throttle }));
    // 50 s of 0.2, one between, 38 of 0.4.
    expectClose(figures.throttle_mean_pct as number, (100 * (50 * 0.2 + 0.3 + 38 * 0.4)) / 89, 1e-9);
    expect(figuresOf(ride(seconds(101), () => SET)).figures.throttle_mean_pct).toEqual({
      none: 'the log has no throttle',
    });
  });
});
