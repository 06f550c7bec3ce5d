import { expect, test } from 'vitest';
import { gearAuthority } from '../../../src/report/model/gear-authority.ts';
import { viewOf } from '../../../src/report/model/view.ts';
import { expectClose } from '../../compare.ts';
import { fixtureResult } from '../fixture.ts';

const G = 9.80665;
const view = viewOf(fixtureResult({ lengthKm: 6, engine: true }), 'kmh');
const SPEED = 60 / 3.6;

test('on the steepest grades that a gear holds, Newton finds the forces of full and closed throttle', () => {
  const { road, vehicle } = view.result;
  const density = road.airDensity.reduce((a, b) => Math.max(a, b));
  const asked = (grade: number): number => {
    const angle = Math.atan(grade);
    const roll = vehicle.mass * G * vehicle.roadLoad.c0 * Math.cos(angle);
    return 0.5 * density * vehicle.roadLoad.cda * SPEED ** 2 + roll + vehicle.mass * G * Math.sin(angle);
  };
  for (const { at } of gearAuthority(view, SPEED)) {
    if (at === null) continue;
    expectClose(asked(at.climb!), at.full, 1e-9 * at.full, 'full throttle [N]');
    expectClose(asked(at.descent!), at.least, 1e-7, 'closed throttle [N]');
  }
});

test('full throttle between two points of the curve is their straight line over the ratio', () => {
  // Gear 6: 33.1 a metre, 551.7 rad/s = 5268 rpm, between 9.6 N m at 4000 and 10.4 N m at 5500 rpm.
  const rpm = (33.1 * SPEED * 30) / Math.PI;
  const torque = 9.6 + (0.8 * (rpm - 4000)) / 1500;
  expectClose(gearAuthority(view, SPEED)[5]!.at!.full, 33.1 * torque, 1e-9 * 340, 'N');
});

test('gears over their rev limit have nothing there', () => {
  expect(gearAuthority(view, SPEED).map(({ at }) => at === null)).toEqual([
    true,
    true,
    false,
    false,
    false,
    false,
  ]);
  expect(gearAuthority(view, 1).every(({ at }) => at === null)).toBe(true);
});

test('where the tyre passes on less than the gear has, the grip ends the climb', () => {
  const { result } = view;
  const traction = { friction: 0.2, wheelbase: 1.3, massCentreAhead: 0.65, massCentreHeight: 0.6 };
  const wet = viewOf({ ...result, vehicle: { ...result.vehicle, traction } }, 'kmh');
  const { climb, slips } = gearAuthority(wet, SPEED)[3]!.at!;
  expect(slips).toBe(true);
  const angle = Math.atan(climb!);
  const { mass, roadLoad } = result.vehicle;
  const density = result.road.airDensity.reduce((a, b) => Math.max(a, b));
  const asked =
    0.5 * density * roadLoad.cda * SPEED ** 2 + mass * G * (roadLoad.c0 * Math.cos(angle) + Math.sin(angle));
  // mu m g cos (p - b) / (p - mu h)
  expectClose(asked, (0.2 * mass * G * Math.cos(angle) * 0.65) / (1.3 - 0.12), 1e-6, 'N');
});
