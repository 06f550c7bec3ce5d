import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { throttleFor, wheelForce, wheelForceSlopes } from '../../src/vehicle/drive-law.ts';
import { equilibriumSpeeds, settledSpeed } from '../../src/vehicle/equilibrium.ts';
import { effectiveMass, linearise } from '../../src/vehicle/linearise.ts';
import { requiredForce } from '../../src/vehicle/resistance.ts';
import { variatorDrive } from '../../src/vehicle/variator-drive.ts';
import { expectClose } from '../compare.ts';
import { single } from './engines.ts';
import { uniform } from './uniform.ts';
import { referenceMotorcycle, still } from './vehicles.ts';

/** The single with a belt: ratios over a radius of 0.25 m 24 to 72 1/m, line from 330 to 680 rad/s. */
const drive = variatorDrive({
  ...single,
  stall: 70,
  leastRatio: 6,
  greatestRatio: 18,
  wheelRadius: 0.25,
  line: { throttle: Float64Array.of(0, 0.15, 0.6, 1), shaftSpeed: Float64Array.of(330, 420, 560, 680) },
  ratioLag: 0.4,
  clutch: { begins: 220, locked: 300 },
});
const vehicle = referenceMotorcycle({ drive });

const speeds = uniform(0.5, 32);
const derates = fc.constantFrom(1, 0.85);

describe('the throttle under a belt', () => {
  test('gives the force back, at or beyond a step of the fuel cut as well', () => {
    let within = 0;
    fc.assert(
      fc.property(speeds, uniform(-0.2, 1.4), derates, (v, x, d) => {
        const force = wheelForce(drive, 0, v, x, d);
        const found = throttleFor(drive, 0, v, force, d)!;
        if (found > 0 && found < 1) within += 1;
        // A slope of some 10^4 N for a throttle of 1.
        expectClose(wheelForce(drive, 0, v, found, d), force, 1e-8);
      }),
      { seed: 11, numRuns: 1000 },
    );
    expect(within).toBeGreaterThan(400);
  });

  test('is the throttle of the step for a force within the step, and tells how far a force is out of reach', () => {
    const ratioOf = (x: number) => (330 + (90 * x) / 0.15) / 12;
    const before = wheelForce(drive, 0, 12, 0.03 - 1e-12, 1);
    const after = wheelForce(drive, 0, 12, 0.03, 1);
    expectClose(after - before, (ratioOf(0.03) * 3) / 0.92, 1e-6);
    expect(throttleFor(drive, 0, 12, (before + after) / 2, 1)).toBe(0.03);
    const full = wheelForce(drive, 0, 12, 1, 1);
    expect(throttleFor(drive, 0, 12, 1.2 * full, 1)).toBeGreaterThan(1);
    expect(throttleFor(drive, 0, 12, wheelForce(drive, 0, 12, 0, 1) - 50, 1)).toBeLessThan(0);
  });
});

test('slopes of the wheel force under a belt agree with central differences', () => {
  let checked = 0;
  const h = 1e-5;
  fc.assert(
    fc.property(speeds, uniform(0.01, 0.99), derates, (v, x, d) => {
      const force = (speed: number, throttle: number) => wheelForce(drive, 0, speed, throttle, d);
      const slope = (up: number, down: number): number => (up - down) / (2 * h);
      const [bySpeed, wider] = [1, 2].map((k) => slope(force(v + k * h, x), force(v - k * h, x)) / k) as [
        number,
        number,
      ];
      const [byThrottle, wide] = [1, 2].map((k) => slope(force(v, x + k * h), force(v, x - k * h)) / k) as [
        number,
        number,
      ];
      // Next to a corner the two differences differ.
      if (Math.abs(bySpeed - wider) > 1e-3 || Math.abs(byThrottle - wide) > 1e-2) return;
      const slopes = wheelForceSlopes(drive, 0, v, x, d);
      expectClose(slopes.bySpeed, bySpeed, 2e-3);
      expectClose(slopes.byThrottle, byThrottle, 2e-2);
      checked += 1;
    }),
    { seed: 12, numRuns: 600 },
  );
  expect(checked).toBeGreaterThan(500);
});

describe('a vehicle with a belt', () => {
  test('carries its engine along only where the ratio stands at a limit', () => {
    // 12 m/s at 0.15: 420 / 12 = 35 1/m, between 24 and 72; at 5 m/s the greatest ratio, at 25 m/s the least; below 300 / 72 m/s the clutch slips.
    expectClose(effectiveMass(vehicle, 12, 0.15), 260, 1e-12);
    expectClose(effectiveMass(vehicle, 5, 0.15), 260 + 0.02 * 72 ** 2, 1e-9);
    expectClose(effectiveMass(vehicle, 2, 0.15), 260, 1e-9);
    expectClose(effectiveMass(vehicle, 25, 0.15), 260 + 0.02 * 24 ** 2, 1e-9);
    expectClose(effectiveMass(vehicle), 260 + 0.02 * 72 ** 2, 1e-9);
  });

  test('near an operating point moves as energy says, its engine kept at the speed of the line', () => {
    const at = { ...still, grade: 0.03 };
    const model = linearise(vehicle, { speed: 15, surroundings: at })!;
    // Throttle held, m v dv = (F - R) v dt with the engine's energy unchanged.
    const acceleration = (v: number, x: number): number =>
      (wheelForce(drive, 0, v, x, 1) - requiredForce(vehicle, v, at)) / 260;
    expectClose(acceleration(15, model.throttle), 0, 1e-9);
    const h = 1e-4;
    expectClose(
      model.a,
      (acceleration(15 + h, model.throttle) - acceleration(15 - h, model.throttle)) / (2 * h),
      1e-6,
    );
    expectClose(
      model.b,
      (acceleration(15, model.throttle + h) - acceleration(15, model.throttle - h)) / (2 * h),
      1e-3,
    );
  });

  test('settles where a fine scan of its force says', () => {
    for (const [grade, throttle] of [
      [0, 0.1],
      [0.05, 0.4],
      [-0.08, 0],
      [-0.03, 0.02],
    ] as const) {
      const at = { ...still, grade };
      const surplus = (v: number): number =>
        wheelForce(drive, 0, v, throttle, 1) - requiredForce(vehicle, v, at);
      const crossings: number[] = [];
      for (let v = 0.01; v < 90; v += 0.01) if (surplus(v) > 0 !== surplus(v + 0.01) > 0) crossings.push(v);
      const found = equilibriumSpeeds(vehicle, at, throttle);
      expect(found.length).toBe(crossings.length);
      expect(found.length).toBeGreaterThan(0);
      found.forEach(({ speed, stable }, i) => {
        expect(speed - crossings[i]!).toBeGreaterThan(-1e-9);
        expect(speed - crossings[i]!).toBeLessThan(0.01);
        if (stable) expectClose(settledSpeed(vehicle, at, throttle, speed + 1e-3), speed, 1e-8);
      });
    }
  });
});

test('a gear counts with its inertia', () => {
  expectClose(effectiveMass(vehicle, undefined, undefined, 0), 260 + 0.02 * 72 ** 2, 1e-9);
});
