import { createHash } from 'node:crypto';
import { cpSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import { beforeAll, expect, test } from 'vitest';
import { expectClose } from '../compare.ts';
import {
  CASE,
  type Ended,
  filesBelow,
  ridgehold,
  temporaryFolder,
  VEHICLE,
  writeFiles,
} from './start-program.ts';

const here = temporaryFolder();
writeFiles(here, { 'hill.yaml': CASE, 'vehicle.yaml': VEHICLE });
const out = join(here, 'out/hill');

interface Summary {
  readonly status: string;
  readonly schema_version: string;
  readonly inputs: readonly { name: string; sha256: string; bytes: number }[];
  readonly route: { length_m: number; climb_m: number; points: number; repairs: number };
  readonly spread: { roads: number; seed: number };
  readonly candidates: readonly Record<string, number | string>[];
  readonly hills: readonly Record<string, number | string | null>[];
  readonly requirements: readonly Record<string, number | string | null>[];
  readonly warnings: readonly { code: string; message: string }[];
  readonly files: readonly string[];
}

let ended: Ended;
let summary: Summary;
beforeAll(() => {
  ended = ridgehold(here, ['run', 'hill.yaml', '--json']);
  summary = JSON.parse(ended.stdout);
});

const table = (name: string): Record<string, string>[] =>
  parse(readFileSync(join(out, name), 'utf8'), { columns: true });

test('a run ends well, and tells people the answer and where the report is', () => {
  expect(ended.status).toBe(0);
  expect(ended.stderr).toContain('pi-20s');
  expect(ended.stderr).toContain(join('out', 'hill', 'report.html'));
});

test('--json prints what is written as summary.json', () => {
  expect(ended.stdout).toBe(readFileSync(join(out, 'summary.json'), 'utf8'));
});

test('the folder holds what the summary lists, and nothing else', () => {
  const files = Object.keys(filesBelow(out)).sort();
  expect(files).toEqual([...summary.files, 'summary.json'].sort());
  expect(files).toEqual(
    expect.arrayContaining([
      'disturbance.csv',
      'cycles.csv',
      'hills.csv',
      'margins.csv',
      'report.html',
      'route.geojson',
      'segments.csv',
      'series-locked.csv',
      'series-pi-20s.csv',
    ]),
  );
  expect(files.some((name) => /^charts\/.+\.svg$/.test(name))).toBe(true);
});

test('the summary names its inputs with their SHA-256', () => {
  const expected = (['hill.yaml', 'vehicle.yaml'] as const).map((name) => {
    const bytes = readFileSync(join(here, name));
    return { name, sha256: createHash('sha256').update(bytes).digest('hex'), bytes: bytes.length };
  });
  expect(summary.inputs).toEqual(expected);
});

test('the summary has the figures that checks read', () => {
  expect(summary.status).toBe('ok');
  expect(summary.route).toMatchObject({ repairs: 0, points: expect.any(Number), knots: expect.any(Number) });
  expect(summary.spread).toMatchObject({ roads: expect.any(Number), seed: expect.any(Number) });
  expectClose(summary.route.length_m, 1600, 0.01, 'length [m]');
  expectClose(summary.route.climb_m, 9.6, 0.01, 'climb [m]');
  expect(summary.candidates.map(({ name }) => name)).toEqual(['locked', 'pi-20s']);
  for (const candidate of summary.candidates) {
    expect(candidate.status).toBe('completed');
    for (const key of [
      'rms_error_kmh',
      'within_band_pct',
      'worst_low_kmh',
      'worst_high_kmh',
      'time_s',
      'wheel_energy_wh',
      'throttle_travel_pct_per_km',
      'at_upper_limit_s',
      'at_lower_limit_s',
      'ledger_residual',
    ])
      expect(candidate[key], key).toBeTypeOf('number');
    expect(Math.abs(candidate.ledger_residual as number)).toBeLessThan(1e-6);
  }
  expect(summary.hills.length).toBeGreaterThan(0);
});

test('hills of the summary are the rows of hills.csv', () => {
  const rows = table('hills.csv');
  expect(rows.length).toBe(summary.hills.length);
  rows.forEach((row, i) => {
    for (const [key, text] of Object.entries(row)) {
      const value = summary.hills[i]![key];
      if (typeof value === 'number') expectClose(Number(text), value, 0, key);
      else expect(text).toBe(value ?? '');
    }
  });
});

test('no data file holds anything but numbers, words and empty fields', () => {
  for (const [name, text] of Object.entries(filesBelow(out)))
    if (/\.(csv|json|geojson|svg)$/.test(name))
      expect(text, name).not.toMatch(/\b(NaN|Infinity|undefined)\b/);
});

test('columns are those of the contract', () => {
  const header = (name: string) => readFileSync(join(out, name), 'utf8').split('\r\n')[0];
  expect(header('disturbance.csv')).toBe(
    'distance_m,elevation_m,raw_elevation_m,grade_pct,grade_sd_pct,heading_deg,curvature_per_m,headwind_m_s,crosswind_m_s,air_density_kg_m3',
  );
  expect(header('series-pi-20s.csv')).toBe(
    'time_s,distance_m,set_speed_kmh,speed_kmh,speed_min_kmh,speed_max_kmh,speed_error_kmh,throttle_pct,throttle_min_pct,throttle_max_pct,gear,demand_pct,drive_force_n,wheel_power_kw,wheel_energy_wh,limit,mode,drawn_energy_wh',
  );
  expect(header('segments.csv')).toBe(
    'candidate,segment,from_km,to_km,mean_grade_pct,mean_headwind_m_s,mean_error_kmh,rms_error_kmh,worst_error_kmh,mean_throttle_pct,at_limit_pct,wheel_energy_wh,time_s',
  );
  expect(header('hills.csv')).toBe(
    'hill,candidate,kind,from_km,to_km,length_m,mean_grade_pct,mean_grade_sd_pct,max_grade_pct,demand_pct,required_force_n,available_force_n,sustained_speed_kmh,speed_change_kmh,predicted_change_kmh,time_at_limit_s,recovery_s,cause,would_hold,gear_engaged,gear_needed,sustained_by_gear_kmh,brake_power_kw,brake_energy_wh,derating',
  );
});

test('the last energy of a series and the sum over segments are the energy of the summary', () => {
  for (const { name, wheel_energy_wh: energy } of summary.candidates) {
    const last = table(`series-${name}.csv`).at(-1)!;
    expectClose(Number(last.wheel_energy_wh), energy as number, 0.002, 'by bin [Wh]');
    const segments = table('segments.csv').filter((row) => row.candidate === name);
    const sum = segments.reduce((total, row) => total + Number(row.wheel_energy_wh), 0);
    expectClose(sum, energy as number, 0.005, 'by segment [Wh]');
  }
});

test('the force at the wheel that the hill needs is the one of Newton', () => {
  // m g sin + m g cos crr + 1/2 rho cda v^2, in the middle of the hill
  const row = table('disturbance.csv').find((knot) => Number(knot.distance_m) === 640)!;
  expectClose(Number(row.grade_pct), 12, 1e-9, 'grade [%]');
  const theta = Math.atan(0.12);
  const v = 60 / 3.6;
  const rho = Number(row.air_density_kg_m3);
  const force = 215 * 9.80665 * (Math.sin(theta) + 0.014 * Math.cos(theta)) + 0.5 * rho * 0.58 * v * v;
  const bin = table('series-pi-20s.csv').find((each) => Number(each.distance_m) === 640)!;
  expectClose(Number(bin.demand_pct), (100 * force) / 320, 0.6, 'demand [%]');
});

test('the same case gives the same bytes twice, and in another folder', () => {
  ridgehold(here, ['run', 'hill.yaml', '-o', 'again', '--quiet']);
  expect(filesBelow(join(here, 'again'))).toEqual(filesBelow(out));
  const elsewhere = temporaryFolder();
  cpSync(join(here, 'hill.yaml'), join(elsewhere, 'hill.yaml'));
  cpSync(join(here, 'vehicle.yaml'), join(elsewhere, 'vehicle.yaml'));
  ridgehold(here, ['run', join(elsewhere, 'hill.yaml'), '-o', join(elsewhere, 'result'), '--quiet']);
  expect(filesBelow(join(elsewhere, 'result'))).toEqual(filesBelow(out));
});

test('--quiet says nothing', () => {
  expect(ridgehold(here, ['run', 'hill.yaml', '-o', 'quiet', '--quiet'])).toEqual({
    status: 0,
    stdout: '',
    stderr: '',
  });
});

test('a requirement that is not met gives status 1, and a whole result', () => {
  const asked = `${CASE}requirements:\n  - {id: T-1, figure: worst_low_kmh, at_least: -0.1, where: all}\n`;
  writeFiles(here, { 'asked.yaml': asked });
  const { status, stdout, stderr } = ridgehold(here, ['run', 'asked.yaml', '--json']);
  expect(stderr).toContain('T-1');
  expect(status).toBe(1);
  const found: Summary = JSON.parse(stdout);
  expect(found.status).toBe('requirement_not_met');
  expect(found.requirements).toEqual([
    expect.objectContaining({
      id: 'T-1',
      figure: 'worst_low_kmh',
      candidate: 'pi-20s',
      limit: -0.1,
      verdict: 'not met',
      measured: expect.any(Number),
    }),
  ]);
});

test('--set changes the case, the vehicle in its own file too, and the summary says so', () => {
  const set = ['--set', 'hold.set_speed_kmh=50', '--set', 'vehicle.mass.payload_kg=40'];
  const { stdout, status } = ridgehold(here, ['run', 'hill.yaml', '-o', 'set', '--json', ...set]);
  expect(status).toBe(0);
  const found = JSON.parse(stdout);
  expect(found.overrides).toEqual(['hold.set_speed_kmh=50', 'vehicle.mass.payload_kg=40']);
  expect(found.hold.set_speed_kmh).toBe(50);
  expect(found.vehicle.mass_kg).toBe(240);
});

test('--units mph changes what people read, and no data file', () => {
  const { stderr } = ridgehold(here, ['run', 'hill.yaml', '-o', 'mph', '--units', 'mph']);
  expect(stderr).toContain('mph');
  const data = (folder: string) =>
    Object.entries(filesBelow(join(here, folder))).filter(([name]) => /\.(csv|json|geojson)$/.test(name));
  expect(data('mph')).toEqual(data('out/hill'));
  const report = (folder: string) => readFileSync(join(here, folder, 'report.html'), 'utf8');
  expect(report('mph')).not.toBe(report('out/hill'));
});

test('files that a run no longer writes go away, and files of others stay', () => {
  const folder = join(here, 'changing');
  ridgehold(here, ['run', 'hill.yaml', '-o', 'changing', '--quiet']);
  writeFiles(folder, { 'note.txt': 'mine', 'charts/mine.svg': '<svg/>' });
  expect(Object.keys(filesBelow(folder))).toContain('series-locked.csv');
  const only = '[{name: pi-20s, kind: pi, kp_pct_per_kmh: 4, ti_s: 8}]';
  expect(
    ridgehold(here, ['run', 'hill.yaml', '-o', 'changing', '--quiet', '--set', `candidates=${only}`]).stderr,
  ).toBe('');
  const left = Object.keys(filesBelow(folder));
  expect(left).not.toContain('series-locked.csv');
  expect(left).toEqual(expect.arrayContaining(['note.txt', 'charts/mine.svg', 'series-pi-20s.csv']));
  rmSync(folder, { recursive: true });
});
