import { createHash } from 'node:crypto';
import { expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { type RunRequest, runCase } from '../../src/run/run-case.ts';
import { expectClose } from '../compare.ts';

const VEHICLE = `name: Test
mass: {kerb_kg: 125, rider_kg: 75}
road_load: {cda_m2: 0.58, crr: 0.014}
drive: {kind: force, peak_force_n: 320, closed_throttle_force_n: 40, lag_s: 0.15}
`;
const CASE = `track: {profile: [{length_m: 1000, grade_pct: 0}, {length_m: 400, grade_pct: 4}, {length_m: 600, grade_pct: 0}]}
vehicle: sub/vehicle.yaml
air: {density_kg_m3: 1.2}
hold: {set_speed_kmh: 60}
candidates:
  - {name: locked, kind: locked}
  - {name: typed, kind: pi, kp_pct_per_kmh: 4, ti_s: 8}
`;

/** A reader of texts held in memory. */
function from(files: Readonly<Record<string, string>>): RunRequest['read'] {
  return (name) => {
    const text = files[name];
    if (text === undefined)
      throw new InputError({ code: 'file-not-found', place: { file: name }, message: 'cannot be read' });
    return new TextEncoder().encode(text);
  };
}
const files = { 'case.yaml': CASE, 'sub/vehicle.yaml': VEHICLE };

test('a case runs from texts alone, with no file system', () => {
  const run = runCase({ file: 'case.yaml', read: from(files) });
  expect(run.caseName).toBe('case');
  expect(run.title).toBe('case');
  expect(run.candidates.map(({ name, result }) => [name, result.status])).toEqual([
    ['locked', 'completed'],
    ['typed', 'completed'],
  ]);
  expect(run.status).toBe('ok');
  expect(run.candidates.every(({ full }) => full === null)).toBe(true);
});

test('inputs are noted with the SHA-256 that another implementation gives', () => {
  const { inputs } = runCase({ file: 'case.yaml', read: from(files) });
  expect(inputs).toEqual(
    Object.entries(files).map(([name, text]) => ({
      name,
      sha256: createHash('sha256').update(text).digest('hex'),
      bytes: text.length,
    })),
  );
});

test('what could not be judged is not passed', () => {
  const asked = `${CASE.replace('set_speed_kmh: 60', 'set_speed_kmh: 200, start_speed_kmh: 60')}requirements:
  - {id: T-1, figure: within_band_pct, band_kmh: 2, at_least: 95, where: holdable}
`;
  const run = runCase({ file: 'case.yaml', read: from({ ...files, 'case.yaml': asked }) });
  expect(run.requirements.map(({ verdict }) => verdict)).toEqual(['not judged']);
  expect(run.requirements[0]!.words).toContain('the drive can hold the set speed on no part of the road');
  expect(run.status).toBe('requirement_not_met');
});

test('an absolute name in a case does not leave it', () => {
  const text = CASE.replace('sub/vehicle.yaml', '/home/someone/vehicle.yaml');
  const { inputs } = runCase({
    file: 'case.yaml',
    read: from({ 'case.yaml': text, '/home/someone/vehicle.yaml': VEHICLE }),
  });
  expect(inputs.map(({ name }) => name)).toEqual(['case.yaml', 'vehicle.yaml']);
});

test('a file that is missing is told where the case names it', () => {
  try {
    runCase({ file: 'case.yaml', read: from({ 'case.yaml': CASE }) });
    expect.unreachable();
  } catch (error) {
    expect(error).toBeInstanceOf(InputError);
    expect((error as InputError).problems[0]).toMatchObject({
      code: 'file-not-found',
      place: { file: 'case.yaml', line: 2 },
    });
    expect((error as InputError).message).toContain("'sub/vehicle.yaml' cannot be read");
  }
});

test('the band is that of the first requirement that has one, else 2 km/h', () => {
  expectClose(runCase({ file: 'case.yaml', read: from(files) }).band, 2 / 3.6, 1e-12, 'band [m/s]');
  const asked = `${CASE}requirements:
  - {id: A, figure: worst_low_kmh, at_least: -9}
  - {id: B, figure: within_band_pct, band_kmh: 1.5, at_least: 10}
  - {id: C, figure: within_band_pct, band_kmh: 3, at_least: 10}
`;
  const run = runCase({ file: 'case.yaml', read: from({ ...files, 'case.yaml': asked }) });
  expectClose(run.band, 1.5 / 3.6, 1e-12, 'band [m/s]');
  const measured = run.requirements.map((finding) => finding.measured as number);
  expect(measured.every((value) => Number.isFinite(value))).toBe(true);
  expect(measured[2]).toBeGreaterThanOrEqual(measured[1]!);
});

test('more bands than one run can count are refused with the place', () => {
  const rows = [1, 2, 3, 4, 5].map(
    (k) => `  - {id: B${k}, figure: within_band_pct, band_kmh: ${k}, at_least: 1}`,
  );
  const text = `${CASE}requirements:\n${rows.join('\n')}\n`;
  expect(() => runCase({ file: 'case.yaml', read: from({ ...files, 'case.yaml': text }) })).toThrow(
    /case\.yaml:9:\d+: requirements: .*at most 4 bands/,
  );
});

test('the full series is the run itself: it ends where the record ends, and its speeds lie within the bins', () => {
  const run = runCase({ file: 'case.yaml', read: from(files), overrides: ['output.series=full'] });
  for (const { name, full, result } of run.candidates) {
    expect(full, name).not.toBeNull();
    const { size, time, speed } = full!;
    expectClose(time[size - 1]!, result.endTime, 0.0201, 'last sample [s]');
    const { bins } = result;
    expectClose(
      Math.min(...speed.subarray(0, size)),
      Math.min(...bins.speedMin.subarray(0, bins.size)),
      1e-9,
    );
    expectClose(
      Math.max(...speed.subarray(0, size)),
      Math.max(...bins.speedMax.subarray(0, bins.size)),
      1e-9,
    );
  }
});

test('a candidate that does not reach the end is a warning and a status, not an exception', () => {
  const steep = CASE.replace('grade_pct: 4', 'grade_pct: 25');
  const run = runCase({ file: 'case.yaml', read: from({ ...files, 'case.yaml': steep }) });
  expect(run.status).toBe('incomplete');
  const codes = run.warnings.map(({ code }) => code);
  expect(codes).toContain('stopped');
  expect(run.warnings.find(({ code }) => code === 'stopped')?.message).toMatch(/at km 1\.\d\d/);
});

test('a derated drive high up is told where its correction leaves the range that ISO 1585 vouches for', () => {
  const high = CASE.replace(
    'track: {profile: [',
    'track: {start_elevation_m: 600, profile: [{length_m: 4000, grade_pct: 10}, ',
  ).replace('air: {density_kg_m3: 1.2}', 'air: {temperature_c: 15}');
  const derated = VEHICLE.replace(
    'peak_force_n: 320',
    'peak_force_n: 900, altitude_derate: naturally_aspirated',
  );
  const warningsOf = (text: string, vehicle: string) =>
    runCase({
      file: 'case.yaml',
      read: from({ 'case.yaml': text, 'sub/vehicle.yaml': vehicle }),
    }).warnings.filter(({ code }) => code === 'derating-extrapolated');
  const [warning, ...others] = warningsOf(high, derated);
  expect(others).toEqual([]);
  // (99 / p)^1.2 (T / 298)^0.6 in the standard atmosphere is 1.07 at 890 m, recomputed outside of this project: 290 m above the start, at 10 %
  expectClose(warning!.from!, 2900, 15, 'where it begins [m]');
  expectClose(warning!.to!, 6000, 1e-6, 'where it ends: the road stays up there [m]');
  expect(warning!.message).toMatch(/km 2\.9\d and 6\.00: its factor reaches 1\.\d\d, .*0\.93 to 1\.07/);
  expect(warningsOf(high, VEHICLE.replace('peak_force_n: 320', 'peak_force_n: 900'))).toEqual([]);
  expect(warningsOf(high.replace('600', '0'), derated)).toEqual([]);
});

test('the result says how the spread of its figures was found', () => {
  const { spread } = runCase({ file: 'case.yaml', read: from(files) });
  expect(spread).toMatchObject({
    roads: 0,
    words: 'No requirement asks for a figure, so no spread was computed.',
  });
  const asked = `${CASE}requirements: [{id: A, figure: worst_low_kmh, at_least: -9}]\n`;
  const written = runCase({ file: 'case.yaml', read: from({ ...files, 'case.yaml': asked }) }).spread;
  expect(written).toMatchObject({ roads: 0, words: expect.stringContaining('no uncertainty') });
  const rows = Array.from({ length: 201 }, (_, i) => `${i * 10},${20 + (i % 7) * 0.3}`).join('\n');
  const track = asked.replace(/^track: .*$/m, 'track: {file: bumps.csv}\nroad: {elevation_source: gnss}');
  const measured = runCase({
    file: 'case.yaml',
    read: from({ ...files, 'case.yaml': track, 'bumps.csv': `distance_m,elevation_m\n${rows}\n` }),
  }).spread;
  expect(measured.roads).toBeGreaterThanOrEqual(2);
  expect(measured.words).toContain(`${measured.roads} roads`);
  expect(measured.words).toContain(`seed ${measured.seed}`);
});

test('progress grows from 0 and names the candidates', () => {
  const told: [number, string][] = [];
  runCase({ file: 'case.yaml', read: from(files), onProgress: (share, words) => told.push([share, words]) });
  const shares = told.map(([share]) => share);
  expect(shares[0]).toBe(0);
  expect(shares).toEqual([...shares].sort((a, b) => a - b));
  expect(shares.at(-1)).toBeLessThanOrEqual(1);
  expect(told.map(([, words]) => words)).toEqual(expect.arrayContaining(['locked', 'typed']));
});
