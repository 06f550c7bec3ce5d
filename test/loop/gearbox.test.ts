// Shifts on the way: an automatic gearbox by its lines, a clutch by the rider's plan. The drive is written here: 60 N m
// at full throttle, 8 N m of drag at closed throttle, at every shaft speed; three gears.

import { describe, expect, it } from 'vitest';
import type { ControllerSetup } from '../../src/control/setup.ts';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { LIMIT_SHIFT } from '../../src/loop/plan.ts';
import { nearestCheckpoint, replay } from '../../src/loop/replay.ts';
import type { FullSeries } from '../../src/loop/result.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import type { Road } from '../../src/road/road.ts';
import type { Drive, Gearbox } from '../../src/vehicle/drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { forceOf, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const SAMPLE = 0.02;
const FULL = 60;
const DRAG = 8;
const RATIOS = [20, 14, 10];
const INERTIA = 0.1;
const MASS = 260;

function geared(gearbox: Gearbox, gear: number, more: Partial<Vehicle> = {}): Vehicle {
  const drive: Drive = {
    ...forceOf({ peakForce: FULL, closedThrottleForce: DRAG, lag: 0 }),
    kind: 'engine',
    gears: RATIOS.map((ratio) => ({ ratio, inertia: INERTIA * ratio * ratio })),
    gear,
    gearbox,
    idleSpeed: 130,
    stallSpeed: 60,
  };
  return { ...referenceMotorcycle, drive, ...more };
}
const level = (length: number): Road => roadOver(stations(length, 50));
const hilly = (length: number): Road =>
  roadOver(stations(length, 50), { grade: (s) => 0.05 * Math.sin(s / 150) });
/** Air and rolling resistance on the level [N]. */
const resistance = (v: number): number => 0.5 * 1.2 * 0.6 * v * v + MASS * 9.80665 * 0.015;
const throttleFor = (v: number, gear: number): number =>
  (resistance(v) / RATIOS[gear]! + DRAG) / (FULL + DRAG);
const effectiveMass = (gear: number): number => MASS + INERTIA * RATIOS[gear]! ** 2;
const whole = (plan: LoopPlan): FullSeries =>
  replay(plan, runLoop(plan).checkpoints[0]!, Number.POSITIVE_INFINITY).series;
const shifting = (series: FullSeries): number[] =>
  Array.from(series.limit.keys()).filter((i) => (series.limit[i]! & LIMIT_SHIFT) !== 0);

describe.each(['exact', 'fast'] as const)('an automatic gearbox (%s)', (scheme) => {
  const automatic: Gearbox = {
    kind: 'automatic',
    throttle: Float64Array.of(0, 1),
    upSpeed: Float64Array.of(250, 330),
    downSpeed: Float64Array.of(140, 190),
    gap: 0.3,
    dwell: 1.5,
  };
  const upAndDown = planOver(level(3000), geared(automatic, 0), {
    scheme,
    hold: {
      setSpeed: 10,
      setSpeedIs: 'true_speed',
      startSpeed: 10,
      changes: [
        { at: { distance: 200 }, setSpeed: 32, ramp: 1.5 },
        { at: { distance: 1500 }, setSpeed: 10, ramp: 1 },
      ],
    },
  });
  const result = runLoop(upAndDown);
  const series = whole(upAndDown);
  const at = (time: number): number => Math.round(time / SAMPLE);

  it('goes up and down through the gears, each time where its line is crossed', () => {
    expect(result.shifts.map(({ from, to }) => [from, to])).toEqual([
      [0, 1],
      [1, 2],
      [2, 1],
      [1, 0],
    ]);
    for (const { time, from, to, resumedAt } of result.shifts) {
      expect(resumedAt).toBeNull();
      const speeds = [at(time) - 1, at(time)].map((i) => RATIOS[from]! * series.speed[i]!);
      const throttle = series.actuator[at(time) - 1]!;
      const line = to > from ? 250 + 80 * throttle : 140 + 50 * throttle;
      // Crossed within the sample before it: both sides are within what speed and throttle do in one sample.
      if (to > from) expect(speeds[1]).toBeGreaterThan(line - 1);
      else expect(speeds[1]).toBeLessThan(line + 1);
      expectClose(speeds[0]!, line, 3);
    }
  });

  it('is without torque for the gap, while hold goes on, and rests for the dwell', () => {
    const samples = shifting(series);
    expect(samples).toHaveLength(4 * 15);
    for (const i of samples) {
      expect(series.driveForce[i]).toBe(0);
      expect(series.shaftSpeed[i]).toBe(0);
      expect(series.proportional[i]).not.toBe(0);
    }
    result.shifts.forEach(({ time, distance, to }, i) => {
      expectClose(series.distance[at(time)]!, distance, 1e-9);
      expect(samples).toContain(at(time));
      expect(samples).toContain(at(time) + 14);
      expect(series.gear[at(time)]).toBe(to);
      expect(series.gear[at(time) - 1]).not.toBe(to);
      if (i > 0) expect(time - result.shifts[i - 1]!.time).toBeGreaterThanOrEqual(1.5 - 1e-9);
    });
    expectClose(
      result.bins.timeShift.reduce((sum, time) => sum + time, 0),
      4 * 0.3,
      1e-9,
    );
  });

  it('between its lines keeps the gear that it came with', () => {
    // At 16 m/s: 2nd gear turns 224 rad/s, 3rd 160 rad/s: both lie between the lines of a light throttle.
    const gearsAt = (from: number, to: number): Set<number> =>
      new Set(
        [...series.gear.slice(from, to)].filter((_, i) => Math.abs(series.speed[from + i]! - 16) < 0.3),
      );
    const top = series.speed.indexOf(series.speed.reduce((most, v) => Math.max(most, v), 0));
    expect([...gearsAt(0, top)]).toEqual([1]);
    expect([...gearsAt(top, series.size)]).toEqual([2]);
  });

  it('takes kinetic energy from what turns before the gear, and the account closes', () => {
    let lost = 0;
    for (const { time, from, to } of result.shifts) {
      const open = series.speed[at(time)]!;
      const closed = series.speed[at(time) + 15]!;
      lost += 0.5 * (effectiveMass(from) - MASS) * open * open;
      lost += 0.5 * (MASS - effectiveMass(to)) * closed * closed;
    }
    expectClose(result.ledger.shifts, lost, 1e-6 * Math.abs(lost) + 1e-6);
    expect(result.ledger.residual).toBeLessThan(1e-6);
  });

  it('waits out the dwell where it would shift again at once', () => {
    // Lines that overlap: it hunts, but no faster than the dwell.
    const hunting: Gearbox = {
      ...automatic,
      upSpeed: Float64Array.of(150, 150),
      downSpeed: Float64Array.of(200, 200),
    };
    const { shifts } = runLoop(planOver(level(400), geared(hunting, 1), { scheme }));
    expect(shifts.length).toBeGreaterThan(5);
    shifts.forEach(({ time }, i) => {
      if (i > 0) expectClose(time - shifts[i - 1]!.time, 1.5, 1e-9);
    });
  });

  it('without gap and dwell still runs a sample between two shifts', () => {
    const hasty: Gearbox = {
      ...automatic,
      upSpeed: Float64Array.of(150, 150),
      downSpeed: Float64Array.of(200, 200),
      gap: 0,
      dwell: 0,
    };
    const { shifts, status } = runLoop(planOver(level(50), geared(hasty, 1), { scheme }));
    expect(status).toBe('completed');
    shifts.forEach(({ time }, i) => {
      if (i > 0) expectClose(time - shifts[i - 1]!.time, SAMPLE, 1e-9);
    });
  });
});

describe.each(['exact', 'fast'] as const)('a planned shift on a clutch gearbox (%s)', (scheme) => {
  const clutch: Gearbox = { kind: 'clutch', open: 0.4, resume: 1 };
  const down = (more: Partial<LoopPlan> = {}, vehicle = geared(clutch, 2)): LoopPlan =>
    planOver(level(2000), vehicle, {
      scheme,
      rider: { brakesAbove: null, shifts: [{ distance: 500, gear: 1 }] },
      ...more,
    });
  const plan = down();
  const result = runLoop(plan);
  const series = whole(plan);
  const samples = shifting(series);
  const first = samples[0]!;

  it('begins with the first sample at its place and takes its times', () => {
    expect(samples).toEqual(Array.from({ length: 70 }, (_, i) => first + i));
    expect(series.distance[first]).toBeGreaterThanOrEqual(500);
    expect(series.distance[first - 1]).toBeLessThan(500);
    expect(result.shifts).toHaveLength(1);
    expect(result.shifts[0]).toMatchObject({ from: 2, to: 1 });
    expectClose(result.shifts[0]!.time, first * SAMPLE, 1e-9);
    expectClose(result.shifts[0]!.resumedAt!, (first + 70) * SAMPLE, 1e-9);
    expectClose(
      result.bins.timeShift.reduce((sum, time) => sum + time, 0),
      1.4,
      1e-9,
    );
  });

  it('coasts with the throttle closed, then holds the speed by the rider', () => {
    const v0 = series.speed[first]!;
    for (let i = first; i < first + 20; i++) {
      expect(series.command[i]).toBe(0);
      expect(series.driveForce[i]).toBe(0);
    }
    const v1 = series.speed[first + 20]!;
    expectClose(v0 - v1, (resistance((v0 + v1) / 2) / MASS) * 0.4, 1e-4);
    for (let i = first + 20; i < first + 70; i++) {
      expectClose(series.command[i]!, throttleFor(v1, 1), 1e-12);
      expectClose(series.speed[i]!, v1, 1e-5);
    }
  });

  it('resumes without a bump, by a ramp from the measured speed', () => {
    const end = first + 70;
    expectClose(
      series.command[end]!,
      series.command[end - 1]!,
      0.15 * 0.011,
      'no more than one step of the ramp',
    );
    const start = series.speed[end]!;
    for (let i = end; series.reference[i]! < 17 - 1e-9; i++)
      expectClose(series.reference[i]!, start + 0.5 * SAMPLE * (i - end + 1), 1e-5);
    const last = series.size - 1;
    expectClose(series.speed[last]!, 17, 0.01);
    expectClose(series.command[last]!, throttleFor(17, 1), 0.001);
  });

  it('keeps the account of energy closed', () => {
    expect(result.ledger.residual).toBeLessThan(1e-6);
    expect(result.ledger.shifts).not.toBe(0);
  });

  it('tells of a shift, not of a command at its lower limit', () => {
    for (const i of samples) expect(series.limit[i]).toBe(LIMIT_SHIFT);
    expect(result.bins.timeLower.every((time) => time === 0)).toBe(true);
  });

  it('learns of a change of set speed while hold is off', () => {
    const changed = down({
      hold: {
        setSpeed: 17,
        setSpeedIs: 'true_speed',
        startSpeed: 17,
        changes: [{ at: { time: (first + 30) * SAMPLE }, setSpeed: 14, ramp: null }],
      },
    });
    const seen = whole(changed);
    expect(seen.speed.findIndex((v, i) => v !== series.speed[i])).toBeGreaterThan(first + 70);
    expect(seen.setSpeed[first + 29]).toBe(17);
    expect(seen.setSpeed[first + 30]).toBe(14);
    expectClose(seen.reference[first + 80]!, seen.speed[first + 70]! - 0.5 * 11 * SAMPLE, 1e-5);
    expectClose(seen.speed[seen.size - 1]!, 14, 0.01);
  });

  it('goes on with the rate of a change of set speed that is under way', () => {
    const slow = whole(
      down({
        hold: {
          setSpeed: 17,
          setSpeedIs: 'true_speed',
          startSpeed: 17,
          changes: [{ at: { distance: 300 }, setSpeed: 12, ramp: 0.1 }],
        },
      }),
    );
    const end = shifting(slow).at(-1)! + 1;
    const start = slow.speed[end]!;
    const ticks = Math.floor((start - 12) / (0.1 * SAMPLE)) - 1;
    expect(ticks * SAMPLE).toBeGreaterThan(30);
    for (let i = 0; i < ticks; i += 50)
      expectClose(slow.reference[end + i]!, start - 0.1 * SAMPLE * (i + 1), 1e-5);
  });

  it('lets the rider brake for no more overspeed than before', () => {
    // The hold resumes at the overspeed itself, but the rider still brakes above the set speed.
    const steep = down({
      road: roadOver(stations(2000, 50), { grade: () => -0.14 }),
      rider: { brakesAbove: 2, shifts: [500, 900].map((distance, i) => ({ distance, gear: [1, 2][i]! })) },
    });
    const run = runLoop(steep);
    expect(run.shifts).toHaveLength(2);
    const fastest = run.bins.errorMax.reduce((most, e) => Math.max(most, e), 0);
    expectClose(fastest, 2, 0.001);
    expect(run.ledger.residual).toBeLessThan(1e-6);
  });

  it('lets the rider follow a set speed that rises after the shift', () => {
    const rising = down({
      road: roadOver(stations(3000, 50), { grade: () => -0.14 }),
      rider: { brakesAbove: 2, shifts: [{ distance: 500, gear: 1 }] },
      hold: {
        setSpeed: 17,
        setSpeedIs: 'true_speed',
        startSpeed: 17,
        changes: [{ at: { distance: 1200 }, setSpeed: 20, ramp: null }],
      },
    });
    const { bins } = runLoop(rising);
    expectClose(bins.speedMax[bins.size - 1]!, 22, 0.001);
  });

  it('is followed by the next whose place has been passed meanwhile; the gear in hand needs none', () => {
    const shifts = [500, 505, 510].map((distance, i) => ({ distance, gear: [1, 1, 0][i]! }));
    const run = runLoop(down({ rider: { brakesAbove: null, shifts } }));
    expect(run.shifts.map(({ from, to }) => [from, to])).toEqual([
      [2, 1],
      [1, 0],
    ]);
    expectClose(run.shifts[1]!.time, run.shifts[0]!.resumedAt!, 1e-9);
  });

  it('locks a locked throttle again for the new gear, and a given one as it was', () => {
    const seen = (controller: ControllerSetup): FullSeries => whole(down({ controller }));
    const locked = seen({ kind: 'locked', throttle: 'level' });
    expectClose(locked.command[0]!, throttleFor(17, 2), 1e-9);
    expectClose(locked.command[first + 71]!, throttleFor(17, 1), 1e-9);
    const given = seen({ kind: 'locked', throttle: 0.3 });
    const shift = shifting(given);
    expect(shift).toHaveLength(70);
    expect(given.command[shift[0]! + 5]).toBe(0);
    expect(given.command[shift[69]! + 1]).toBe(0.3);
  });

  it('that lies before a settled start has been made', () => {
    const { series: seen } = replay(plan, { settledAt: 600 }, 700);
    expect(new Set(seen.gear)).toEqual(new Set([1]));
    expect(shifting(seen)).toEqual([]);
    for (const v of seen.speed) expectClose(v, 17, 1e-9);
  });

  it('of another plan is taken from the checkpoint on', () => {
    const lower = down({}, geared(clutch, 1));
    const { series: seen } = replay(
      { ...lower, rider: { brakesAbove: null, shifts: [] } },
      result.checkpoints[0]!,
      300,
    );
    expect(new Set(seen.gear)).toEqual(new Set([1]));
    const extra = {
      ...plan,
      rider: { brakesAbove: null, shifts: [...plan.rider.shifts, { distance: 1200, gear: 0 }] },
    };
    const { series: more } = replay(extra, nearestCheckpoint(result, 1100), 1500);
    expect(new Set(more.gear)).toEqual(new Set([0, 1]));
    expect(shifting(more)).toHaveLength(70);
  });
});

describe.each(['exact', 'fast'] as const)('a run with shifts (%s)', (scheme) => {
  const everything: Partial<Vehicle> = {
    actuator: { ...IDEAL_ACTUATOR, lag: 0.05, rateLimit: 3, deadTime: 0.03, slack: 0.02, resolution: 0.001 },
    sensor: {
      ...IDEAL_SENSOR,
      pulses: { spacing: 0.04, reading: { kind: 'timed', clock: 1e-6 } },
      noise: { sd: 0.02, seed: 9 },
      filter: 0.05,
      delay: 0.025,
    },
  };
  const boxes: [string, Gearbox][] = [
    [
      'automatic',
      {
        kind: 'automatic',
        throttle: Float64Array.of(0, 1),
        upSpeed: Float64Array.of(200, 320),
        downSpeed: Float64Array.of(130, 230),
        gap: 0.3,
        dwell: 1,
      },
    ],
    ['clutch', { kind: 'clutch', open: 0.35, resume: 0.8 }],
  ];

  it.each(boxes)('goes on from any checkpoint bit for bit, whatever the chunks: %s', (_, box) => {
    const plan = planOver(hilly(4000), geared(box, 1, everything), {
      scheme,
      rider: {
        brakesAbove: null,
        shifts: [990, 1000, 1995, 3000].map((distance, i) => ({ distance, gear: [2, 1, 2, 1][i]! })),
      },
    });
    const result = runLoop(plan);
    expect(result.shifts.length).toBeGreaterThan(2);
    expect(result.ledger.residual).toBeLessThan(1e-6);
    const series = whole(plan);
    expect(series.size).toBe(Math.ceil(result.endTime / SAMPLE - 1e-9));
    for (const checkpoint of result.checkpoints.slice(1)) {
      const rest = replay(plan, checkpoint, Number.POSITIVE_INFINITY).series;
      const from = series.size - rest.size;
      expectClose(checkpoint.time, series.time[from]!, 0);
      for (const key of ['speed', 'measured', 'command', 'actuator', 'driveForce', 'gear', 'limit'] as const)
        expect(
          rest[key].findIndex((value, i) => !Object.is(value, series[key][from + i])),
          key,
        ).toBe(-1);
    }
  });
});
