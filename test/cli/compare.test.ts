import { createHash } from 'node:crypto';
import { cpSync, existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import { beforeAll, describe, expect, test } from 'vitest';
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
const asked = `${CASE}requirements:
  - {id: T-1, figure: worst_low_kmh, at_least: -60, where: all}
  - {id: T-2, figure: worst_high_kmh, at_most: 30, where: all}
  - {id: T-3, figure: rms_error_kmh, at_most: 0.001, where: all}
`;
// After: another payload, a softer design, one requirement so tight that it is lost, and a candidate more.
const changed = asked
  .replace('settling_s: 20', 'settling_s: 40')
  .replace('at_least: -60', 'at_least: -0.5')
  .replace(
    '  - {name: pi-20s',
    '  - {name: pi-typed, kind: pi, sample_s: 0.02, kp_pct_per_kmh: 4, ti_s: 8}\n  - {name: pi-20s',
  );
writeFiles(here, {
  'hill.yaml': asked,
  'changed.yaml': changed,
  'vehicle.yaml': VEHICLE,
});
const run = (file: string, folder: string, ...more: string[]) => {
  const { stderr } = ridgehold(here, ['run', file, '-o', folder, '--quiet', ...more]);
  expect(stderr).toBe('');
};
const compare = (...args: string[]) => ridgehold(here, ['compare', ...args]);
const summaryOf = (folder: string) => JSON.parse(readFileSync(join(here, folder, 'summary.json'), 'utf8'));

let ended: Ended;
let found: ReturnType<typeof JSON.parse>;
beforeAll(() => {
  run('hill.yaml', 'out/a');
  run('changed.yaml', 'out/b', '--set', 'vehicle.mass.payload_kg=40');
  ended = compare('out/a', 'out/b', '--json');
  found = JSON.parse(ended.stdout);
});

test('what was met and no longer is gives status 1, and is said first', () => {
  expect(ended.status).toBe(1);
  expect(ended.stderr).toMatch(
    /^One requirement that was met no longer is: T-1 of pi-20s \(furthest below, /,
  );
  expect(ended.stderr).toContain(join('out', 'a-and-b', 'compare.html'));
});

test('the other way round it is won, and gives status 0', () => {
  const { status, stdout, stderr } = compare('out/b', 'out/a', '-o', 'back');
  expect([status, stdout]).toEqual([0, '']);
  expect(stderr).toMatch(/^All that was met still is, and one requirement more: T-1 of pi-20s/);
  // A candidate that is gone loses nothing.
  expect(stderr).toContain('only before: T-2 of pi-typed');
});

test('--json prints what is written as compare.json, and the folder holds nothing else', () => {
  const files = filesBelow(join(here, 'out/a-and-b'));
  expect(Object.keys(files).sort()).toEqual(['compare.html', 'compare.json']);
  expect(files['compare.json']).toBe(ended.stdout);
  expect(found.files).toEqual(['compare.html']);
});

test('files are told by their SHA-256, values by their keys', () => {
  const sha = (name: string) =>
    createHash('sha256')
      .update(readFileSync(join(here, name)))
      .digest('hex');
  expect(found.inputs.files).toEqual([
    {
      change: 'changed',
      role: 'case',
      before: { name: 'hill.yaml', sha256: sha('hill.yaml') },
      after: { name: 'changed.yaml', sha256: sha('changed.yaml') },
    },
    {
      change: 'same',
      role: 'file',
      before: { name: 'vehicle.yaml', sha256: sha('vehicle.yaml') },
      after: { name: 'vehicle.yaml', sha256: sha('vehicle.yaml') },
    },
  ]);
  expect(found.inputs.overrides).toEqual({ before: [], after: ['vehicle.mass.payload_kg=40'] });
  const values = Object.fromEntries(
    found.inputs.values.map((one: Record<string, string>) => [
      `${one.of} ${one.key}`,
      [one.before, one.after],
    ]),
  );
  expect(values).toMatchObject({
    'vehicle mass.payload_kg': ['15', '40'],
    'case candidates.pi-20s.design.settling_s': ['20', '40'],
    'case requirements.T-1.at_least': ['-60', '-0.5'],
    'case candidates.pi-typed.ti_s': [null, '8'],
  });
  expect(Object.keys(values).filter((key) => !/pi-typed|payload|settling|T-1/.test(key))).toEqual([]);
});

test('each figure has both values, their difference, and whether that is better', () => {
  expect(found.candidates.map(({ name }: { name: string }) => name)).toEqual(['locked', 'pi-20s']);
  expect([found.candidates_only_before, found.candidates_only_after]).toEqual([[], ['pi-typed']]);
  const [before, after] = ['out/a', 'out/b'].map((folder) =>
    summaryOf(folder).candidates.find(({ name }: { name: string }) => name === 'pi-20s'),
  );
  const figures = found.candidates[1].figures;
  expect(figures.length).toBeGreaterThan(20);
  for (const { figure, before: was, after: is, difference, change } of figures) {
    expect([was, is], figure).toEqual([before[figure], after[figure]]);
    if (was === null || is === null) continue;
    expectClose(difference ?? is - was, is - was, 1e-6, figure);
    expect(['better', 'worse', 'changed', 'same', 'not comparable'], figure).toContain(change);
  }
  const one = (name: string) => figures.find(({ figure }: { figure: string }) => figure === name);
  // Heavier and softer: it loses more on the climb.
  expect(one('worst_low_kmh')).toMatchObject({ unit: 'km/h', change: 'worse' });
  expect(one('worst_low_kmh').difference).toBeLessThan(-0.05);
  expect(one('rms_error_kmh').change).toBe('worse');
  expect(one('mean_error_kmh').change).toMatch(/changed|same/);
});

test('requirement by requirement, with what was asked before and after', () => {
  const fates = found.requirements.map(
    ({ id, candidate, fate, asked_differently }: Record<string, unknown>) => [
      id,
      candidate,
      fate,
      asked_differently,
    ],
  );
  expect(fates).toEqual(
    expect.arrayContaining([
      ['T-1', 'pi-20s', 'lost', true],
      ['T-2', 'pi-20s', 'same', false],
      ['T-3', 'pi-20s', 'same', false],
      ['T-2', 'pi-typed', 'new', false],
    ]),
  );
  const lost = found.requirements.find(({ fate }: { fate: string }) => fate === 'lost');
  expect([lost.before.limit, lost.after.limit]).toEqual([-60, -0.5]);
  expect([lost.before.verdict, lost.after.verdict]).toEqual(['met', 'not met']);
});

test('hills are matched by place, and the speed error there is that of the series', () => {
  const matched = found.hills.filter(
    ({ before, after }: Record<string, unknown[]>) => before!.length > 0 && after!.length > 0,
  );
  expect(matched.length).toBeGreaterThan(0);
  const [hill] = matched;
  const places = [...hill.before, ...hill.after];
  // The written climb is from 600 m to 680 m.
  expect(Math.min(...places.map(({ from_km }) => from_km))).toBeLessThan(0.68);
  const low = (folder: string) =>
    (
      parse(readFileSync(join(here, folder, 'series-pi-20s.csv'), 'utf8'), { columns: true }) as Record<
        string,
        string
      >[]
    )
      .map((row) => Number(row.speed_min_kmh) - Number(row.set_speed_kmh))
      .reduce((a, b) => Math.min(a, b));
  const design = hill.candidates.find(({ candidate }: { candidate: string }) => candidate === 'pi-20s');
  expectClose(design.before.speed_change_kmh, low('out/a'), 0.01, 'before [km/h]');
  expectClose(design.after.speed_change_kmh, low('out/b'), 0.01, 'after [km/h]');
  expect(design.change).toBe('worse');
});

test('two equal results are said to be the same', () => {
  const { status, stderr } = compare('out/a', 'out/a', '-o', 'same');
  expect(status).toBe(0);
  expect(stderr).toMatch(/^Every requirement stands as it did \(2 of 3 met\); every figure is the same\.\n/);
  expect(readFileSync(join(here, 'same/compare.html'), 'utf8')).toContain('The same record in both');
});

test('a requirement that was met and is no longer asked is lost', () => {
  run(
    'hill.yaml',
    'out/less',
    '--set',
    'requirements=[{id: T-1, figure: worst_low_kmh, at_least: -60, where: all}]',
  );
  const { status, stderr } = compare('out/a', 'out/less', '-o', 'less');
  expect(status).toBe(1);
  expect(stderr).toMatch(/^One requirement that was met no longer is: T-2 of pi-20s \(no longer asked\)/);
});

test('the same folders give the same bytes, from anywhere; --units mph changes what people read alone', () => {
  const from = (folder: string, ...args: string[]) => {
    const { status } = ridgehold(join(here, folder), ['compare', ...args, '--quiet']);
    expect(status).toBe(1);
  };
  mkdirSync(join(here, 'deep'), { recursive: true });
  from('deep', '../out/a', join(here, 'out/b'), '-o', 'again');
  const first = filesBelow(join(here, 'out/a-and-b'));
  expect(filesBelow(join(here, 'deep/again'))).toEqual(first);
  from('.', 'out/a', 'out/b', '-o', 'mph', '--units', 'mph');
  const mph = filesBelow(join(here, 'mph'));
  expect(mph['compare.json']).toBe(first['compare.json']);
  expect(mph['compare.html']).toContain('mph');
  expect(mph['compare.html']).not.toContain('km/h)</text>');
  for (const text of Object.values(first)) expect(text).not.toContain(here);
});

test('--quiet says nothing', () => {
  expect(compare('out/b', 'out/a', '-o', 'quiet', '--quiet')).toEqual({ status: 0, stdout: '', stderr: '' });
});

test('the folder before is refused as the one after is', () => {
  const { status, stderr } = compare('nowhere', 'out/a', '-o', 'never');
  expect(stderr).toMatch(/^error: nowhere: is no whole result/);
  expect(status).toBe(2);
});

test('a full series by sample is read as well as one by bin', () => {
  run('hill.yaml', 'out/full', '--set', 'output.series=full');
  const { status, stdout } = compare('out/a', 'out/full', '-o', 'full', '--json');
  expect(status).toBe(0);
  const { hills } = JSON.parse(stdout);
  for (const { candidates } of hills)
    for (const { before, after } of candidates)
      expectClose(before.speed_change_kmh, after.speed_change_kmh, 0.01, 'speed error [km/h]');
});

test('a result of schema 1.0, without values, is compared, and what cannot be said is said', () => {
  cpSync(join(here, 'out/a'), join(here, 'out/old'), { recursive: true });
  const { given, ...old } = summaryOf('out/a');
  expect(given.length).toBeGreaterThan(10);
  writeFiles(here, { 'out/old/summary.json': JSON.stringify({ ...old, schema_version: '1.0' }) });
  const { status, stdout, stderr } = compare('out/old', 'out/a', '-o', 'old', '--json');
  expect(status).toBe(0);
  expect(stderr).toContain('what changed in the values cannot be said');
  expect(JSON.parse(stdout).inputs.values).toBeNull();
});

test('files of others are not written over, an earlier comparison is, and it may stand beside a result', () => {
  writeFiles(here, { 'mine/compare.html': 'mine' });
  const refused = compare('out/a', 'out/b', '-o', 'mine');
  expect(refused.stderr).toMatch(/^error: mine\/compare\.html: would be written over[^\n]*\n$/);
  expect(refused.status).toBe(2);
  expect(filesBelow(join(here, 'mine'))).toEqual({ 'compare.html': 'mine' });
  expect(compare('out/a', 'out/b', '-o', 'out/b').status).toBe(1);
  expect(compare('out/a', 'out/b', '-o', 'out/b').status).toBe(1);
  run('changed.yaml', 'out/b', '--set', 'vehicle.mass.payload_kg=40');
  expect(existsSync(join(here, 'out/b/compare.json'))).toBe(true);
});

describe('a folder that is no whole result is refused with status 2, and nothing is written', () => {
  const damaged = (change: (text: string) => string) => () => {
    cpSync(join(here, 'out/a'), join(here, 'bad'), { recursive: true });
    const path = 'bad/summary.json';
    writeFiles(here, { [path]: change(readFileSync(join(here, path), 'utf8')) });
  };
  const edited = (edit: (summary: ReturnType<typeof summaryOf>) => unknown) =>
    damaged((text) => {
      const summary = JSON.parse(text);
      return JSON.stringify(edit(summary) ?? summary);
    });
  const series = (change: (text: string) => string | null) => () => {
    cpSync(join(here, 'out/a'), join(here, 'bad'), { recursive: true });
    const path = join(here, 'bad/series-pi-20s.csv');
    const text = change(readFileSync(path, 'utf8'));
    if (text === null) rmSync(path);
    else writeFiles(here, { 'bad/series-pi-20s.csv': text });
  };
  test.each<[string, () => void, RegExp]>([
    ['no such folder', () => {}, /^error: bad: is no whole result \(found there is no such folder;/],
    [
      'a file',
      () => writeFiles(here, { bad: 'mine' }),
      /^error: bad: is no whole result \(found it is a file;/,
    ],
    ['no summary.json', () => writeFiles(here, { 'bad/note.txt': '' }), /found there is no summary\.json;/],
    ['a road alone', () => writeFiles(here, { 'bad/road.json': '{}' }), /found a road alone;/],
    [
      'a folder in place of the summary',
      () => writeFiles(here, { 'bad/summary.json/x': '' }),
      /summary\.json: cannot be read/,
    ],
    ['an empty summary', damaged(() => ''), /summary\.json: the file is empty/],
    [
      'a summary that was cut',
      damaged((text) => text.slice(0, 3000)),
      /summary\.json:\d+:\d+: is damaged: it is not valid JSON/,
    ],
    [
      'a summary with a fault',
      damaged((text) => text.replace('"status":', '"status"')),
      /summary\.json:\d+:\d+: is damaged/,
    ],
    ['a list', edited(() => []), /summary\.json: schema_version: is not what ridgehold run writes/],
    [
      'another schema',
      edited(() => ({ schema_version: '2.0' })),
      /summary\.json: schema_version: is of a shape that this version does not read \(found 2\.0; allowed: 1\.0 and later 1\.x/,
    ],
    ['no version', edited((one) => ({ ...one, schema_version: undefined })), /schema_version: is not what/],
    [
      'no candidates',
      edited((one) => ({ ...one, candidates: undefined })),
      /summary\.json: candidates: is not what ridgehold run writes/,
    ],
    [
      'a wrong type',
      edited((one) => {
        one.candidates[1].end_m = 'far';
      }),
      /summary\.json: candidates\.1\.end_m: is not what/,
    ],
    [
      'a name that leaves the folder',
      edited((one) => {
        one.candidates[1].name = '../../x';
      }),
      /candidates\.1\.name: is not what/,
    ],
    [
      'one name twice',
      edited((one) => {
        one.candidates[0].name = 'pi-20s';
      }),
      /candidates: is not what ridgehold run writes \(found two are called pi-20s/,
    ],
    [
      'a wrong verdict',
      edited((one) => {
        one.requirements[0].verdict = 'fine';
      }),
      /requirements\.0\.verdict: is not what/,
    ],
    [
      'a series not listed',
      edited((one) => {
        one.files = [];
      }),
      /summary\.json: files: does not list series-locked\.csv/,
    ],
    ['a series missing', series(() => null), /series-pi-20s\.csv: cannot be read: there is no such file/],
    [
      'a series cut in a line',
      series((text) => text.slice(0, 5000)),
      /series-pi-20s\.csv:\d+: is not what ridgehold run writes/,
    ],
    [
      'a column missing',
      series((text) => text.replace('throttle_pct', 'throttle')),
      /series-pi-20s\.csv:1: is not what ridgehold run writes \(found no column throttle_pct/,
    ],
    [
      'a word for a number',
      series((text) => text.replace(/\r\n\d[^,]*,/, '\r\nlong,').replace(/(\r\n[^,]*,)[^,]*/, '$1far')),
      /series-pi-20s\.csv:2: is not what .*distance_m 'far'/,
    ],
    [
      'a row twice',
      series((text) => text.replace(/(\r\n[^\r]*)(\r\n[^\r]*)(\r\n[^\r]*)/, '$1$3$2')),
      /series-pi-20s\.csv:4: .*goes back/,
    ],
  ])('%s', (_, make, words) => {
    rmSync(join(here, 'bad'), { recursive: true, force: true });
    make();
    const { status, stdout, stderr } = compare('out/a', 'bad', '-o', 'never', '--json');
    expect(stderr).toMatch(words);
    expect(stderr).toMatch(/^error: [^\n]+\n$/);
    expect([status, stdout]).toEqual([2, '']);
    expect(existsSync(join(here, 'never'))).toBe(false);
  });
});
