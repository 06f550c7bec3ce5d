import { cpSync, existsSync, readFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import {
  type Ended,
  ridgehold,
  ridgeholdMany,
  temporaryFolder,
  VEHICLE,
  writeFiles,
} from './start-program.ts';

interface Row {
  readonly file: string;
  readonly code: string;
  readonly says: readonly string[];
  /** What refuses it; left out: a run. */
  readonly command?: 'tune';
}
const broken = resolve(import.meta.dirname, '../broken');
const rowsOf = (kind: string): Row[] => JSON.parse(readFileSync(join(broken, kind, 'table.json'), 'utf8'));

/** A case around a broken file of a kind; where the file is the case itself, it is run as it is. */
const around: Readonly<Record<string, (file: string) => string>> = {
  cases: (file) => file,
  vehicles: (file) => caseWith('{profile: [{length_m: 500, grade_pct: 0}]}', file),
  tracks: (file) => caseWith(`{file: ${JSON.stringify(file)}}`, 'vehicle.yaml'),
};
const here = temporaryFolder();
writeFiles(here, { 'vehicle.yaml': VEHICLE });

let cases = 0;
function caseWith(track: string, vehicle: string): string {
  const name = `around-${++cases}.yaml`;
  writeFiles(here, {
    [name]: `track: ${track}\nvehicle: ${JSON.stringify(vehicle)}\nhold: {set_speed_kmh: 60}\ncandidates: [{kind: locked}]\n`,
  });
  return name;
}

describe.each(['cases', 'vehicles', 'tracks'])('broken %s', (kind) => {
  const rows = rowsOf(kind);
  const resultOf = (file: string): string => `result-of-${file}`;
  const calls = rows.map(({ file, command = 'run' }) => [command, around[kind]!(file), '-o', resultOf(file)]);
  let endings: readonly Ended[];
  beforeAll(() => {
    for (const { file } of rows) cpSync(join(broken, kind, file), join(here, file), { recursive: true });
    endings = ridgeholdMany(here, calls);
  });

  test.each(rows.map((row, i) => ({ ...row, i })))(
    '$file is refused with its place and its words',
    ({ file, says, i }) => {
      const { status, stdout, stderr } = endings[i]!;
      expect(stderr.startsWith(`error: ${file}`), stderr).toBe(true);
      for (const words of says) expect(stderr).toContain(words);
      expect(stderr).not.toMatch(/fault of ridgehold| at .*\.js:\d+/);
      expect([status, stdout]).toEqual([2, '']);
      expect(existsSync(join(here, resultOf(file)))).toBe(false);
    },
  );

  test('a process of its own ends as the call among the others did', () => {
    for (const i of [0, rows.length >> 1, rows.length - 1])
      expect(ridgehold(here, calls[i]!)).toEqual(endings[i]);
  });
});

test('a folder in place of a track or a vehicle is refused', () => {
  writeFiles(here, { 'folder.gpx/x': '', 'folder.yaml/x': '' });
  for (const name of [
    caseWith('{file: folder.gpx}', 'vehicle.yaml'),
    caseWith('{file: t.gpx}', 'folder.yaml'),
  ]) {
    const { status, stderr } = ridgehold(here, ['run', name, '-o', 'result']);
    expect(stderr).toContain('found a folder');
    expect(status).toBe(2);
  }
});

test('a track that is not there is told with the line of the case that names it', () => {
  const name = caseWith('{file: nowhere.gpx}', 'vehicle.yaml');
  const { status, stderr } = ridgehold(here, ['run', name, '-o', 'result']);
  expect(stderr).toMatch(new RegExp(`^error: ${name}:1:\\d+: .*'nowhere.gpx' cannot be read`));
  expect(status).toBe(2);
});
