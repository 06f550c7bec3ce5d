import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import { beforeAll, expect, test } from 'vitest';
import { type Ended, filesBelow, ridgehold, temporaryFolder, VEHICLE, writeFiles } from './start-program.ts';

const here = temporaryFolder();
const CASE = `title: A matrix
track: {profile: [{length_m: 600, grade_pct: 0, heading_deg: 0}, {length_m: 300, grade_pct: 5, heading_deg: 0}, {length_m: 920, grade_pct: 0, heading_deg: 40}], vertical_curve_m: 40}
vehicle: vehicle.yaml
hold: {set_speed_kmh: 60}
candidates:
  - {name: locked, kind: locked, throttle: level}
  - {name: pi, kind: pi, kp_pct_per_kmh: 5, ti_s: 8}
requirements:
  - {id: C-1, figure: worst_low_kmh, at_least: -4, where: all}
  - {id: C-2, figure: recovery_s, at_most: 60}
`;
const MATRIX =
  'matrix: {loads: [solo, own, two_up], winds: [none, {speed_m_s: 6, from_deg: 0}], directions: [there, back]}\n';
writeFiles(here, { 'alone.yaml': CASE, 'matrix.yaml': CASE + MATRIX, 'vehicle.yaml': VEHICLE });

const run = (name: string, ...args: readonly string[]): Ended => ridgehold(here, ['run', name, ...args]);

let ended: Ended;
beforeAll(() => {
  ended = run('matrix.yaml', '--threads', '1', '-o', 'one');
});

test('the bytes of all files are the same for one thread, two, more than cores, and as many as there are', () => {
  const one = filesBelow(join(here, 'one'));
  expect(Object.keys(one)).toContain('matrix.csv');
  for (const [name, ...threads] of [
    ['two', '--threads', '2'],
    ['many', '--threads', '7'],
    ['as-many', '--quiet'],
  ] as const) {
    expect(run('matrix.yaml', ...threads, '-o', name).status).toBe(ended.status);
    expect(filesBelow(join(here, name))).toEqual(one);
  }
});

test('a requirement that is met, but not in every combination, ends the program with status 1', () => {
  expect(run('alone.yaml', '-o', 'alone').status).toBe(0);
  expect(existsSync(join(here, 'alone/matrix.csv'))).toBe(false);
  expect(ended.status).toBe(1);
});

test('people are told in how many combinations everything is met', () => {
  const rows: Record<string, string>[] = parse(readFileSync(join(here, 'one/matrix.csv'), 'utf8'), {
    columns: true,
  });
  const missed = new Set(
    rows.filter(({ verdict }) => verdict !== 'met').map(({ combination }) => combination),
  );
  expect(rows).toHaveLength(24);
  expect(ended.stderr).toContain(
    `pi: every requirement met in ${12 - missed.size} of 12 combinations; worst: two up`,
  );
});

test('a later run without a matrix takes its file away', () => {
  const first = run('matrix.yaml', '-o', 'again');
  expect(first.status, first.stderr).toBe(ended.status);
  expect(existsSync(join(here, 'again/matrix.csv'))).toBe(true);
  const later = run('alone.yaml', '-o', 'again');
  expect(later.status, later.stderr).toBe(0);
  expect(existsSync(join(here, 'again/matrix.csv'))).toBe(false);
});

test.each(['0', '-1', '2.5', 'two', '1000'])('--threads %s is refused', (count) => {
  const { status, stderr } = run('matrix.yaml', `--threads=${count}`, '-o', 'refused');
  expect(status).toBe(2);
  expect(stderr).toContain('a whole number from 1 to 256');
  expect(existsSync(join(here, 'refused'))).toBe(false);
});
