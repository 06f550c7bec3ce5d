import { expect, it } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { missingFiles, placeFiles } from '../../src/workbench/page/place-files.ts';
import { type Study, textOf } from '../../src/workbench/page/study.ts';

const CASE = `track: {file: roads/hill.csv, trim_ends_m: 20}   # kept
vehicle: parts/light.yaml
hold: {set_speed_kmh: 60}
candidates: [{kind: locked, throttle: level}]
`;
const VEHICLE = 'mass: {kerb_kg: 125, rider_kg: 75}\nroad_load: {cda_m2: 0.58, crr: 0.014}\n';
const TRACK = 'distance_m,elevation_m\n0,0\n1000,0\n';
const brought = (name: string, text: string) => ({ name, bytes: new TextEncoder().encode(text) });
const names = ({ files }: Study) => files.map(({ name }) => name);

it('a case takes its files by their own names, wherever it has them', () => {
  const study = placeFiles(null, [
    brought('hill.csv', TRACK),
    brought('light.yaml', VEHICLE),
    brought('study.yaml', CASE),
  ]);
  expect(study.file).toBe('study.yaml');
  expect(names(study).sort()).toEqual(['parts/light.yaml', 'roads/hill.csv', 'study.yaml']);
  expect(textOf(study, 'parts/light.yaml')).toBe(VEHICLE);
  expect(missingFiles(study)).toEqual([]);
});

it('files that come later take the places that are missing, and change no text', () => {
  const alone = placeFiles(null, [brought('study.yaml', CASE)]);
  expect(missingFiles(alone)).toEqual(['roads/hill.csv', 'parts/light.yaml']);
  const whole = placeFiles(alone, [brought('light.yaml', VEHICLE), brought('hill.csv', TRACK)]);
  expect(missingFiles(whole)).toEqual([]);
  expect(textOf(whole, 'study.yaml')).toBe(CASE);
});

it('another track or vehicle is put into the case, whose other bytes stay', () => {
  const study = placeFiles(null, [brought('study.yaml', CASE)]);
  const changed = placeFiles(study, [brought('other.gpx', '<gpx/>'), brought('heavy.yml', VEHICLE)]);
  expect(textOf(changed, 'study.yaml')).toBe(
    CASE.replace('roads/hill.csv', 'other.gpx').replace('parts/light.yaml', 'heavy.yml'),
  );
  expect(missingFiles(changed)).toEqual([]);
});

it('a track takes the place of a written road', () => {
  const written = CASE.replace(/\{file.*m: 20\}/, '{profile: [{length_m: 900, grade_pct: 1}]}');
  const study = placeFiles(null, [brought('study.yaml', written)]);
  const changed = placeFiles(study, [brought('hill.csv', TRACK)]);
  expect(textOf(changed, 'study.yaml')).toContain('track: {file: hill.csv}   # kept');
});

it('a track alone begins a study from the starter', () => {
  const study = placeFiles(null, [brought('hill.csv', TRACK)]);
  expect(textOf(study, study.file)).toContain('file: hill.csv');
  expect(missingFiles(study)).toEqual([]);
});

it('another case leaves the one before, and takes files that are here already', () => {
  const before = placeFiles(null, [brought('study.yaml', CASE), brought('light.yaml', VEHICLE)]);
  const after = placeFiles(before, [brought('next.yaml', CASE.replace('60', '70'))]);
  expect(after.file).toBe('next.yaml');
  expect(names(after).sort()).toEqual(['next.yaml', 'parts/light.yaml']);
});

it.each([
  ['picture.png', 'x', 'unknown-file'],
  ['list.yaml', '- 1', 'unknown-file'],
  ['broken.yaml', 'a: [1', 'yaml-syntax'],
])('%s is refused', (name, text, code) => {
  let thrown: unknown;
  try {
    placeFiles(null, [brought(name, text)]);
  } catch (error) {
    thrown = error;
  }
  expect(thrown).toBeInstanceOf(InputError);
  expect((thrown as InputError).code).toBe(code);
  expect((thrown as InputError).problems[0]!.place.file).toBe(name);
});
