// A scooter that pulls away at full throttle through its slipping clutch: Newton's law on paper.
import { expect, test } from 'vitest';
import { replay } from '../../src/loop/replay.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { IDEAL_ACTUATOR } from '../../src/vehicle/ideal.ts';
import { expectClose } from '../compare.ts';
import { beltVehicle } from '../study/geared.ts';
import { HOLD_60, planOf } from '../study/vehicle-of.ts';
import { roadOver, stations } from './scenes.ts';

// 8 N m at a ratio of 100 1/m: 800 N, up to 8 m/s at 800 rad/s. Locked from 400 rad/s, 4 m/s: 0.002 kg m2 are 20 kg from there.
const scooter = beltVehicle();
const vehicle = {
  ...scooter,
  roadLoad: { ...scooter.roadLoad, cda: 0, c0: 0 },
  actuator: IDEAL_ACTUATOR,
  drive: { ...scooter.drive, lag: 0 },
};
const MASS = 215 + 5;

test.each(['exact', 'fast'] as const)(
  'the engine joins the mass only as its clutch locks, by %s',
  (scheme) => {
    const plan = planOf(
      roadOver(stations(30, 30)),
      vehicle,
      { kind: 'locked', throttle: 1 },
      {
        scheme,
        hold: { ...HOLD_60, setSpeed: 2, startSpeed: 2 },
      },
    );
    const result = runLoop(plan);
    const { series } = replay(plan, result.checkpoints[0]!, 30);
    const locksAt = (4 - 2) / (800 / MASS);
    for (let k = 0; k < series.size; k++) {
      const t = series.time[k]!;
      const v = t <= locksAt ? 2 + (800 / MASS) * t : 4 + (800 / (MASS + 20)) * (t - locksAt);
      if (v > 7.9) break;
      // Whether it has locked is looked at once in a sample of 20 ms: 3.64 - 3.33 = 0.3 m/s2 for no longer than that.
      expectClose(series.speed[k]!, v, t < locksAt ? 1e-9 : 0.0062, `at ${t} s`);
    }
    // The engine brings its own 20 kg x (4 m/s)^2 / 2 = 160 J along.
    expectClose(result.ledger.shifts, -160, 160 * 0.04);
    expect(result.ledger.residual).toBeLessThan(1e-9);
  },
);

test('a replay from any checkpoint gives the same bits while the clutch slips and locks', () => {
  const road = roadOver(stations(900, 10), { grade: (s) => 0.03 + 0.06 * Math.sin(s / 40) });
  const plan = planOf(
    road,
    beltVehicle(),
    { kind: 'locked', throttle: 0.3 },
    {
      hold: { ...HOLD_60, setSpeed: 5, startSpeed: 5 },
    },
  );
  const { checkpoints, ledger, status } = runLoop(plan);
  const whole = replay(plan, checkpoints[0]!, 900).series;
  const slips = whole.shaftSpeed.filter((w) => w < 400).length;
  expect(slips).toBeGreaterThan(50);
  expect(slips).toBeLessThan(whole.size - 50);
  expect(status).toBe('completed');
  expect(ledger.residual).toBeLessThan(1e-9);
  for (const checkpoint of checkpoints.slice(1)) {
    const part = replay(plan, checkpoint, 900).series;
    expect(Array.from(part.speed)).toEqual(Array.from(whole.speed.slice(whole.size - part.size)));
  }
});
