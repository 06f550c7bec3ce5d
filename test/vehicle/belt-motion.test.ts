import { expect, it } from 'vitest';
import { beltMotion } from '../../src/vehicle/belt-motion.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import { linearise } from '../../src/vehicle/linearise.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { referenceMotorcycle, still } from './vehicles.ts';

// T = -2 + 22 x N m at every shaft speed; ratio 30 to 100 1/m; the line from 500 rad/s at closed throttle to 800 at full.
function belted(lag: number, inertia = 0.02): Vehicle {
  const plain = referenceMotorcycle({ mass: 180, rotatingMass: 8 });
  const drive: Drive = {
    ...plain.drive,
    kind: 'variator',
    speedEdges: new Float64Array(0),
    cells: Float64Array.of(-2, 0, 22, 0, 0, 0),
    losses: Float64Array.of(0, 0, 20, 0, 0, 0),
    gears: [{ ratio: 100, inertia: inertia * 100 * 100 }],
    belt: {
      least: 30,
      greatest: 100,
      throttle: Float64Array.of(0, 1),
      shaftSpeed: Float64Array.of(500, 800),
      lag,
      inertia,
      locked: 0,
    },
  };
  return { ...plain, drive };
}

it('has the coefficients that are found by hand', () => {
  const [v, x] = [12, 0.4];
  const ratio = (500 + 300 * x) / v;
  const mass = 188 + 0.02 * ratio * ratio;
  const torque = -2 + 22 * x;
  const spin = (0.02 * ratio * v) / (mass * 0.3);
  const motion = beltMotion(belted(0.3), v, x, 1, 8)!;
  expectClose(motion.mass, mass, 1e-9);
  expectClose(motion.bySpeed, -ratio / v, 1e-12);
  expectClose(motion.byThrottle, 300 / v, 1e-12);
  // F = r T does not change with speed while the ratio stands.
  expectClose(motion.a, -8 / mass + (spin * ratio) / v, 1e-12);
  expectClose(motion.b, (22 * ratio) / mass - (spin * 300) / v, 1e-12);
  expectClose(motion.c, torque / mass + spin, 1e-12);
});

it('comes to the belt at rest, where the ratio is', () => {
  const model = linearise(belted(0.3), { speed: 14, surroundings: still })!;
  const motion = model.belt!;
  // At rest force over the mass that stands; the model of the rest leaves out what turns at the same speed.
  const share = model.effectiveMass / motion.mass;
  expectClose(model.effectiveMass, 188, 1e-12);
  expectClose(motion.a + motion.c * motion.bySpeed, model.a * share, 1e-12);
  expectClose(motion.b + motion.c * motion.byThrottle, model.b * share, 1e-12);
});

it('is nothing without a belt, without its lag, or at a limit of its ratio', () => {
  expect(beltMotion(referenceMotorcycle(), 12, 0.4, 1, 8)).toBeNull();
  expect(beltMotion(belted(0), 12, 0.4, 1, 8)).toBeNull();
  expect(beltMotion(belted(0.3), 4, 0.4, 1, 8)).toBeNull();
  expect(beltMotion(belted(0.3), 25, 0.4, 1, 8)).toBeNull();
});
