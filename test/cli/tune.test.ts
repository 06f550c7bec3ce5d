import { chmodSync, lstatSync, readFileSync, statSync, symlinkSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
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
const asked = `${CASE}tune: {designs: [simc, road], cost: [{figure: rms_error_kmh, weight: 1}], grades_pct: [0], most_replays: 20}   # kept\n`;
writeFiles(here, { 'hill.yaml': asked, 'vehicle.yaml': VEHICLE, 'other.yaml': asked });
const at = (name: string): string => readFileSync(join(here, name), 'utf8');

let ended: Ended;
beforeAll(() => {
  ended = ridgehold(here, [
    'tune',
    'hill.yaml',
    '--add',
    'road',
    '--add',
    'simc=pi-delay',
    '--json',
    '--png-width',
    '400',
  ]);
});

describe('ridgehold tune', () => {
  test('says which gains to take and writes page, margins, proposals and their mark', () => {
    expect(ended.stderr).toMatch(/^Take tuned-(road|simc), Kp /);
    expect(ended.status).toBe(0);
    const folder = 'out/hill-tune';
    const { chosen } = JSON.parse(ended.stdout);
    expect(Object.keys(filesBelow(join(here, folder))).sort()).toEqual([
      'charts/gain-map.png',
      'charts/gain-map.svg',
      'charts/loop-pi-20s.png',
      'charts/loop-pi-20s.svg',
      `charts/loop-${chosen}.png`,
      `charts/loop-${chosen}.svg`,
      'margins.csv',
      'proposals.csv',
      'tune.html',
      'tune.json',
    ]);
    const found = JSON.parse(ended.stdout);
    expect(at(`${folder}/tune.json`)).toBe(ended.stdout);
    expect(found.status).toBe('ok');
    expect(found.files.filter((name: string) => !name.startsWith('charts/'))).toEqual([
      'tune.html',
      'margins.csv',
      'proposals.csv',
    ]);
    expect(found.files).toHaveLength(9);
    const map = at(`${folder}/charts/gain-map.svg`);
    expect(map).toMatch(/^<(\?xml|svg)/);
    expect(map).toContain(chosen);
    // No colour of a page: a file stands alone.
    expect(map).not.toContain('var(--');
    // PNG (ISO/IEC 15948): the signature, then the width, big-endian.
    const png = readFileSync(join(here, folder, 'charts/gain-map.png'));
    expect(png.subarray(1, 4).toString('latin1')).toBe('PNG');
    expect(png.readUInt32BE(16)).toBe(400);
    expect(found.proposals.map(({ name }: { name: string }) => name)).toEqual(['tuned-simc', 'tuned-road']);
    expect(ended.stdout).not.toContain(here);
  });

  test('adds what was asked for and leaves every other byte; a run finds the figures that were told', () => {
    const edited = at('hill.yaml');
    const start = [...asked].findIndex((c, i) => c !== edited[i]);
    expect(asked.slice(start)).toBe(edited.slice(edited.length - (asked.length - start)));
    expect(edited).toContain('  - {name: pi-delay, kind: pi, ');
    const run = ridgehold(here, ['run', 'hill.yaml', '-o', 'out/run', '--json', '--quiet']);
    expect(run.stderr).toBe('');
    const ran = JSON.parse(run.stdout).candidates;
    const told = JSON.parse(ended.stdout).proposals;
    for (const [name, proposal] of [
      ['tuned-road', 'tuned-road'],
      ['pi-delay', 'tuned-simc'],
    ]) {
      const one = ran.find((candidate: { name: string }) => candidate.name === name);
      const { figures } = told.find((candidate: { name: string }) => candidate.name === proposal);
      for (const figure of ['rms_error_kmh', 'worst_low_kmh', 'throttle_travel_pct_per_km'])
        expect(one[figure]).toBe(figures[figure]);
    }
  });

  test.each([
    [['tune', 'other.yaml', '--add', 'luck'], "'luck' is no way to gains"],
    [['tune', 'other.yaml', '--add', 'road=pi-20s'], 'the name is taken already'],
    [['tune', 'other.yaml', '--add', 'droop'], 'there is no proposal droop'],
    [['tune', 'other.yaml', '--add', 'road', '--set', 'hold.set_speed_kmh=50'], 'under tune. only'],
    [['tune', 'track.gpx'], 'is a track, not a case'],
    [['tune', 'other.yaml', '--set', 'tune.max_sensitivity=1'], 'from 1.1 to 4'],
  ])('refuses %j and writes nothing', (args, words) => {
    const refused = ridgehold(here, [...args, '-o', 'out/refused']);
    expect(refused.status).toBe(2);
    expect(refused.stderr).toContain(words);
    expect(at('other.yaml')).toBe(asked);
    expect(filesBelow(join(here, 'out'))['refused/tune.json']).toBeUndefined();
  });

  test('a read-only case stays as it is; one behind a link is edited where it lies, under its permissions', () => {
    writeFiles(here, { 'shut.yaml': asked, 'kept/real.yaml': asked, 'kept/vehicle.yaml': VEHICLE });
    chmodSync(join(here, 'shut.yaml'), 0o444);
    chmodSync(join(here, 'kept/real.yaml'), 0o640);
    symlinkSync('kept/real.yaml', join(here, 'link.yaml'));
    const add = (name: string) => [
      ...['tune', name, '--add', 'simc', '--set', 'tune.designs=[simc]', '-o', `out/${name}`, '--quiet'],
    ];
    const shut = ridgehold(here, add('shut.yaml'));
    expect(shut.stderr).toContain('shut.yaml: is read-only');
    expect([shut.status, at('shut.yaml')]).toEqual([2, asked]);
    const linked = ridgehold(here, add('link.yaml'));
    expect([linked.stderr, linked.status]).toEqual(['', 0]);
    expect(lstatSync(join(here, 'link.yaml')).isSymbolicLink()).toBe(true);
    expect(at('kept/real.yaml')).toContain('name: tuned-simc');
    expect(statSync(join(here, 'kept/real.yaml')).mode & 0o777).toBe(0o640);
  });

  test('ends with 1 where a candidate of the case exceeds the bound, and refuses to edit what is not UTF-8', () => {
    const done = ridgehold(here, [
      'tune',
      'other.yaml',
      '--set',
      'tune.designs=[simc]',
      '--set',
      'candidates.pi-20s.design.settling_s=3',
      '--set',
      'tune.max_sensitivity=1.15',
    ]);
    expect(done.stderr).toContain('exceeds');
    expect(done.status).toBe(1);
    writeFileSync(join(here, 'wide.yaml'), Buffer.from(`\ufeff${asked}`, 'utf16le'));
    const wide = ridgehold(here, ['tune', 'wide.yaml', '--add', 'road']);
    expect(wide.status).toBe(2);
    expect(wide.stderr).toContain('is not written in UTF-8');
  });
});
