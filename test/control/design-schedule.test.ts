import { expect, test } from 'vitest';
import { equalGainSchedule } from '../../src/control/design-schedule.ts';
import { gainsAt } from '../../src/control/gain-schedule.ts';
import { expectClose } from '../compare.ts';

const places = [
  { gear: 2, speed: 10, gain: 4 },
  { gear: 2, speed: 15, gain: 3 },
  { gear: 2, speed: 20, gain: null },
  { gear: 3, speed: 10, gain: null },
  { gear: 3, speed: 15, gain: 2 },
  { gear: 3, speed: 20, gain: 1.6 },
  { gear: 4, speed: 10, gain: null },
];

test('makes gain times factor the same at every place that can be driven', () => {
  const schedule = equalGainSchedule(places, 2);
  const at = gainsAt({ kp: 0.3, ki: 0.1, kd: 0 }, schedule, 5);
  for (const { gear, speed, gain } of places) {
    if (gain === null) continue;
    const out = new Float64Array(3);
    at(gear, speed, out);
    // Factors are written with four digits.
    expectClose([out[0]! * gain, out[1]! * gain], [0.6, 0.2], 1e-4);
  }
});

test('holds the nearest factor where the gear cannot be driven, and has no row for a gear that never can', () => {
  const schedule = equalGainSchedule(places, 2)!;
  expect([...schedule.speed]).toEqual([10, 15, 20]);
  expect(schedule.rows.map(({ gear }) => gear)).toEqual([2, 3]);
  expect([...schedule.rows[0]!.proportional]).toEqual([0.5, 0.6667, 0.6667]);
  expect([...schedule.rows[1]!.integral]).toEqual([1, 1, 1.25]);
});

test('is nothing where the gain is the same everywhere, and has one row for all gears of a drive without', () => {
  const same = [10, 20].map((speed) => ({ gear: 0, speed, gain: 3 }));
  expect(equalGainSchedule(same, 3)).toBeNull();
  expect(equalGainSchedule([...same, { gear: 0, speed: 30, gain: 2 }], 3)?.rows[0]?.gear).toBeNull();
});
