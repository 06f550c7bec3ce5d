import { describe, expect, it } from 'vitest';
import { traceSpeeds } from '../../src/loop/trace-speeds.ts';
import { oscillationsIn } from '../../src/study/cycle-shape.ts';
import { expectClose } from '../compare.ts';
import { roadOver, stations } from '../loop/scenes.ts';
import { cyclesOf, kicked } from './cycle-scene.ts';
import { piOf, planOf, vehicleOf } from './vehicle-of.ts';

const SPEED = 60 / 3.6;

/** A throttle servo so slow, and a sensor so late, that the gain can be too high: lags 1.5, 0.1, 0.05 s, delay 0.6 s. */
const slow = vehicleOf({ actuator: { lag: 1.5 }, drive: { peakForce: 292, closedThrottleForce: 40 } });
const late = { ...slow, sensor: { ...slow.sensor, delay: 0.6 } };
const proportional = (kp: number) => piOf({ kp, ki: 0, setpointWeight: 1, antiWindup: { kind: 'none' } });

/**
 * Describing function of a saturation, N(A) = 2/pi (asin q + q sqrt(1 - q^2)), q = limit / A (Slotine and Li, Applied
 * Nonlinear Control, 1991, section 5.3, from memory): real, so that the loop swings where its phase is -180 degrees, and
 * with the amplitude at which N |L| = 1. The road load on the level is 1/2 1.2 0.58 v^2 + 215 g 0.014 N, so that the
 * throttle has nearly half of its range on either side.
 */
function saturatedLoop(kp: number): { period: number; amplitude: number } {
  const gain = 332 / 220;
  const drag = (1.2 * 0.58 * SPEED) / 220;
  const phase = (w: number): number =>
    Math.atan(w / drag) + Math.atan(1.5 * w) + Math.atan(0.1 * w) + Math.atan(0.05 * w) + 0.61 * w;
  const size = (w: number): number =>
    (kp * gain) /
    Math.hypot(w, drag) /
    Math.hypot(1, 1.5 * w) /
    Math.hypot(1, 0.1 * w) /
    Math.hypot(1, 0.05 * w);
  const w = root(phase, Math.PI, 0.01, 10);
  const describing = (q: number): number => (2 / Math.PI) * (Math.asin(q) + q * Math.sqrt(1 - q * q));
  const q = root(describing, 1 / size(w), 0, 1);
  return { period: (2 * Math.PI) / w, amplitude: ((0.5 / q) * Math.hypot(1, 0.05 * w)) / kp };
}

/** Where a rising function reaches a value. */
function root(f: (x: number) => number, value: number, low: number, high: number): number {
  for (let i = 0; i < 80; i++) {
    const middle = (low + high) / 2;
    if (f(middle) < value) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

describe('a limit cycle', () => {
  it('of gains beyond the stability limit has the period and amplitude of the describing function', () => {
    const predicted = saturatedLoop(2);
    const [cycle, ...more] = cyclesOf(planOf(kicked(3000), late, proportional(2)));
    expect(more).toEqual([]);
    expect(cycle).toMatchObject({ candidate: 'pi', cause: 'gains' });
    expectClose(cycle!.period, predicted.period, 0.05 * predicted.period);
    expectClose(cycle!.speedAmplitude, predicted.amplitude, 0.1 * predicted.amplitude);
    expect(cycle!.turns).toBeGreaterThan(20);
    expect(cycle!.from).toBeGreaterThan(90);
    expect(cycle!.to).toBeGreaterThan(2900);
  });
});

describe('no limit cycle', () => {
  it('is a road that is itself a wave of that period', () => {
    // 6 s at 60 km/h are 100 m; half of peak to peak of the speed would be well above the threshold.
    const wave = roadOver(stations(4000, 2), { grade: (x) => 0.08 * Math.sin((2 * Math.PI * x) / 100) });
    const vehicle = vehicleOf({ drive: { peakForce: 600, closedThrottleForce: 250 } });
    const plan = planOf(wave, vehicle, piOf({ kp: 0.1, ki: 0.01 }));
    const [seen] = oscillationsIn(traceSpeeds(plan, { settledAt: 0 }, 4000, 0), 0.5 / 3.6);
    expectClose(seen!.period, 6, 0.1);
    expect(cyclesOf(plan)).toEqual([]);
  });

  it('is a ring that decays', () => {
    expect(cyclesOf(planOf(kicked(3000), late, proportional(0.8)))).toEqual([]);
  });
});
