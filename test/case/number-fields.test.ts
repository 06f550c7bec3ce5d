import { readFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { expect, it } from 'vitest';
import { editCase } from '../../src/case/edit-case.ts';
import { numberFields } from '../../src/case/number-fields.ts';
import { readCaseFile } from '../../src/case/read-case-file.ts';

const routes = resolve(import.meta.dirname, '../../routes');
const CASE = `track: {profile: [{length_m: 1000, grade_pct: 0}, {length_m: 800, grade_pct: 6}]}
wind: {speed_m_s: 4, from_deg: 250, roughness_m: 0.05}
vehicle:
  mass: {kerb_kg: 125, rider_kg: 75}
  road_load: {cda_m2: 0.58, crr: 0.014}
  drive: {kind: engine, torque: {full_load: [{rpm: 1500, nm: 8}, {rpm: 8000, nm: 9}]}, gear_ratios: [2.8, 1.8], final_ratio: 9}
hold: {set_speed_kmh: 60, gear: 2}
candidates:
  - {name: typed, kind: pi, kp_pct_per_kmh: 3, ti_s: 8, anti_windup: {kind: back_calculation, tracking_s: 4}}
  - {kind: pi, design: {settling_s: 30, overshoot_pct: 2}}
`;

it('a number comes with its place, value, unit, words and range, as the schema has them', () => {
  const found = numberFields(CASE, 'case');
  expect(found.find(({ key }) => key === 'candidates.typed.kp_pct_per_kmh')).toEqual({
    path: ['candidates', 0, 'kp_pct_per_kmh'],
    key: 'candidates.typed.kp_pct_per_kmh',
    value: 3,
    unit: '% per km/h',
    words: 'Proportional gain',
    least: 0.000001,
    most: 10000,
    whole: false,
  });
  expect(found.find(({ key }) => key === 'hold.gear')).toMatchObject({
    least: 1,
    most: 20,
    whole: true,
    unit: '',
  });
});

it('the right branch of a choice is taken, and tables of a vehicle are left out', () => {
  expect(numberFields(CASE, 'case').map(({ key }) => key)).toEqual([
    'track.profile.0.length_m',
    'track.profile.0.grade_pct',
    'track.profile.1.length_m',
    'track.profile.1.grade_pct',
    'wind.speed_m_s',
    'wind.from_deg',
    'wind.roughness_m',
    'vehicle.mass.kerb_kg',
    'vehicle.mass.rider_kg',
    'vehicle.road_load.cda_m2',
    'vehicle.road_load.crr',
    'vehicle.drive.final_ratio',
    'hold.set_speed_kmh',
    'hold.gear',
    'candidates.typed.kp_pct_per_kmh',
    'candidates.typed.ti_s',
    'candidates.typed.anti_windup.tracking_s',
    'candidates.1.design.settling_s',
    'candidates.1.design.overshoot_pct',
  ]);
});

it('a long list is a table, what no key knows is passed by, and a word in place of a number is none', () => {
  const pieces = Array.from({ length: 13 }, () => '{length_m: 100, grade_pct: 1}').join(', ');
  const text = `track: {profile: [${pieces}]}\nnonsense: 3\nhold: {set_speed_kmh: fast}\n`;
  expect(numberFields(text, 'case')).toEqual([]);
});

it.each(['harrow-gap.yaml', 'harrow-rider.yaml', 'tarrow-saltings.yaml'])(
  'every number of %s is in its range, and its ends are what the file refuses beyond',
  (name) => {
    const text = readFileSync(join(routes, name), 'utf8');
    const fields = numberFields(text, 'case');
    expect(fields.length).toBeGreaterThan(3);
    for (const { path, value, least, most } of fields) {
      expect(value).toBeGreaterThanOrEqual(least);
      expect(value).toBeLessThanOrEqual(most);
      const beyond = editCase(text, path, Math.ceil(most + 1));
      expect(() => readCaseFile(beyond, name), path.join('.')).toThrow(/allowed/);
    }
  },
);
