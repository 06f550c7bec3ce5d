import { existsSync, mkdirSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { CASE, filesBelow, ridgehold, temporaryFolder, VEHICLE, writeFiles } from './start-program.ts';

const here = temporaryFolder();
writeFiles(here, { 'hill.yaml': CASE, 'vehicle.yaml': VEHICLE });
const run = (folder: string, shell?: string, ...more: string[]) =>
  ridgehold(here, ['run', 'hill.yaml', '-o', folder, ...more], shell);

test('a full disk is told, and leaves no folder behind', () => {
  // blocks of 1024 bytes: no file may grow past 8 KiB
  const { status, stderr, stdout } = run('full', 'ulimit -f 8', '--json');
  expect(stderr).toMatch(/^error: full\/[^\n]+ cannot be written: the file grew past[^\n]+\n$/);
  expect([status, stdout]).toEqual([2, '']);
  expect(existsSync(join(here, 'full'))).toBe(false);
});

test('a full disk keeps the former result whole', () => {
  expect(run('kept').status).toBe(0);
  const before = filesBelow(join(here, 'kept'));
  const failed = run('kept', 'ulimit -f 8', '--set', 'hold.set_speed_kmh=50');
  expect(failed.status).toBe(2);
  expect(filesBelow(join(here, 'kept'))).toEqual(before);
  expect(readdirSync(join(here, 'kept')).filter((name) => name.startsWith('.'))).toEqual([]);
});

test('a file in place of the folder is refused before the work, and stays', () => {
  writeFiles(here, { taken: 'mine' });
  for (const folder of ['taken', 'taken/below']) {
    const { status, stderr } = run(folder);
    expect(stderr).toMatch(/^error: taken[^\n]* is a file, not a folder\n$/);
    expect(status).toBe(2);
  }
  expect(readFileSync(join(here, 'taken'), 'utf8')).toBe('mine');
});

test('a folder in place of a file is refused, and nothing is half written', () => {
  mkdirSync(join(here, 'odd/segments.csv'), { recursive: true });
  const { status, stderr } = run('odd');
  expect(stderr).toMatch(/^error: odd\/segments\.csv[^\n]*a folder stands in place of the file\n$/);
  expect(status).toBe(2);
  expect(readdirSync(join(here, 'odd'))).toEqual(['segments.csv']);
});

test.skipIf(!existsSync('/proc/self'))('a folder that cannot be written is told', () => {
  const { status, stderr } = run('/proc/ridgehold');
  expect(stderr).toMatch(/^error: \/proc\/ridgehold: cannot be written: [^\n]+\n$/);
  expect(status).toBe(2);
});

test('a summary that lists files elsewhere is not believed', () => {
  writeFiles(here, { 'victim.csv': 'mine' });
  writeFiles(join(here, 'trap'), {
    'summary.json': JSON.stringify({ schema_version: '1.0', files: ['../victim.csv', '/etc/x.csv', 7] }),
  });
  expect(run('trap').status).toBe(0);
  expect(readFileSync(join(here, 'victim.csv'), 'utf8')).toBe('mine');
});

test('what a killed run left is cleared away', () => {
  // no process has this number: it is above the greatest that Linux gives
  writeFiles(here, { 'killed/.ridgehold-99999999/new/report.html': 'half' });
  expect(run('killed').status).toBe(0);
  expect(readdirSync(join(here, 'killed')).filter((name) => name.startsWith('.'))).toEqual([]);
});
