import { expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { TYRE_STEP_SPEED, tyreRolling } from '../../src/vehicle/tyre-rolling.ts';
import { expectClose } from '../compare.ts';

const coefficient = (bar: number, speedKmh: number, branch: 'slow' | 'fast'): number => {
  const { c0, c2 } = tyreRolling(bar * 1e5)[branch];
  return c0 + c2 * (speedKmh / 3.6) ** 2;
};

// Recomputed outside of this project from the formula in J. Bradley, The Racing Motorcycle (1996), at 2.25 bar.
test.each([
  [0, 'slow', 0.0165],
  [50, 'slow', 0.01827],
  [100, 'slow', 0.02357],
  [130, 'slow', 0.02844],
  [165, 'slow', 0.03574],
  [165, 'fast', 0.04321],
  [200, 'fast', 0.05973],
] as const)('at %i km/h (%s) a tyre of 2.25 bar rolls with %f', (speedKmh, branch, value) => {
  expectClose(coefficient(2.25, speedKmh, branch), value, 5.1e-6);
});

test.each([
  [2.25, 0.00747],
  [2.0, 0.00947],
  [2.9, 0.00389],
])('at %f bar the formula steps up by %f at 165 km/h', (bar, step) => {
  expectClose(coefficient(bar, 165, 'fast') - coefficient(bar, 165, 'slow'), step, 5.1e-6);
  expectClose(TYRE_STEP_SPEED, 45.8333333, 1e-6);
});

test('a harder tyre rolls lighter at every speed', () => {
  for (let speedKmh = 0; speedKmh <= 165; speedKmh += 15)
    for (const branch of ['slow', 'fast'] as const)
      expect(coefficient(2.6, speedKmh, branch)).toBeLessThan(coefficient(2.1, speedKmh, branch));
});

test.each([0, 0.9, 4.1, Number.NaN])('%f bar is refused', (bar) => {
  expect(() => tyreRolling(bar * 1e5)).toThrow(InputError);
});
