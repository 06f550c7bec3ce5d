import { expect, test } from 'vitest';
import { seededStream } from '../../src/numeric/random.ts';
import { gripForce } from '../../src/vehicle/traction.ts';
import { expectClose } from '../compare.ts';

const traction = { friction: 0.8, wheelbase: 1.4, massCentreAhead: 0.7, massCentreHeight: 0.6 };

test('the wheel spins, slides and lifts the front at the closed forms', () => {
  // By hand on the level: m g = 1961.33 N; 0.8 x 1961.33 x 0.7 = 1098.3448;
  // over 1.4 - 0.48 = 0.92: 1193.853043; over 1.4 + 0.48 = 1.88: 584.225957; lift 1961.33 x 0.7 / 0.6 = 2288.218333.
  const grip = gripForce({ mass: 200, traction }, 0);
  expectClose([grip!.greatest, grip!.least, grip!.lift], [1193.853043, -584.225957, 2288.218333], 1e-6);
  // On 20 % the load is that of cos(theta) = 1 / sqrt(1.04) = 0.980580676.
  expectClose(gripForce({ mass: 200, traction }, -0.2)!.greatest, 1193.853043 * 0.980580676, 1e-5);
});

test('the front wheel lifts at an acceleration of g b / h, 11.4 m/s2 for b 0.7 m and h 0.6 m', () => {
  // Published closed form (Cossalter, from memory): 9.80665 x 0.7 / 0.6 = 11.441.
  expectClose(gripForce({ mass: 250, traction }, 0)!.lift / 250, 11.441, 1e-3);
});

test('at its limits the force is friction times the load it brings about', () => {
  const random = () => stream.uniform();
  const stream = seededStream(5);
  for (let k = 0; k < 200; k++) {
    const mass = 100 + 300 * random();
    const friction = 0.1 + random();
    const p = 1.2 + 0.5 * random();
    const b = p * (0.3 + 0.4 * random());
    const h = 0.4 + 0.4 * random();
    const grade = 0.4 * (random() - 0.5);
    const axes = { friction, wheelbase: p, massCentreAhead: b, massCentreHeight: h };
    const { greatest, least, lift } = gripForce({ mass, traction: axes }, grade)!;
    const weight = mass * 9.80665 * Math.cos(Math.atan(grade));
    const load = (force: number) => (weight * (p - b)) / p + (force * h) / p;
    expectClose(greatest / (friction * load(greatest)), 1, 1e-12);
    expectClose(-least / (friction * load(least)), 1, 1e-12);
    // At lift the driven wheel carries all of the weight.
    expectClose(load(lift) / weight, 1, 1e-12);
  }
});

test('a wheel whose own load transfer always suffices never spins', () => {
  const sticky = { friction: 1.5, wheelbase: 1.2, massCentreAhead: 0.6, massCentreHeight: 0.8 };
  const grip = gripForce({ mass: 200, traction: sticky }, 0)!;
  expect(grip.greatest).toBe(Number.POSITIVE_INFINITY);
  expect(grip.least).toBeLessThan(0);
  expect(grip.lift).toBeLessThan(grip.greatest);
  expect(gripForce({ mass: 200, traction: null }, 0)).toBeNull();
});
