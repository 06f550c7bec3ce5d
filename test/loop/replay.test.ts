import { describe, expect, test } from 'vitest';
import { nearestCheckpoint, replay } from '../../src/loop/replay.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { traceSpeeds } from '../../src/loop/trace-speeds.ts';
import { expectClose } from '../compare.ts';
import { laggedVehicle, planOver, roadOver, stations } from './scenes.ts';

const road = roadOver(stations(5000, 10), {
  grade: (s) => 0.07 * Math.sin(s / 260) + 0.02 * Math.sin(s / 90),
  crosswind: (s) => 3 * Math.sin(s / 500),
});
const hold = {
  setSpeed: 17,
  setSpeedIs: 'true_speed',
  startSpeed: 16,
  changes: [
    { at: { distance: 1700 }, setSpeed: 15, ramp: 0.3 },
    { at: { distance: 3010 }, setSpeed: 18, ramp: null },
  ],
} as const;

describe.each(['exact', 'fast'] as const)('replay by the %s scheme', (scheme) => {
  const plan = planOver(road, laggedVehicle, { scheme, hold, rider: { brakesAbove: 1, shifts: [] } });
  const result = runLoop(plan);
  const whole = replay(plan, result.checkpoints[0]!, 1e9).series;

  test('from a checkpoint the samples are those of the run, bit for bit', () => {
    for (const point of result.checkpoints) {
      const { status, series } = replay(plan, point, point.distance + 700);
      expect(status).toBe('completed');
      const first = Math.round(point.time / 0.02);
      expect(series.size).toBeGreaterThan(1000);
      for (const name of ['speed', 'actuator', 'integral', 'measured', 'distance', 'time'] as const)
        expect(series[name]).toEqual(whole[name].slice(first, first + series.size));
    }
  });

  test('a whole replay ends as the run ends, and its samples fill its bins', () => {
    expect(whole.time[whole.size - 1]).toBeLessThan(result.endTime);
    expectClose(whole.time[whole.size - 1]!, result.endTime, 0.0200001);
    expect(Math.max(...whole.speed)).toBe(Math.max(...result.bins.speedMax));
  });

  test('a window stops before its end', () => {
    const { series } = replay(plan, { settledAt: 500 }, 800);
    expect(series.distance[0]).toBeCloseTo(500, 9);
    expect(series.speed[0]).toBe(17);
    expect(series.distance[series.size - 1]).toBeLessThan(800);
    expect(series.distance[series.size - 1]).toBeGreaterThan(799);
  });

  test('keeps what starts at or behind a place, and that is the same bit for bit', () => {
    const point = result.checkpoints[1]!;
    const all = replay(plan, point, 2500).series;
    const kept = replay(plan, point, 2500, 1903).series;
    const first = all.distance.findIndex((x) => x >= 1903);
    expect(kept.size).toBe(all.size - first);
    for (const name of ['speed', 'integral', 'distance', 'time', 'acceleration', 'limit'] as const)
      expect(kept[name]).toEqual(all[name].slice(first));
  });

  test('speeds alone are those of the samples, bit for bit, with distances to a centimetre', () => {
    const point = result.checkpoints[1]!;
    // Across two changes of set speed, and to the end of the road.
    for (const to of [3600, 1e9]) {
      const { series } = replay(plan, point, to, 1203);
      const trace = traceSpeeds(plan, point, to, 1203);
      expect(trace.size).toBe(series.size);
      for (const name of ['speed', 'setSpeed'] as const)
        expect(trace[name].slice(0, trace.size)).toEqual(series[name]);
      expectClose(trace.time.slice(0, trace.size), series.time, 1e-9);
      expectClose(trace.distance.slice(0, trace.size), series.distance, 0.01);
    }
  });

  test('another set speed from a checkpoint takes over at once', () => {
    const point = nearestCheckpoint(result, 1500);
    expect(point.distance).toBeLessThan(1051);
    const slower = { ...plan, hold: { ...hold, setSpeed: 14 } };
    const { series } = replay(slower, point, 1600);
    expect(series.setSpeed[0]).toBe(14);
    expect(series.speed[0]).toBe(whole.speed[Math.round(point.time / 0.02)]);
  });

  test('another vehicle may take over from a checkpoint, with another delay too', () => {
    const sensor = { ...laggedVehicle.sensor, delay: 0.3 };
    const heavy = { ...laggedVehicle, mass: 260, sensor };
    const { status, series } = replay({ ...plan, vehicle: heavy }, nearestCheckpoint(result, 2500), 2400);
    expect(status).toBe('completed');
    expect(series.speed.every(Number.isFinite)).toBe(true);
  });

  test('at a settled start nothing moves on a road without change', () => {
    const even = roadOver(stations(1000, 10), { grade: () => 0.02, headwind: () => 3, crosswind: () => 4 });
    const calm = planOver(even, laggedVehicle, { scheme });
    const { series } = replay(calm, { settledAt: 300 }, 900);
    expectClose(series.speed, new Float64Array(series.size).fill(17), 1e-9);
    expectClose(series.acceleration, new Float64Array(series.size), 1e-9);
  });
});
