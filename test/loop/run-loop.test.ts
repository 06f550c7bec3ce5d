import { describe, expect, test } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { LIMIT_BRAKE, LIMIT_LOWER, LIMIT_RATE, LIMIT_UPPER } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { LoopResult } from '../../src/loop/result.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { forceOf, laggedVehicle, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const G = 9.80665;
const schemes = ['exact', 'fast'] as const;
const hilly = roadOver(stations(6000, 10), {
  grade: (s) => 0.05 * Math.sin(s / 260) + 0.02 * Math.sin(s / 90),
  headwind: (s) => 2 + Math.sin(s / 400),
});
const flat = roadOver(stations(3000, 10));
const total = (column: Float64Array): number => column.reduce((sum, value) => sum + value, 0);

describe.each(schemes)('a run over hills by the %s scheme', (scheme) => {
  const plan = planOver(hilly, laggedVehicle, { scheme });
  const result = runLoop(plan);
  const { series } = replay(plan, result.checkpoints[0]!, 1e9);
  const { bins } = result;

  test('ends at the end of the road', () => {
    expect(result.status).toBe('completed');
    expect(result.endDistance).toBe(hilly.distance[hilly.size - 1]);
    expectClose(total(bins.time), result.endTime, 1e-8);
    expect(bins.size).toBe(Math.ceil(result.endDistance / 50));
    expect(bins.edge.length).toBe(bins.size + 1);
    expect(bins.edge[bins.size]).toBe(result.endDistance);
  });

  test('every bin holds the samples that start in it, and nothing else', () => {
    for (const bin of [0, 7, 33, bins.size - 1]) {
      const rows = [...series.distance.keys()].filter(
        (i) => series.distance[i]! >= bins.edge[bin]! && series.distance[i]! < bins.edge[bin + 1]!,
      );
      const pick = (column: Float64Array): number[] => rows.map((i) => column[i]!);
      const errors = pick(series.speed).map((v) => v - 17);
      const commands = rows.map((i) => Math.min(1, Math.max(0, series.command[i]!)));
      const before = rows[0]! > 0 ? Math.min(1, Math.max(0, series.command[rows[0]! - 1]!)) : commands[0]!;
      const travel = commands.map((u, i) => Math.abs(u - (i > 0 ? commands[i - 1]! : before)));
      expectClose(bins.timeAt[bin]!, series.time[rows[0]!]!, 1e-9, 'time at');
      expect(bins.speedMin[bin]).toBe(Math.min(...pick(series.speed)));
      expect(bins.speedMax[bin]).toBe(Math.max(...pick(series.speed)));
      expectClose(bins.errorMin[bin]!, Math.min(...errors), 1e-12, 'least error');
      expectClose(bins.errorMax[bin]!, Math.max(...errors), 1e-12, 'greatest error');
      expect(bins.throttleMax[bin]).toBe(Math.max(...pick(series.actuator)));
      expect(bins.throttleMin[bin]).toBe(Math.min(...pick(series.actuator)));
      if (bin === 0) continue;
      expectClose(bins.throttleTravel[bin]!, total(Float64Array.from(travel)), 1e-12, 'travel');
      if (bin === bins.size - 1) continue;
      expectClose(bins.time[bin]!, 0.02 * rows.length, 1e-12, 'time');
      expectClose(bins.errorMean[bin]!, 0.02 * errors.reduce((a, e) => a + e, 0), 1e-11, 'integral of e');
      expectClose(
        bins.errorSquare[bin]!,
        0.02 * errors.reduce((a, e) => a + e * e, 0),
        1e-11,
        'of e squared',
      );
      const inside = errors.filter((e) => Math.abs(e) <= 0.5).length;
      expectClose(bins.timeInBand[bin]!, 0.02 * inside, 1e-12, 'time in the band');
      const upper = rows.filter((i) => series.command[i]! >= 1).length;
      expectClose(bins.timeUpper[bin]!, 0.02 * upper, 1e-12, 'time at the upper limit');
    }
  });

  test('the account of energy closes and agrees with the bins', () => {
    const { ledger } = result;
    expect(ledger.residual).toBeLessThan(scheme === 'exact' ? 1e-9 : 1e-12);
    expectClose(total(bins.driveWork), ledger.drive, 1e-7 * ledger.drive);
    expectClose(total(bins.regenerationWork), ledger.regeneration, 1e-7 * ledger.drive);
    const climb = 215 * G * (hilly.elevation[hilly.size - 1]! - hilly.elevation[0]!);
    expectClose(ledger.climb, climb, 200);
  });

  test('the same plan gives the same bytes', () => {
    const again = runLoop(plan);
    expect(again).toEqual(result);
  });

  test('a checkpoint stands about every kilometre', () => {
    expect(result.checkpoints.length).toBe(Math.floor(result.endDistance / 1000) + 1);
    result.checkpoints.forEach((point, i) => {
      expect(point.distance).toBeGreaterThanOrEqual(1000 * i);
      expect(point.distance).toBeLessThan(1000 * i + 51);
    });
  });
});

describe('how a run ends', () => {
  const end = (more: Partial<LoopPlan>, vehicle: Vehicle = referenceMotorcycle): LoopResult =>
    runLoop(planOver(flat, vehicle, more));

  test.each(schemes)('at standstill: stopped (%s)', (scheme) => {
    const result = end({ controller: { kind: 'locked', throttle: 0 }, scheme });
    expect(result.status).toBe('stopped');
    expect(result.checkpoints.length).toBe(1);
    // m dv/dt = -(m g c0 + 0.36 v^2) from 17 m/s: x = m / (2 f2) ln(1 + f2 v0^2 / f0).
    const f0 = 260 * G * 0.015;
    const distance = (260 / 0.72) * Math.log(1 + (0.36 * 17 * 17) / f0);
    expectClose(result.endDistance, distance, scheme === 'exact' ? 1e-8 : 2e-3);
  });

  test.each(schemes)('below what the gear can turn: stalled (%s)', (scheme) => {
    const vehicle = { ...referenceMotorcycle, drive: { ...referenceMotorcycle.drive, stallSpeed: 5 } };
    const result = end({ controller: { kind: 'locked', throttle: 0 }, scheme }, vehicle);
    expect(result.status).toBe('stalled');
    const last = result.bins.size - 1;
    expect(result.bins.speedMin[last]).toBeGreaterThanOrEqual(5);
    expect(result.bins.speedMin[last]).toBeLessThan(5.1);
  });

  test('a start below the stall speed has no sample', () => {
    const vehicle = { ...referenceMotorcycle, drive: { ...referenceMotorcycle.drive, stallSpeed: 18 } };
    const result = end({}, vehicle);
    expect(result.status).toBe('stalled');
    expect(result.bins.size).toBe(0);
    expect(result.ledger.residual).toBe(0);
  });

  test('after the longest driving time: time_limit', () => {
    const result = end({ timeLimit: 30 });
    expect(result.status).toBe('time_limit');
    expectClose(result.endTime, 30, 1e-9);
    expectClose(result.endDistance, 510, 1e-6);
  });

  test('with numbers that run away: non_finite, and none of them in the record', () => {
    const drive = forceOf({ peakForce: 1e300 });
    const result = end({ controller: { kind: 'locked', throttle: 1 } }, { ...referenceMotorcycle, drive });
    expect(result.status).toBe('non_finite');
    for (const value of Object.values(result.bins))
      if (value instanceof Float64Array) expect(value.every(Number.isFinite)).toBe(true);
    expect(Object.values(result.ledger).every((v) => v === null || Number.isFinite(v))).toBe(true);
  });

  test('a plan that cannot run is refused', () => {
    expect(() => end({ bin: 0 })).toThrow(InputError);
    expect(() => end({ bands: [1, 2, 3, 4, 5] })).toThrow(InputError);
    expect(() => end({ timeLimit: Number.NaN })).toThrow(InputError);
    expect(() => runLoop(planOver({ ...flat, size: 1 }, referenceMotorcycle))).toThrow(
      /road-too-short|no length/,
    );
  });
});

describe('limits', () => {
  test.each(schemes)('a wall of a hill shows the upper limit, a plunge the lower one (%s)', (scheme) => {
    const road = roadOver(stations(3000, 10), {
      grade: (s) => (s > 500 && s < 1000 ? 0.16 : s > 1800 && s < 2300 ? -0.16 : 0),
    });
    const vehicle = { ...laggedVehicle, actuator: { ...IDEAL_ACTUATOR, lag: 0.06, rateLimit: 0.05 } };
    const plan = planOver(road, vehicle, { scheme });
    const { bins } = runLoop(plan);
    const bits = replay(plan, { settledAt: 0 }, 1e9).series.limit;
    const seen = bits.reduce((all, bit) => all | bit, 0);
    expect(seen).toBe(LIMIT_UPPER | LIMIT_LOWER | LIMIT_RATE);
    const at = (distance: number): number => Math.floor(distance / 50);
    expectClose(bins.timeUpper[at(900)]!, bins.time[at(900)]!, 1e-9);
    expectClose(bins.timeLower[at(2250)]!, bins.time[at(2250)]!, 1e-9);
    expect(total(bins.timeRate)).toBeGreaterThan(0.1);
  });

  test.each(schemes)('the rider holds the overspeed, and the brake has its own account (%s)', (scheme) => {
    const road = roadOver(stations(3000, 10), { grade: (s) => (s > 500 && s < 2500 ? -0.15 : 0) });
    const plan = planOver(road, laggedVehicle, { scheme, rider: { brakesAbove: 2, shifts: [] } });
    const result = runLoop(plan);
    expect(result.status).toBe('completed');
    expect(Math.max(...result.bins.speedMax)).toBeLessThan(19.001);
    const bin = Math.floor(2000 / 50);
    expectClose(result.bins.speedMean[bin]!, 19, 1e-3);
    expectClose(result.bins.timeBrake[bin]!, result.bins.time[bin]!, 1e-9);
    expectClose(total(result.bins.brakeWork), result.ledger.brake, 1e-6);
    expect(result.ledger.brake).toBeGreaterThan(1e5);
    expect(result.ledger.residual).toBeLessThan(1e-9);
    const { series } = replay(plan, { settledAt: 0 }, 1e9);
    const i = series.limit.findIndex((bits) => (bits & LIMIT_BRAKE) !== 0);
    expect(series.brakeForce[i]).toBeGreaterThan(0);
    expect(Math.max(...series.brakeForce)).toBeLessThanOrEqual(3 * (215 + 9) + 1e-9);
  });
});

test('a locked throttle settles where drive and road are in balance', () => {
  for (const grade of [-0.01, 0, 0.02]) {
    const road = roadOver(stations(30_000, 30_000), { grade: () => grade, headwind: () => 3 });
    const result = runLoop(
      planOver(road, referenceMotorcycle, { controller: { kind: 'locked', throttle: 0.4 }, bin: 1000 }),
    );
    // 360 N = m g (sin + c0 cos) + 0.36 (v + 3)^2
    const cosine = 1 / Math.sqrt(1 + grade * grade);
    const air = (360 - 260 * G * cosine * (grade + 0.015)) / 0.36;
    expectClose(result.bins.speedMean[result.bins.size - 1]!, Math.sqrt(air) - 3, 1e-6);
  }
});

test('a throttle locked level holds the set speed on the level, and is locked again where the set speed changes', () => {
  const plan = planOver(flat, referenceMotorcycle, {
    controller: { kind: 'locked', throttle: 'level' },
    hold: {
      setSpeed: 17,
      setSpeedIs: 'true_speed',
      startSpeed: 17,
      changes: [{ at: { distance: 1500 }, setSpeed: 20, ramp: null }],
    },
  });
  const { series } = replay(plan, { settledAt: 0 }, 1e9);
  const throttle = (v: number): number => (260 * G * 0.015 + 0.36 * v * v) / 900;
  const i = series.distance.findIndex((x) => x >= 1500);
  expectClose(series.speed[i]!, 17, 1e-9);
  expectClose(series.command[i - 1]!, throttle(17), 1e-12);
  expectClose(series.command[i]!, throttle(20), 1e-12);
  expect(series.setSpeed[i - 1]).toBe(17);
  expect(series.setSpeed[i]).toBe(20);
});

describe('set speed', () => {
  const changed = (ramp: number | null, at: { distance: number } | { time: number }): LoopPlan =>
    planOver(flat, referenceMotorcycle, {
      hold: {
        setSpeed: 17,
        setSpeedIs: 'true_speed',
        startSpeed: 17,
        changes: [{ at, setSpeed: 19, ramp }],
      },
    });

  test('a change by time comes with the first sample at that time, a step or a ramp', () => {
    const step = replay(changed(null, { time: 10 }), { settledAt: 0 }, 2000).series;
    expect(step.reference[499]).toBe(17);
    expect(step.reference[500]).toBe(19);
    const ramp = replay(changed(0.5, { time: 10 }), { settledAt: 0 }, 2000).series;
    expect(ramp.setSpeed[500]).toBe(19);
    expectClose(ramp.reference[500]!, 17.01, 1e-12);
    expectClose(ramp.reference[599]!, 18, 1e-9);
    expect(ramp.reference[700]).toBe(19);
  });

  test('start speed and set speed may differ', () => {
    const plan = planOver(flat, referenceMotorcycle, {
      hold: { setSpeed: 20, setSpeedIs: 'true_speed', startSpeed: 15, changes: [] },
    });
    const { series } = replay(plan, runLoop(plan).checkpoints[0]!, 1e9);
    expect(series.speed[0]).toBe(15);
    expectClose(series.speed[series.size - 1]!, 20, 0.01);
  });

  test.each(['true_speed', 'indicated'] as const)('a scale error of 3 %% under %s', (setSpeedIs) => {
    const vehicle = {
      ...referenceMotorcycle,
      sensor: { ...IDEAL_SENSOR, filter: 0, delay: 0, scaleError: 0.03 },
    };
    const plan = planOver(flat, vehicle, {
      hold: { setSpeed: 17, setSpeedIs, startSpeed: 17, changes: [] },
    });
    const result = runLoop(plan);
    const last = result.bins.size - 2;
    expectClose(result.bins.speedMean[last]!, 17 / 1.03, 2e-3);
    const error = result.bins.errorMean[last]! / result.bins.time[last]!;
    expectClose(error, setSpeedIs === 'indicated' ? 0 : 17 / 1.03 - 17, 2e-3);
    if (setSpeedIs === 'indicated') expectClose(result.bins.errorMax, new Float64Array(60), 1e-9);
  });
});

test('a road along time and the same road along distance agree', () => {
  // At a constant speed the two are one; with a soft loop over small hills they stay close.
  const grade = (time: number): number => 1e-4 * Math.sin(time / 7);
  const timed = roadOver(stations(100, 0.25), { grade }, { speed: 20 });
  const along = roadOver(stations(2000, 5), { grade: (s) => grade(s / 20) });
  const hold = { setSpeed: 20, setSpeedIs: 'true_speed', startSpeed: 20, changes: [] } as const;
  const byTime = replay(planOver(timed, referenceMotorcycle, { hold }), { settledAt: 0 }, 1e9);
  const byDistance = replay(planOver(along, referenceMotorcycle, { hold }), { settledAt: 0 }, 1e9);
  expect(byTime.status).toBe('completed');
  expectClose(byTime.series.time[byTime.series.size - 1]!, 99.98, 1e-9);
  const rows = Math.min(byTime.series.size, byDistance.series.size);
  expectClose(byTime.series.speed.slice(0, rows), byDistance.series.speed.slice(0, rows), 2e-6);
  const level = { grade: () => 0.03 };
  const a = runLoop(
    planOver(roadOver(stations(100, 100), level, { speed: 20 }), referenceMotorcycle, { hold }),
  );
  const b = runLoop(planOver(roadOver(stations(2000, 2000), level), referenceMotorcycle, { hold }));
  expectClose(a.ledger.drive, b.ledger.drive, 1e-4);
});

test('bins narrower than the way of a sample pass values on and have no time', () => {
  const { bins } = runLoop(planOver(roadOver(stations(50, 10)), referenceMotorcycle, { bin: 0.1 }));
  expect(bins.size).toBe(500);
  const empty = [...bins.time.keys()].filter((i) => bins.time[i] === 0);
  expect(empty.length).toBeGreaterThan(300);
  for (const i of empty) expectClose(bins.speedMean[i]!, 17, 1e-6);
});
