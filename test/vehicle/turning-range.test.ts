import { expect, test } from 'vitest';
import type { Drive } from '../../src/vehicle/drive.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { turningRange } from '../../src/vehicle/turning-range.ts';
import { expectClose } from '../compare.ts';
import { fixtureEngine } from '../report/fixture-engine.ts';

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
    locked: 0,
  };
  const { least, greatest } = turningRange(
    { ...fixtureEngine(), belt, gears: [{ ratio: 70, inertia: 0 }], gear: 0 },
    0,
  );
  expect(least).toBe(0);
  expectClose(greatest, (8800 * Math.PI) / 30 / 20, 1e-12, 'greatest');
});

test('a compiled engine with driveline losses and a fuel cut turns from its stall to its rev limit', () => {
  const rpm = (n: number): number => (n * Math.PI) / 30;
  const drive = engineDrive({
    torque: {
      kind: 'full_load',
      shaftSpeed: Float64Array.of(rpm(1500), rpm(6000), rpm(9500)),
      torque: Float64Array.of(8, 11, 8),
      shape: 4,
      shapeSpeed: null,
    },
    drag: { shaftSpeed: Float64Array.of(rpm(1500), rpm(9000)), torque: Float64Array.of(0.8, 2) },
    fuelCut: { above: rpm(2500), blend: rpm(300), throttle: 0.03, torque: 1.5 },
    idle: rpm(1400),
    stall: rpm(900),
    revLimit: rpm(9000),
    limitBand: rpm(200),
    inertia: 0.01,
    efficiency: 0.92,
    lag: 0.1,
    derate: 'none',
    fuel: null,
    ratios: [30, 12],
    gear: 1,
    wheelRadius: 0.3,
    gearbox: { kind: 'fixed' },
  });
  for (const [gear, ratio] of [
    [0, 100],
    [1, 40],
  ] as const) {
    const { least, greatest } = turningRange(drive, gear);
    expectClose(least, rpm(900) / ratio, 1e-9, 'least');
    expectClose(greatest, rpm(9000) / ratio, 1e-9, 'greatest');
  }
});
