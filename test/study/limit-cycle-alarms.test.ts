import { expect, it } from 'vitest';
import { loopStability } from '../../src/control/loop-stability.ts';
import { traceSpeeds } from '../../src/loop/trace-speeds.ts';
import { exp } from '../../src/numeric/elementary.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { oscillationsIn } from '../../src/study/cycle-shape.ts';
import { roadOver, stations } from '../loop/scenes.ts';
import { cyclesOf } from './cycle-scene.ts';
import { piOf, planOf, vehicleOf } from './vehicle-of.ts';

const SPEED = 60 / 3.6;
const LEVEL = { grade: 0, headwind: 0, crosswind: 0, airDensity: 1.2, airTemperature: 288.15 };

/** A random loop on a random road of six waves of grade and wind; null: its linear loop has a gain margin below 1.2. */
function randomPlan(stream: ReturnType<typeof seededStream>, bin: number) {
  const between = (low: number, high: number): number => low + (high - low) * stream.uniform();
  const waves = Array.from({ length: 6 }, () => ({
    length: between(60, 900),
    grade: between(0, 0.018),
    wind: between(0, 2),
    phase: between(0, 2 * Math.PI),
  }));
  const sum = (x: number, size: 'grade' | 'wind', turn: number): number =>
    waves.reduce(
      (total, wave) => total + wave[size] * Math.sin((2 * Math.PI * x) / wave.length + turn * wave.phase),
      0,
    );
  const road = roadOver(stations(3000, 10), {
    grade: (x) => sum(x, 'grade', 1),
    headwind: (x) => sum(x, 'wind', 2),
  });
  const plain = vehicleOf({
    drive: {
      peakForce: between(400, 900),
      closedThrottleForce: between(40, 300),
      lag: between(0.02, 0.5),
    },
    actuator: { lag: between(0.03, 1), rateLimit: stream.uniform() < 0.5 ? null : between(0.2, 1) },
  });
  const vehicle = { ...plain, sensor: { ...plain.sensor, delay: between(0, 0.5), filter: between(0, 0.3) } };
  const kp = 0.03 * exp(between(0, 4));
  const controller = piOf({
    kp,
    ki: kp * exp(between(-4, 0)),
    antiWindup: stream.uniform() < 0.3 ? { kind: 'none' } : { kind: 'back_calculation', trackingTime: 2 },
  });
  const margins = loopStability(vehicle, controller, [SPEED], LEVEL);
  if (margins?.gainMargin == null || margins.gainMargin < 1.2) return null;
  return planOf(road, vehicle, controller, { bin });
}

// Of 300 such plans with other seeds none raised an alarm, and 142 swung where the road made them.
it('raises no alarm for stable loops on roads of waves, whatever the bins', () => {
  const stream = seededStream(19);
  let plans = 0;
  let swinging = 0;
  while (plans < 30) {
    const plan = randomPlan(stream, [10, 20, 50][plans % 3]!);
    if (plan === null) continue;
    plans++;
    const trace = traceSpeeds(plan, { settledAt: 0 }, 3000, 0);
    if (oscillationsIn(trace, 0.5 / 3.6).length > 0) swinging++;
    expect(cyclesOf(plan), `plan ${plans}`).toEqual([]);
  }
  // Else the property would say nothing.
  expect(swinging).toBeGreaterThan(6);
});
