import { expect, test } from 'vitest';
import { piecewiseLinear } from '../../src/vehicle/piecewise-linear.ts';
import { expectClose } from '../compare.ts';

const x = Float64Array.of(1, 2, 4);
const y = Float64Array.of(10, 20, 0);

test.each([
  [1, 10],
  [1.25, 12.5],
  [2, 20],
  [3, 10],
  [4, 0],
])('at %f it is %f', (at, value) => expectClose(piecewiseLinear(x, y, at), value, 1e-12));

test('its ends hold on, and a single point is constant', () => {
  expect([-5, 0.999, 4.001, 1e9].map((at) => piecewiseLinear(x, y, at))).toEqual([10, 10, 0, 0]);
  const one = [Float64Array.of(3), Float64Array.of(7)] as const;
  expect([2, 3, 4].map((at) => piecewiseLinear(...one, at))).toEqual([7, 7, 7]);
});
