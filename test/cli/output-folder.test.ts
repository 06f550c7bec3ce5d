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
    'summary.json': JSON.stringify({
      schema_version: '1.0',
      files: ['../victim.csv', '/etc/x.csv', 7, 'report.html'],
    }),
  });
  expect(run('trap').status).toBe(0);
  expect(readFileSync(join(here, 'victim.csv'), 'utf8')).toBe('mine');
});

test('a file that no run wrote is not written over', () => {
  for (const name of ['report.html', 'summary.json', 'disturbance.csv']) {
    const folder = `foreign-${name.replace(/\W/g, '-')}`;
    writeFiles(here, { [`${folder}/${name}`]: 'mine', [`${folder}/notes.txt`]: 'mine too' });
    const { status, stderr } = run(folder);
    expect(stderr).toMatch(
      new RegExp(`^error: ${folder}/${name}: would be written over, and no earlier run`),
    );
    expect(status).toBe(2);
    expect(filesBelow(join(here, folder))).toEqual({ [name]: 'mine', 'notes.txt': 'mine too' });
  }
});

test('a road and a run share a folder, and either is made anew', () => {
  const road = () => ridgehold(here, ['road', 'hill.yaml', '-o', 'shared', '--quiet']).status;
  const both = () => run('shared', undefined, '--quiet').status;
  expect([road(), both(), road(), both()]).toEqual([0, 0, 0, 0]);
});

test('studies whose case is called case go each to the folder of their own name', () => {
  for (const name of ['first', 'second']) {
    writeFiles(join(here, name), { 'case.yaml': CASE, 'vehicle.yaml': VEHICLE });
    expect(ridgehold(here, ['run', join(name, 'case.yaml'), '--quiet']).status).toBe(0);
    expect(existsSync(join(here, 'out', name, 'report.html'))).toBe(true);
  }
  expect(ridgehold(join(here, 'first'), ['run', 'case.yaml', '--quiet']).status).toBe(0);
  expect(existsSync(join(here, 'first/out/first/report.html'))).toBe(true);
  expect(existsSync(join(here, 'out/case'))).toBe(false);
});

test('a track alone is pointed to the command for it', () => {
  const { status, stderr } = ridgehold(here, ['run', 'ride.gpx']);
  expect(stderr).toMatch(/^error: ride\.gpx: is a track, not a case; [^\n]*ridgehold road ride\.gpx/);
  expect(status).toBe(2);
});

test('what a killed run left is cleared away', () => {
  // no process has this number: it is above the greatest that Linux gives
  writeFiles(here, { 'killed/.ridgehold-99999999/new/report.html': 'half' });
  expect(run('killed').status).toBe(0);
  expect(readdirSync(join(here, 'killed')).filter((name) => name.startsWith('.'))).toEqual([]);
});

/** In front of a run: does something in the program just before its nth renaming of a file. */
const beforeRename = (n: number, act: string): string => {
  const code = `import fs from 'node:fs'; import { syncBuiltinESMExports } from 'node:module'; const rename = fs.renameSync; let n = 0; fs.renameSync = (...paths) => { if (++n === ${n}) { ${act} } return rename(...paths); }; syncBuiltinESMExports();`;
  return `export NODE_OPTIONS='--import=data:text/javascript,${encodeURIComponent(code).replaceAll("'", '%27')}'`;
};
const visible = (folder: string): string[] =>
  Object.keys(filesBelow(join(here, folder))).filter((name) => !name.startsWith('.'));

test('a run that is killed between two renamings leaves no mark of a whole result', () => {
  expect(run('cut').status).toBe(0);
  const whole = visible('cut');
  expect(whole).toContain('summary.json');
  // Every old file is moved aside, the mark first, then every new one in: after the first, in the middle, before the last.
  const renamings = 2 * whole.length;
  for (const n of [2, whole.length + 1, renamings]) {
    const { status } = run('cut', beforeRename(n, 'process.kill(process.pid, "SIGKILL");'));
    expect(status, `killed before renaming ${n}`).toBeNull();
    expect(visible('cut'), `killed before renaming ${n}`).not.toContain('summary.json');
    expect(run('cut').status).toBe(0);
    expect(visible('cut').sort()).toEqual(whole.sort());
    expect(readdirSync(join(here, 'cut')).filter((name) => name.startsWith('.'))).toEqual([]);
  }
  expect(run('cut', beforeRename(renamings + 1, 'process.kill(process.pid, "SIGKILL");')).status).toBe(0);
});

test('after a killed run the files of the one before it are still known, and those of others stay', () => {
  writeFiles(here, { 'renamed.yaml': CASE.replaceAll('pi-20s', 'other') });
  const names = () =>
    visible('chain')
      .filter((name) => name.startsWith('series-'))
      .sort();
  expect(run('chain').status).toBe(0);
  expect(names()).toEqual(['series-locked.csv', 'series-pi-20s.csv']);
  const kill = beforeRename(3, 'process.kill(process.pid, "SIGKILL");');
  expect(ridgehold(here, ['run', 'renamed.yaml', '-o', 'chain'], kill).status).toBeNull();
  writeFiles(here, { 'chain/series-mine.csv': 'mine' });
  expect(ridgehold(here, ['run', 'renamed.yaml', '-o', 'chain']).status).toBe(0);
  expect(names()).toEqual(['series-locked.csv', 'series-mine.csv', 'series-other.csv']);
});

test('a renaming that fails puts back what was there, and takes away the folder of charts that it made', () => {
  const full = "throw Object.assign(new Error('no space'), { code: 'ENOSPC' });";
  writeFiles(here, { 'mine/notes.txt': 'mine' });
  const fresh = run('mine', beforeRename(12, full));
  expect(fresh.stderr).toMatch(
    /^error: mine\/[^\n]+ cannot be written: there is no space left on the device\n$/,
  );
  expect(fresh.status).toBe(2);
  expect(readdirSync(join(here, 'mine'))).toEqual(['notes.txt']);
  expect(run('mine').status).toBe(0);
  const before = filesBelow(join(here, 'mine'));
  for (const n of [2, 12, 20])
    expect(run('mine', beforeRename(n, full), '--set', 'hold.set_speed_kmh=50').status).toBe(2);
  expect(filesBelow(join(here, 'mine'))).toEqual(before);
  expect(readdirSync(join(here, 'mine')).filter((name) => name.startsWith('.'))).toEqual([]);
});
