import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import * as bus from '../../src/control/bus.ts';
import * as at from '../../src/loop/layout.ts';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { detailRecorder, type Heard } from '../../src/loop/record-detail.ts';
import { replay } from '../../src/loop/replay.ts';
import type { Distribution } from '../../src/loop/result.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { expectClose } from '../compare.ts';
import { at as actAt, brakeTo, CANCEL, ENGAGE, patientUnit, RESUME, rider } from './hold-scenes.ts';
import { laggedVehicle, planOver, roadOver, stations } from './scenes.ts';

const SET_SPEED = 20;
const MASS = 260;

interface Ride {
  readonly sample: number;
  /** One more than samples: the last is the speed at the end. */
  readonly speeds: readonly number[];
  readonly commands?: readonly number[];
}

/** What a kernel leaves of samples [first, first + count) of a ride. */
function heard({ sample, speeds, commands = [] }: Ride, first: number, count: number): Heard {
  const s = new Float64Array(100);
  const p = new Float64Array(100);
  const chunk = new Float64Array(at.C_SIZE);
  const log = new Float64Array(at.LOG_ROWS * at.L_STRIDE);
  s[bus.BUS_TARGET] = SET_SPEED;
  s[at.SPEED] = speeds[first + count]!;
  s[at.EFFECTIVE_MASS] = MASS;
  p[at.P_TO_TRUE] = 1;
  p[at.P_GREATEST] = 1;
  chunk[at.C_TICKS] = count;
  chunk[at.C_TIME] = count * sample;
  for (let i = 0; i < count; i++) {
    log[i * at.L_STRIDE + at.L_SPEED] = speeds[first + i]!;
    log[i * at.L_STRIDE + at.L_COMMAND] = commands[first + i] ?? 0.5;
  }
  return { s, p, log, chunk };
}

/** Rides all of it in bins of so many samples. */
function recorded(ride: Ride, perBin = 30) {
  const count = ride.speeds.length - 1;
  const recorder = detailRecorder(Math.ceil(count / perBin), ride.sample);
  for (let first = 0; first < count; first += perBin) {
    recorder.add(heard(ride, first, Math.min(perBin, count - first)));
    recorder.close();
  }
  return recorder.finish();
}

const total = (column: ArrayLike<number>): number => Array.from(column).reduce((sum, x) => sum + x, 0);
const along = (count: number, of: (i: number) => number): number[] =>
  Array.from({ length: count + 1 }, (_, i) => of(i));
const timeOf = ({ samples, sample }: Distribution): number => sample * total(samples);
/** Classes that a distribution met, with their samples, over all bins. */
function classes({ index, samples }: Distribution): Map<number, number> {
  const all = new Map<number, number>();
  index.forEach((k, i) => {
    all.set(k, (all.get(k) ?? 0) + samples[i]!);
  });
  return all;
}

describe('the detail of a record', () => {
  it('finds the jerk of an acceleration that rises and falls in a trapezoid', () => {
    // 1 s of +1.5 m/s3, 2 s of even acceleration, 1 s of -1.5 m/s3, at 100 Hz; before and behind it even speed.
    const speed = (i: number): number => {
      const t = i / 100 - 1;
      if (t < 0) return 20;
      if (t < 1) return 20 + 0.75 * t * t;
      if (t < 3) return 20.75 + 1.5 * (t - 1);
      if (t < 4) return 23.75 + 1.5 * (t - 3) - 0.75 * (t - 3) * (t - 3);
      return 24.5;
    };
    const { jerk, acceleration } = recorded({ sample: 0.01, speeds: along(600, speed) });
    const met = classes(jerk);
    // 1.5 m/s3 lies on a border of classes of 0.005: the two beside it. 0.6 s of each ramp have
    // both windows in it, and where the windows come in and go out the last 0.3 % take 0.02 s.
    for (const [sign, near] of [
      [1, [299, 300]],
      [-1, [-301, -300]],
    ] as const) {
      const whole = near.reduce((sum, k) => sum + (met.get(k) ?? 0), 0) / 100;
      expect(whole, String(sign)).toBeGreaterThanOrEqual(0.59);
      expect(whole).toBeLessThanOrEqual(0.65);
    }
    expect(Math.max(...met.keys())).toBeLessThanOrEqual(300);
    // The windows of the first 0.4 s are not full yet.
    expectClose(timeOf(jerk), 6 - 0.4, 1e-9);
    expectClose(timeOf(acceleration), 6, 1e-9);
  });

  it('gives the same jerk whatever the sample time', () => {
    const of = (sample: number): number => {
      const { jerk } = recorded({
        sample,
        speeds: along(Math.round(4 / sample), (i) => 20 + 0.30625 * (i * sample) ** 2),
      });
      const [[k, samples]] = [...classes(jerk)].sort((a, b) => b[1] - a[1]) as [[number, number]];
      expect(samples * sample).toBeGreaterThan(3);
      return (k + 0.5) * 0.005;
    };
    // v = 20 + 0.30625 t^2: 0.6125 m/s3, in the middle of a class.
    for (const sample of [0.005, 0.01, 0.02, 0.04, 0.1, 0.2]) expectClose(of(sample), 0.6125, 1e-9);
  });

  it('sums a sine as the integrals say', () => {
    // e = 0.5 sin(w t), ten periods of 10 s.
    const ride = {
      sample: 0.01,
      speeds: along(10_000, (i) => 20 + 0.5 * Math.sin((2 * Math.PI * i) / 1000)),
    };
    const detail = recorded(ride, 97);
    // Mean of |sin| is 2 / pi, of cos^2 a half.
    expectClose(total(detail.errorAbsolute), (0.5 * 100 * 2) / Math.PI, 1e-3);
    const peak = (0.5 * 2 * Math.PI) / 10;
    expectClose(total(detail.accelerationSquare), (peak * peak * 100) / 2, 5e-5);
    // Up and down by 1 m/s in each period.
    expectClose(total(detail.accelerationAbsolute), 20, 1e-5);
    // Ten times from 19.5 to 20.5 m/s.
    expectClose(total(detail.inertialWork), (10 * MASS * (20.5 ** 2 - 19.5 ** 2)) / 2, 1e-5 * 52_000);
    expectClose(timeOf(detail.error), 100, 1e-9);
    // Share of the time with e above 0.25 m/s (0.9 km/h: 90 classes) is a third.
    const high = [...classes(detail.error)].reduce((sum, [k, samples]) => sum + (k >= 90 ? samples : 0), 0);
    expectClose(high / 10_000, 1 / 3, 2e-3);
  });

  it('has the first moment of the error in each bin', () => {
    // e = 0.4 m/s for 30 samples of 0.02 s: 0.4 * 0.6^2 / 2.
    const detail = recorded({ sample: 0.02, speeds: along(60, () => 20.4) });
    expectClose(detail.errorMoment[0]!, 0.072, 1e-12);
    expectClose(detail.errorMoment[1]!, 0.072, 1e-12);
  });

  it('counts turns of the command beyond half a per cent, and its steepest step', () => {
    const commands = [
      0.5, 0.504, 0.5, 0.504, 0.5, 0.51, 0.52, 0.516, 0.52, 0.51, 0.4, 0.42, 0.41, 0.404, 1.3, 0.9,
    ];
    const { commandRate, reversals, command } = recorded(
      { sample: 0.02, speeds: along(commands.length, () => 20), commands },
      commands.length,
    );
    // Up to 0.52, down to 0.4, up to 0.42, down to 0.404, up to the limit of 1, down: five turns.
    expect(total(reversals)).toBe(5);
    expectClose(commandRate[0]!, (1 - 0.404) / 0.02, 1e-9);
    expectClose(timeOf(command), 0.02 * commands.length, 1e-9);
  });

  it('leaves out what happens with hold off', () => {
    const ride = {
      sample: 0.02,
      speeds: along(90, (i) => (i < 30 || i >= 60 ? 20 : 25)),
      commands: along(90, (i) => (i < 30 ? 0.2 : 0.8)),
    };
    const recorder = detailRecorder(3, ride.sample);
    recorder.add(heard({ ...ride, speeds: along(90, () => 20) }, 0, 30));
    recorder.close();
    recorder.skip(heard(ride, 30, 30));
    recorder.close();
    recorder.add(heard(ride, 60, 30));
    recorder.close();
    const detail = recorder.finish();
    expect(total(detail.errorAbsolute)).toBe(0);
    expect(Array.from(detail.commandRate)).toEqual([0, 0, 0]);
    expect(total(detail.reversals)).toBe(0);
    expectClose(timeOf(detail.error), 1.2, 1e-9);
    expect(detail.error.start).toEqual(Uint32Array.of(0, 1, 1, 2));
  });
});

describe('a run with detail', () => {
  const hilly = roadOver(stations(2000, 10), {
    grade: (s) => 0.05 * Math.sin(s / 120),
    headwind: (s) => 2 * Math.cos(s / 70),
  });
  const plan = (more: Partial<LoopPlan>): LoopPlan => planOver(hilly, laggedVehicle, more);

  it('gives the same bits of all else as without', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('exact' as const, 'fast' as const),
        fc.double({ min: 1, max: 60, noNaN: true }),
        (scheme, bin) => {
          const without = runLoop(plan({ scheme, bin }));
          const { bins, ...rest } = runLoop(plan({ scheme, bin, detail: true }));
          expect(bins.detail).not.toBeNull();
          expect({ ...rest, bins: { ...bins, detail: null } }).toEqual(without);
        },
      ),
      { numRuns: 12, seed: 20_121 },
    );
  });

  it('sums what every sample of the same run says', () => {
    const { bins, checkpoints, endTime } = runLoop(plan({ detail: true }));
    const { series } = replay(plan({}), checkpoints[0]!, 2000);
    let absolute = 0;
    let rough = 0;
    for (let i = 0; i + 1 < series.size; i++) {
      const time = series.time[i + 1]! - series.time[i]!;
      absolute += Math.abs(series.speed[i]! - series.setSpeed[i]!) * time;
      rough += Math.abs(series.speed[i + 1]! - series.speed[i]!);
    }
    const detail = bins.detail!;
    // The series ends with the last whole sample.
    expectClose(total(detail.errorAbsolute), absolute, 0.02 * 0.5);
    expectClose(total(detail.accelerationAbsolute), rough, 0.02 * 0.5);
    for (const distribution of [detail.error, detail.command, detail.acceleration])
      expectClose(timeOf(distribution), endTime, 1e-5);
    for (let i = 0; i < bins.size; i++) {
      let samples = 0;
      for (let k = detail.error.start[i]!; k < detail.error.start[i + 1]!; k++)
        samples += detail.error.samples[k]!;
      expectClose(0.02 * samples, bins.time[i]!, 1e-6, `bin ${i}`);
    }
  });

  it('counts nothing of the time with hold off', () => {
    const acts = [actAt(400, CANCEL), actAt(750, RESUME), actAt(1200, brakeTo(12)), actAt(1500, ENGAGE)];
    const { bins, holdEvents } = runLoop(
      plan({ detail: true, bin: 20, supervisor: patientUnit, rider: rider(...acts) }),
    );
    expect(holdEvents!.map(({ kind }) => kind)).toEqual(['ended', 'resumed', 'ended', 'engaged']);
    const { error, command, acceleration } = bins.detail!;
    expect(total(bins.timeOff)).toBeGreaterThan(20);
    for (const { start, samples } of [error, command, acceleration])
      for (let i = 0; i < bins.size; i++)
        expectClose(
          0.02 * total(samples.subarray(start[i]!, start[i + 1]!)),
          bins.time[i]! - bins.timeOff[i]!,
          1e-6,
          `bin ${i}`,
        );
  });
});
