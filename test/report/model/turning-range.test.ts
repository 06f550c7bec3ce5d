import { expect, test } from 'vitest';
import { turningRange } from '../../../src/report/model/turning-range.ts';
import type { Drive } from '../../../src/vehicle/drive.ts';
import { forceDrive } from '../../../src/vehicle/force-drive.ts';
import { expectClose } from '../../compare.ts';
import { fixtureEngine } from '../fixture-engine.ts';

test('a gear turns from its stall speed to where its limiter begins', () => {
  const engine = fixtureEngine();
  // 1400 and 8800 rpm over ratios of 93 and 33.1 a metre
  for (const [gear, ratio] of [
    [0, 93],
    [5, 33.1],
  ] as const) {
    const { least, greatest } = turningRange(engine, gear);
    expectClose(least, (1400 * Math.PI) / 30 / ratio, 1e-12, 'least');
    expectClose(greatest, (8800 * Math.PI) / 30 / ratio, 1e-12, 'greatest');
  }
});

test('a torque that is a parabola ends at its zero; a plain force never does', () => {
  const parabola: Drive = {
    ...fixtureEngine(),
    speedEdges: Float64Array.of(100, 700),
    // Nothing outside; (w - 100) (700 - w) inside.
    cells: Float64Array.of(0, 0, 0, 0, 0, 0, 0, 0, -70_000, 800, -1, 0, 0, 0, 0, 0, 0, 0),
    losses: new Float64Array(18),
    gears: [{ ratio: 10, inertia: 0 }],
    gear: 0,
    stallSpeed: 0,
  };
  expectClose(turningRange(parabola, 0).greatest, 70, 1e-12, 'greatest');
  const force = forceDrive({
    peakForce: 300,
    peakPower: 5000,
    closedThrottleForce: 20,
    lag: 0,
    derate: 'none',
  });
  expect(turningRange(force, 0)).toEqual({ least: 0, greatest: Number.POSITIVE_INFINITY });
});

test('a belt stands still with its clutch open, and turns fastest at its least ratio', () => {
  const belt = {
    least: 20,
    greatest: 70,
    throttle: Float64Array.of(0, 1),
    shaftSpeed: Float64Array.of(400, 700),
    lag: 0.3,
    inertia: 0,
  };
  const { least, greatest } = turningRange(
    { ...fixtureEngine(), belt, gears: [{ ratio: 70, inertia: 0 }], gear: 0 },
    0,
  );
  expect(least).toBe(0);
  expectClose(greatest, (8800 * Math.PI) / 30 / 20, 1e-12, 'greatest');
});
