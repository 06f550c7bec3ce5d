import { createHash } from 'node:crypto';
import { appendFileSync, existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { type Ended, filesBelow, ridgehold, temporaryFolder } from './start-program.ts';

const root = resolve(import.meta.dirname, '../..');
const log = (name: string): string => join(root, `routes/logs/gallop-field-${name}.csv`);
const vehicle = join(root, 'routes/vehicles/proving-125.yaml');
const here = temporaryFolder();
const identify = (...args: string[]): Ended => ridgehold(here, ['identify', ...args]);
const weather = ['--vehicle', vehicle, '--air-temperature-c', '12', '--air-pressure-hpa', '1004'];
const coast = (...more: string[]): Ended =>
  identify(log('coast-down'), ...weather, '-o', 'cd/mine.yaml', ...more);
const written = (name: string): string => readFileSync(join(here, name), 'utf8');

describe('a coast-down', () => {
  let ended: Ended;
  beforeAll(() => {
    ended = coast('--json');
  });

  test('leaves a vehicle, a page and data, and says the numbers', () => {
    expect(ended.status).toBe(0);
    expect(ended.stderr).toMatch(/^CdA 0\.6\d\d\s±\s0\.0\d+\sm² and Crr 0\.015\d\s±\s0\.00\d+ from 10 runs/);
    expect(Object.keys(filesBelow(join(here, 'cd'))).sort()).toEqual([
      'charts/identify-force.svg',
      'charts/identify-residuals.svg',
      'identify.html',
      'identify.json',
      'mine.yaml',
    ]);
    expect(ended.stdout).toBe(written('cd/identify.json'));
    const mark = JSON.parse(ended.stdout);
    expect(mark.files).toEqual([
      'identify.html',
      'charts/identify-force.svg',
      'charts/identify-residuals.svg',
    ]);
    expect(mark.output.sha256).toBe(createHash('sha256').update(written('cd/mine.yaml')).digest('hex'));
    expect(ended.stdout + written('cd/identify.html') + written('cd/mine.yaml')).not.toContain(here);
    expect(ended.stdout + written('cd/identify.html') + written('cd/mine.yaml')).not.toContain(root);
  });

  test('leaves the same bytes again', () => {
    const before = filesBelow(join(here, 'cd'));
    const again = coast('--quiet');
    expect([again.status, again.stderr, again.stdout]).toEqual([0, '', '']);
    expect(filesBelow(join(here, 'cd'))).toEqual(before);
  });

  test('leaves a vehicle that run takes', () => {
    writeFileSync(
      join(here, 'case.yaml'),
      `track: {profile: [{length_m: 600, grade_pct: 0}]}
vehicle: cd/mine.yaml
hold: {set_speed_kmh: 60}
candidates: [{name: locked, kind: locked, throttle: level}]
`,
    );
    const done = ridgehold(here, ['run', 'case.yaml', '-o', 'ran']);
    expect([done.status, done.stderr]).toEqual([0, expect.not.stringContaining('error')]);
  });

  test('does not write over a vehicle that somebody has changed since', () => {
    appendFileSync(join(here, 'cd/mine.yaml'), '# by hand\n');
    const before = filesBelow(join(here, 'cd'));
    const refused = coast();
    expect(refused.status).toBe(2);
    expect(refused.stderr).toContain('cd/mine.yaml: would be written over');
    expect(filesBelow(join(here, 'cd'))).toEqual(before);
  });

  test('does not write over its own vehicle file, nor a page of somebody else', () => {
    writeFileSync(join(here, 'v.yaml'), readFileSync(vehicle));
    const own = identify(log('coast-down'), '--vehicle', 'v.yaml', '-o', 'v.yaml');
    expect([own.status, own.stderr]).toEqual([2, expect.stringContaining('v.yaml: would be written over')]);
    writeFileSync(join(here, 'identify.html'), 'mine');
    const page = identify(log('coast-down'), '--vehicle', 'v.yaml', '-o', 'w.yaml');
    expect([page.status, page.stderr]).toEqual([
      2,
      expect.stringContaining('identify.html: would be written over'),
    ]);
    expect(existsSync(join(here, 'w.yaml'))).toBe(false);
  });
});

test('several logs, told apart by their columns, may be of one test', () => {
  const rows = readFileSync(log('coast-down'), 'utf8').trim().split('\n');
  for (const way of ['there', 'back'])
    writeFileSync(
      join(here, `${way}.csv`),
      `${[rows[0], ...rows.filter((row) => row.includes(`,${way},`))].join('\n')}\n`,
    );
  const ended = identify('there.csv', 'back.csv', '--mass-kg', '215', '-o', 'two/v.yaml', '--json');
  expect(ended.status).toBe(0);
  const { runs, inputs } = JSON.parse(ended.stdout);
  expect(runs).toHaveLength(10);
  expect(inputs.map(({ name }: { name: string }) => name)).toEqual(['there.csv', 'back.csv']);
});

test('a step test and a ride say their numbers', () => {
  const steps = identify(log('steps'));
  expect([steps.status, steps.stderr]).toEqual([
    0,
    expect.stringMatching(/^The speed answers .* from 6 steps/),
  ]);
  expect(readdirSync(join(here, 'out/gallop-field-steps')).sort()).toEqual([
    'candidates.yaml',
    'charts',
    'identify.html',
    'identify.json',
  ]);
  const ride = identify(log('ride'), ...weather, '--fit', 'cda_m2', '--units', 'mph', '-o', 'ride/v.yaml');
  expect([ride.status, ride.stderr]).toEqual([
    0,
    expect.stringMatching(/^Drag area CdA 0\.6\d*\s±\s.* makes .* agree/),
  ]);
});

test('charts are drawn as PNG too, with --png, and a chart of somebody else is not written over', () => {
  const pictures = (): string[] => readdirSync(join(here, 'drawn/charts')).sort();
  const drawn = (...more: string[]): Ended =>
    identify(log('ride'), ...weather, '-o', 'drawn/v.yaml', '--quiet', ...more);
  expect(drawn('--png-width', '400')).toMatchObject({ status: 0, stderr: '' });
  const names = ['identify-energy', 'identify-speed'];
  expect(pictures()).toEqual(names.flatMap((name) => [`${name}.png`, `${name}.svg`]));
  // ISO/IEC 15948: eight bytes of signature, then the header, whose first number is the width.
  const bytes = readFileSync(join(here, 'drawn/charts/identify-energy.png'));
  expect([bytes.subarray(1, 4).toString('latin1'), bytes.readUInt32BE(16)]).toEqual(['PNG', 400]);
  const text = written('drawn/charts/identify-energy.svg');
  expect(text).toContain('>vehicle as it was</text>');
  expect(text).toContain('>as fitted</text>');
  expect(drawn().status).toBe(0);
  expect(pictures()).toEqual(names.map((name) => `${name}.svg`));

  mkdirSync(join(here, 'theirs/charts'), { recursive: true });
  writeFileSync(join(here, 'theirs/charts/identify-speed.svg'), 'mine');
  const refused = identify(log('ride'), ...weather, '-o', 'theirs/v.yaml');
  expect([refused.status, refused.stderr]).toEqual([
    2,
    expect.stringContaining('theirs/charts/identify-speed.svg: would be written over'),
  ]);
  expect(Object.keys(filesBelow(join(here, 'theirs')))).toEqual(['charts/identify-speed.svg']);
});

test('thin data are refused with what to measure, and leave nothing', () => {
  const thin = resolve(import.meta.dirname, '../broken/logs/thin-one-direction.csv');
  const ended = identify(thin, '--mass-kg', '215', '-o', 'thin/v.yaml');
  expect(ended.status).toBe(2);
  expect(ended.stderr).toContain('five runs or more each way');
  expect(existsSync(join(here, 'thin'))).toBe(false);
});

test.each([
  [['--mass-kg', 'heavy'], "--mass-kg cannot be 'heavy'", 'a number from 20 to 5000 kg'],
  [['--air-temperature-c', '200'], "--air-temperature-c cannot be '200'", '-40 to 55 deg C'],
  [['--kind', 'crash'], "--kind cannot be 'crash'", 'coast-down, step, ride'],
  [['--fit', 'cda_m2,colour'], "--fit cannot be 'cda_m2,colour'", 'cda_m2, crr, mass_kg'],
  [['--fit', 'crr'], '--fit has no use for a coast-down', '--mass-kg'],
  [['-o', 'vehicle.json'], "--out cannot be 'vehicle.json'", '.yaml or .yml'],
])('an option that is none is refused: %j', (options, says, allowed) => {
  const ended = identify(log('coast-down'), '--rotating-kg', '9', '--mass-kg', '215', ...options);
  expect(ended.status).toBe(2);
  expect(ended.stderr).toContain(says);
  expect(ended.stderr).toContain(allowed);
});

test('a log is needed', () => {
  const ended = identify();
  expect([ended.status, ended.stderr]).toEqual([2, expect.stringContaining('LOG... is missing')]);
});
