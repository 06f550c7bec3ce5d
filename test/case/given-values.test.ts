import { expect, test } from 'vitest';
import { givenValues } from '../../src/case/given-values.ts';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';

const VEHICLE = `name: Test 125
mass: {kerb_kg: 125, rider_kg: 75, payload_kg: 15}
road_load: {f0_n: 9.1, f1_n_per_kmh: 0, f2_n_per_kmh2: 0.0253}
drive: {kind: force, peak_force_n: 320}
`;
const caseWith = (vehicle: string) => `title: One hill
track: {profile: [{length_m: 600, grade_pct: 0}, {length_m: 80, grade_pct: 12}]}
vehicle: ${vehicle}
hold: {set_speed_kmh: 60}
candidates:
  - {name: locked, kind: locked, throttle: level}
  - {name: pi-a, kind: pi, kp_pct_per_kmh: 4, ti_s: 8}
`;

const OF_CASE = [
  ['title', 'One hill'],
  ['track.profile.0.length_m', '600'],
  ['track.profile.0.grade_pct', '0'],
  ['track.profile.1.length_m', '80'],
  ['track.profile.1.grade_pct', '12'],
  ['vehicle', 'v.yaml'],
  ['hold.set_speed_kmh', '70'],
  ['candidates.locked.name', 'locked'],
  ['candidates.locked.kind', 'locked'],
  ['candidates.locked.throttle', 'level'],
  ['candidates.pi-a.name', 'pi-a'],
  ['candidates.pi-a.kind', 'pi'],
  ['candidates.pi-a.kp_pct_per_kmh', '4'],
  ['candidates.pi-a.ti_s', '8'],
];
const OF_VEHICLE = [
  ['name', 'Test 125'],
  ['mass.kerb_kg', '125'],
  ['mass.rider_kg', '75'],
  ['mass.payload_kg', '40'],
  ['road_load.f0_n', '9.1'],
  ['road_load.f1_n_per_kmh', '0'],
  ['road_load.f2_n_per_kmh2', '0.0253'],
  ['drive.kind', 'force'],
  ['drive.peak_force_n', '320'],
];
const CHANGES = ['hold.set_speed_kmh=70', 'vehicle.mass.payload_kg=40'];

test('every value of case and vehicle is told by its key, changes beside the case put in', () => {
  const document = readCaseFile(caseWith('v.yaml'), 'case.yaml', CHANGES);
  const found = givenValues(document, readVehicleFile(VEHICLE, 'v.yaml', document.vehicleOverrides));
  const of = (which: string) => found.filter((one) => one.of === which).map(({ key, value }) => [key, value]);
  expect(of('case')).toEqual(OF_CASE);
  expect(of('vehicle')).toEqual(OF_VEHICLE);
});

test('a vehicle written in the case is told as one in a file of its own', () => {
  const inline = `\n${VEHICLE.trimEnd().replace(/^/gm, '  ')}`;
  const document = readCaseFile(caseWith(inline), 'case.yaml', CHANGES);
  const found = givenValues(document, document.vehicle!);
  expect(found.filter((one) => one.of === 'vehicle').map(({ key, value }) => [key, value])).toEqual(
    OF_VEHICLE,
  );
  expect(found.filter((one) => one.of === 'case').map(({ key }) => key)).toEqual(
    OF_CASE.map(([key]) => key).filter((key) => key !== 'vehicle'),
  );
});

test('of an absolute path the last part alone is told, and a long list without names as one value', () => {
  const long = Array.from({ length: 30 }, (_, i) => `{length_m: ${100 + i}, grade_pct: 0}`).join(', ');
  const text = caseWith('v.yaml').replace(/track: .*/, `track: {profile: [${long}]}`);
  const document = readCaseFile(text, 'case.yaml', ['vehicle=/home/someone/v.yaml']);
  const found = givenValues(document, readVehicleFile(VEHICLE, 'v.yaml'));
  expect(found.find(({ key }) => key === 'vehicle')!.value).toBe('v.yaml');
  expect(found.filter(({ key }) => key.startsWith('track.'))).toEqual([
    {
      key: 'track.profile',
      value: expect.stringMatching(/^\[\{"length_m":100,"grade_pct":0\},/),
      of: 'case',
    },
  ]);
});
