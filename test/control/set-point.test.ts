import { expect, test } from 'vitest';
import { BUS_LIMITED, BUS_LOCK, BUS_REFERENCE, BUS_SIZE } from '../../src/control/bus.ts';
import { controllerFor } from '../../src/control/controller-for.ts';
import { moveReference, setTarget } from '../../src/control/set-point.ts';
import { expectClose } from '../compare.ts';
import { referenceMotorcycle } from '../loop/scenes.ts';

function references(from: number, target: number, rate: number | null, samples: number): number[] {
  const bus = new Float64Array(BUS_SIZE);
  bus[BUS_REFERENCE] = from;
  setTarget(bus, target, rate, 0.1);
  return Array.from({ length: samples }, () => {
    moveReference(bus);
    return bus[BUS_REFERENCE]!;
  });
}

test('the reference ramps up and down at its rate and ends on the set speed', () => {
  expectClose(references(10, 11, 4, 4), [10.4, 10.8, 11, 11], 1e-14);
  expectClose(references(10, 9.5, 3, 3), [9.7, 9.5, 9.5], 1e-14);
  expect(references(10, 9.5, 3, 3)[2]).toBe(9.5);
});

test('without a ramp it steps', () => {
  expect(references(10, 25, null, 1)).toEqual([25]);
});

test('a locked throttle is held within the range of the drive and looks at nothing', () => {
  const controller = controllerFor({ kind: 'locked', throttle: 0.4 }, -0.5, 1, referenceMotorcycle);
  const bus = new Float64Array(BUS_SIZE).fill(17);
  for (const [lock, held] of [
    [0.4, 0.4],
    [3, 1],
    [-1, -0.5],
  ] as const) {
    bus[BUS_LOCK] = lock;
    controller.step(bus);
    expect(bus[BUS_LIMITED]).toBe(held);
  }
});
