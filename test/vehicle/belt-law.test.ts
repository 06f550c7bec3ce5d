import { expect, test } from 'vitest';
import { seededStream } from '../../src/numeric/random.ts';
import { beltRatio, beltRatioSlopes } from '../../src/vehicle/belt-law.ts';
import type { Belt } from '../../src/vehicle/drive.ts';
import { expectClose } from '../compare.ts';

const belt: Belt = {
  least: 30,
  greatest: 100,
  throttle: Float64Array.of(0, 0.2, 1),
  shaftSpeed: Float64Array.of(400, 500, 900),
  lag: 0.4,
  inertia: 0.003,
  locked: 0,
};

// By hand: line(0.2) = 500, line(0.6) = 500 + 400 x 0.5 = 700, line(1) = 900 rad/s.
test.each([
  [10, 0.2, 50],
  [10, 0.6, 70],
  [4, 0.2, 100],
  [0, 0.6, 100],
  [25, 0.6, 30],
  [20, 0.6, 35],
  [10, -0.5, 40],
  [10, 1.5, 90],
])('at %f m/s and a throttle of %f the belt comes to rest at %f 1/m', (speed, throttle, ratio) => {
  expectClose(beltRatio(belt, speed, throttle), ratio, 1e-12);
});

test('the derivatives of the ratio are those of finite differences, and zero at its limits', () => {
  const random = () => stream.uniform();
  const stream = seededStream(11);
  let between = 0;
  for (let k = 0; k < 400; k++) {
    const speed = 1 + 34 * random();
    const throttle = -0.2 + 1.4 * random();
    const near = (x: number) => [0, 0.2, 1].some((corner) => Math.abs(x - corner) < 1e-5);
    const ratio = beltRatio(belt, speed, throttle);
    const atLimit = Math.abs(ratio - 30) < 1e-3 || Math.abs(ratio - 100) < 1e-3;
    const slopes = beltRatioSlopes(belt, speed, throttle);
    if (ratio === 30 || ratio === 100) expect(slopes).toEqual({ bySpeed: 0, byThrottle: 0 });
    if (atLimit || near(throttle)) continue;
    between++;
    const h = 1e-6;
    const bySpeed = (beltRatio(belt, speed + h, throttle) - beltRatio(belt, speed - h, throttle)) / (2 * h);
    const byThrottle =
      (beltRatio(belt, speed, throttle + h) - beltRatio(belt, speed, throttle - h)) / (2 * h);
    expectClose(slopes.bySpeed, bySpeed, 1e-6 * (1 + Math.abs(bySpeed)));
    expectClose(slopes.byThrottle, byThrottle, 1e-6 * (1 + Math.abs(byThrottle)));
  }
  expect(between).toBeGreaterThan(100);
});
