import { spawnSync } from 'node:child_process';
import { readFileSync, statSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { beforeAll, expect, test } from 'vitest';
import {
  type Ended,
  PROGRAM,
  ridgehold,
  ridgeholdMany,
  temporaryFolder,
  writeFiles,
} from './start-program.ts';

const here = temporaryFolder();
const version = JSON.parse(readFileSync(resolve(import.meta.dirname, '../../package.json'), 'utf8')).version;

test('the built program is a command of its own', () => {
  expect(readFileSync(PROGRAM, 'utf8').startsWith('#!/usr/bin/env node\n')).toBe(true);
  expect(statSync(PROGRAM).mode & 0o111).toBe(0o111);
  const started = spawnSync(PROGRAM, ['--version'], { cwd: here, encoding: 'utf8' });
  expect(started.stdout).toBe(`ridgehold ${version}\n`);
});

test('an old Node is told what is needed, in one line', () => {
  const older =
    "Object.defineProperty(process, 'versions', { value: { ...process.versions, node: '18.20.4' } })";
  writeFiles(here, { 'older.cjs': older });
  const started = spawnSync(process.execPath, ['-r', './older.cjs', PROGRAM, '--version'], {
    cwd: here,
    encoding: 'utf8',
  });
  expect(started.stderr).toBe('error: ridgehold needs Node 20.19 or later, and this is Node 18.20.4\n');
  expect([started.status, started.stdout]).toEqual([2, '']);
});

test('--version and -V print the version of the package', () => {
  for (const flag of ['--version', '-V'])
    expect(ridgehold(here, [flag])).toEqual({ status: 0, stdout: `ridgehold ${version}\n`, stderr: '' });
});

test('the help names every command, and no command that does not exist', () => {
  const { status, stdout, stderr } = ridgehold(here, ['--help']);
  expect([status, stderr]).toEqual([0, '']);
  const commands = [...stdout.matchAll(/^ {2}([a-z]+) /gm)].map((match) => match[1]);
  expect(commands).toEqual(['run', 'road', 'compare', 'identify', 'tune', 'workbench', 'new', 'schema']);
  expect(ridgehold(here, ['help']).stdout).toBe(stdout);
});

test.each([
  [
    'run',
    [
      '--out',
      '--set',
      '--junit',
      '--png',
      '--png-width',
      '--threads',
      '--json',
      '--quiet',
      '--units',
      '--help',
    ],
  ],
  ['road', ['--out', '--set', '--png', '--png-width', '--json', '--quiet', '--units', '--help']],
  ['tune', ['--out', '--set', '--add', '--png', '--png-width', '--json', '--quiet', '--units', '--help']],
  ['workbench', ['--out', '--quiet', '--help']],
  ['compare', ['--out', '--json', '--quiet', '--units', '--help']],
  [
    'identify',
    [
      '--out',
      '--kind',
      '--vehicle',
      '--case',
      '--fit',
      '--mass-kg',
      '--rotating-kg',
      '--air-temperature-c',
      '--air-pressure-hpa',
      '--air-density-kg-m3',
      '--png',
      '--png-width',
      '--json',
      '--quiet',
      '--units',
      '--help',
    ],
  ],
  ['new', ['--quiet', '--help']],
  ['schema', ['--out', '--help']],
])('the help of %s tells all of its options', (command, options) => {
  const { status, stdout } = ridgehold(here, [command, '--help']);
  expect(status).toBe(0);
  expect([...stdout.matchAll(/^ {2}(?:-\w, | {4})(--[a-z0-9-]+)/gm)].map((match) => match[1])).toEqual(
    options,
  );
  expect(stdout).toContain(`Usage: ridgehold ${command} `);
  expect(Math.max(...stdout.split('\n').map((line) => line.length))).toBeLessThanOrEqual(100);
  expect(ridgehold(here, ['help', command]).stdout).toBe(stdout);
});

const REFUSED: readonly (readonly [args: readonly string[], words: string])[] = [
  [[], 'no command was given'],
  [['fly'], "'fly' is no command"],
  [['--fast'], "'--fast' is no option"],
  [['help', 'fly'], "'fly' is no command"],
  [['run'], 'CASE is missing'],
  [['run', 'a.yaml', 'b.yaml'], "'b.yaml' is one too many"],
  [['run', 'a.yaml', '--speed', '60'], "unknown option '--speed'"],
  [['run', 'a.yaml', '--out'], "'-o, --out <value>' argument missing"],
  [['run', 'a.yaml', '--out', ''], '--out is empty'],
  [['run', 'a.yaml', '--units', 'knots'], "--units cannot be 'knots'"],
  [['run', 'a.yaml', '--json=yes'], 'does not take an argument'],
  [['schema', 'road'], "there is no schema of 'road'"],
  [['run', 'a.yaml'], 'a.yaml: cannot be read: there is no such file'],
  [['run', '.'], 'found a folder'],
  [['road', 'nowhere.gpx'], 'nowhere.gpx: cannot be read'],
];
let refusals: readonly Ended[];
beforeAll(() => {
  refusals = ridgeholdMany(
    here,
    REFUSED.map(([args]) => args),
  );
});

test.each(REFUSED.map(([args, words], i) => [args, words, i] as const))(
  '%j is refused with status 2 and one line',
  (_, words, i) => {
    const { status, stdout, stderr } = refusals[i]!;
    expect(stderr).toContain(words);
    expect(stderr).toMatch(/^error: [^\n]+\n$/);
    expect([status, stdout]).toEqual([2, '']);
  },
);

test('a starter case is written into a new folder and runs', () => {
  const made = ridgehold(here, ['new', 'starter']);
  expect(made.stderr).toContain('ridgehold run');
  expect([made.status, made.stdout]).toEqual([0, '']);
  const next = /ridgehold run (\S+)/.exec(made.stderr)?.[1] ?? '';
  const run = ridgehold(here, ['run', next]);
  expect(run.stderr).toContain('report.html');
  expect([0, 1]).toContain(run.status);
});

test('a starter case is refused where something is', () => {
  writeFiles(here, { 'full/note.txt': 'mine' });
  const { status, stderr } = ridgehold(here, ['new', 'full']);
  expect(stderr).toContain('the folder is not empty');
  expect(status).toBe(2);
  expect(ridgehold(here, ['new', 'full/note.txt']).status).toBe(2);
});

test.each(['case', 'vehicle'])(
  'the schema of a %s is JSON Schema, to standard output or into a file',
  (what) => {
    const printed = ridgehold(here, ['schema', what]);
    expect(printed.stderr).toBe('');
    expect(JSON.parse(printed.stdout)).toMatchObject({ $schema: expect.stringContaining('json-schema.org') });
    expect(ridgehold(here, ['schema', what, '-o', `${what}.json`])).toEqual({
      status: 0,
      stdout: '',
      stderr: '',
    });
    expect(readFileSync(join(here, `${what}.json`), 'utf8')).toBe(printed.stdout);
  },
);
