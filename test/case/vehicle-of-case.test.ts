// Every expected speed is worked out by hand, in the comment beside it.

import { expect, it } from 'vitest';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { riderOf } from '../../src/case/run-of.ts';
import { rideDefaults, vehicleOfCase } from '../../src/case/vehicle-of-case.ts';
import { InputError, type Problem } from '../../src/problems/input-error.ts';
import { expectClose } from '../compare.ts';

/**
 * Wheel radius 0.3 m; ratios 18 and 9. At the stall speed of 600 rpm, 20 pi rad/s, third and fourth go
 * 20 pi 0.3 / ratio; at the limit of 9000 rpm, 300 pi rad/s, fifteen times that.
 */
const vehicle = (more = '', gearbox = '{kind: clutch}') =>
  readVehicleFile(
    `mass: {kerb_kg: 125, rider_kg: 75}
road_load: {cda_m2: 0.58, crr: 0.014}
drive: {kind: engine, torque: {peak_nm: 11, peak_rpm: 6000, falloff: 0.5}, gear_ratios: [18, 9], wheel_radius_m: 0.3,
  idle_rpm: 1200, rev_limit_rpm: 9000, gearbox: ${gearbox}}
${more}`,
    'vehicle.yaml',
  );
const AUTOMATIC =
  '{kind: automatic, shift_lines: [{throttle_pct: 0, up_rpm: 6000, down_rpm: 2000}], gap_s: 0.2, dwell_s: 1}';
const theCase = (hold: string, road = '{}') =>
  readCaseFile(
    `track: {profile: [{length_m: 3000, grade_pct: 0}]}
road: ${road}
vehicle: vehicle.yaml
hold: {${hold}}
candidates: [{kind: locked}]
`,
    'case.yaml',
  );

function problemsOf(hold: string, of = vehicle()): readonly Problem[] {
  try {
    vehicleOfCase(theCase(hold), of);
    return [];
  } catch (error) {
    if (error instanceof InputError) return error.problems;
    throw error;
  }
}

it('rides in the gear of the case, else in that of the vehicle', () => {
  expect(vehicleOfCase(theCase('set_speed_kmh: 60'), vehicle()).drive.gear).toBe(1);
  expect(vehicleOfCase(theCase('set_speed_kmh: 30, gear: 1'), vehicle()).drive.gear).toBe(0);
});

it('takes the grip of the surface, dry unless said', () => {
  const gripping = vehicle(
    'traction: {friction_dry: 0.8, friction_wet: 0.3, wheelbase_m: 1.3, mass_centre_ahead_m: 0.6, mass_centre_height_m: 0.6}\n',
  );
  const dry = theCase('set_speed_kmh: 60');
  expect(vehicleOfCase(dry, gripping).traction?.friction).toBe(0.8);
  expect(vehicleOfCase(theCase('set_speed_kmh: 60', '{surface: wet}'), gripping).traction?.friction).toBe(
    0.3,
  );
  const listed = (document: typeof dry, of: typeof gripping) =>
    rideDefaults(document, of).find(({ key }) => key === 'road.surface');
  expect(listed(dry, gripping)).toMatchObject({ value: 'dry', of: 'case' });
  expect(listed(dry, vehicle())).toBeUndefined();
  expect(listed(theCase('set_speed_kmh: 60', '{surface: wet}'), gripping)).toBeUndefined();
});

it('lists the highest gear as a default only where the case does not engage one', () => {
  const gearOf = (hold: string) =>
    rideDefaults(theCase(hold), vehicle()).find(({ key }) => key === 'drive.gear')?.value;
  expect(gearOf('set_speed_kmh: 60')).toBe('2');
  expect(gearOf('set_speed_kmh: 50, gear: 1')).toBeUndefined();
});

it('tells the plan of shifts in metres and from gear 0', () => {
  const { shifts } = riderOf(
    theCase('set_speed_kmh: 30, shifts: [{at_km: 1.2, gear: 1}, {at_km: 2, gear: 2}]'),
  );
  expectClose(
    shifts.map(({ distance }) => distance),
    [1200, 2000],
    1e-9,
  );
  expect(shifts.map(({ gear }) => gear)).toEqual([0, 1]);
});

it('allows the set speeds between stall and rev limit of the engaged gear, and no others', () => {
  // First: 300 pi 0.3 / 18 = 15.708 m/s = 56.5 km/h; 20 pi 0.3 / 18 = 1.047 m/s = 3.8 km/h.
  expect(problemsOf('set_speed_kmh: 56, gear: 1')).toEqual([]);
  expect(problemsOf('set_speed_kmh: 4, gear: 1')).toEqual([]);
  expect(problemsOf('set_speed_kmh: 57, gear: 1')).toEqual([
    {
      code: 'beyond-the-gear',
      place: { file: 'case.yaml', line: 4, column: 23, key: 'hold.set_speed_kmh' },
      message: 'the engine would turn beyond its limit at this set speed in gear 1',
      found: '57 km/h',
      allowed: '3.8 to 56.5 km/h in gear 1',
    },
  ]);
  // Second: twice that; 7.54 km/h is written 7.6, so that what is written is allowed.
  expect(problemsOf('set_speed_kmh: 7')).toMatchObject([
    {
      message: 'the engine would stall at this set speed in gear 2',
      allowed: '7.6 to 113.0 km/h in gear 2',
    },
  ]);
});

it('reads a set speed as the sensor shows it where the case says so', () => {
  const fast = vehicle('speed_sensor: {scale_error_pct: 10}\n');
  // First gear turns up to 56.5 km/h, which the sensor shows as 62.2.
  expect(problemsOf('set_speed_kmh: 60, gear: 1, set_speed_is: indicated', fast)).toEqual([]);
  expect(problemsOf('set_speed_kmh: 60, gear: 1', fast)).toHaveLength(1);
});

it('asks each set speed of the gear that is engaged there', () => {
  const plan = 'shifts: [{at_km: 1, gear: 1}, {at_km: 2, gear: 2}]';
  expect(problemsOf(`set_speed_kmh: 60, ${plan}`).map(({ place }) => place.key)).toEqual([
    'hold.shifts.0.gear',
  ]);
  const slowed = (at: string, back: string) =>
    `set_speed_kmh: 60, changes: [{at_km: ${at}, set_speed_kmh: 50}, {at_km: ${back}, set_speed_kmh: 60}], ${plan}`;
  expect(problemsOf(slowed('0.9', '2.1'))).toEqual([]);
  expect(problemsOf(slowed('0.9', '1.5')).map(({ place }) => place.key)).toEqual([
    'hold.changes.1.set_speed_kmh',
  ]);
  expect(
    problemsOf(`set_speed_kmh: 60, changes: [{at_s: 30, set_speed_kmh: 50}], ${plan}`),
    'at a time it is not known which gear it falls into',
  ).toEqual([]);
});

it('asks of an automatic gearbox that some gear can turn, and lets no case shift it', () => {
  expect(problemsOf('set_speed_kmh: 110, gear: 1', vehicle('', AUTOMATIC))).toEqual([]);
  expect(problemsOf('set_speed_kmh: 120', vehicle('', AUTOMATIC))).toMatchObject([
    { code: 'beyond-the-gear', allowed: '3.8 to 56.5 km/h in gear 1, or 7.6 to 113.0 km/h in gear 2' },
  ]);
  expect(
    problemsOf('set_speed_kmh: 50, shifts: [{at_km: 1, gear: 1}]', vehicle('', AUTOMATIC)),
  ).toMatchObject([{ code: 'no-clutch', place: { key: 'hold.shifts' } }]);
});
