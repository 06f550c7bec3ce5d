import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { CASE, ridgehold, ridgeholdMany, temporaryFolder, VEHICLE, writeFiles } from './start-program.ts';

/** What a page begins with. */
const startOf = (file: string): unknown =>
  JSON.parse(/id="start">([^<]*)</.exec(readFileSync(file, 'utf8'))![1]!);

it('writes one file that carries the case and its files as they are, and tells where it is', () => {
  const folder = temporaryFolder();
  writeFiles(folder, { 'study/hill.yaml': CASE, 'study/vehicle.yaml': VEHICLE });
  const [named, again, demo] = ridgeholdMany(folder, [
    ['workbench', 'study/hill.yaml'],
    ['workbench', 'study/hill.yaml', '-o', 'out/hill/workbench.html'],
    ['workbench', '-o', 'demo.html', '--quiet'],
  ]);
  expect(named).toEqual({ status: 0, stdout: '', stderr: 'The workbench is at out/hill/workbench.html\n' });
  expect(again!.status).toBe(0);
  expect(startOf(join(folder, 'out/hill/workbench.html'))).toEqual({
    study: {
      file: 'hill.yaml',
      files: [
        { name: 'hill.yaml', text: CASE },
        { name: 'vehicle.yaml', text: VEHICLE },
      ],
    },
  });
  expect(demo).toEqual({ status: 0, stdout: '', stderr: '' });
  expect(startOf(join(folder, 'demo.html'))).toEqual({ demo: 0 });
  const page = readFileSync(join(folder, 'demo.html'), 'utf8');
  expect(page.length).toBeLessThan(1_500_000);
  expect(page.includes("default-src 'none'")).toBe(true);
});

it('writes over no file of somebody else, and refuses what is no case', () => {
  const folder = temporaryFolder();
  writeFiles(folder, { 'hill.yaml': CASE, 'vehicle.yaml': VEHICLE, 'mine.html': '<p>mine</p>', 't.gpx': '' });
  const ended = ridgeholdMany(folder, [
    ['workbench', 'hill.yaml', '-o', 'hill.yaml'],
    ['workbench', 'hill.yaml', '-o', 'mine.html'],
    ['workbench', 't.gpx'],
    ['workbench', 'nowhere.yaml'],
    ['workbench', 'hill.yaml', 'hill.yaml'],
  ]);
  expect(ended.map(({ status }) => status)).toEqual([2, 2, 2, 2, 2]);
  expect(ended.map(({ stderr }) => stderr.split('\n')[0])).toEqual([
    expect.stringContaining('a name that ends in .html'),
    expect.stringContaining('mine.html: would be written over'),
    expect.stringContaining('is a track, not a case'),
    expect.stringContaining('nowhere.yaml'),
    expect.stringContaining('one too many'),
  ]);
  expect(readFileSync(join(folder, 'mine.html'), 'utf8')).toBe('<p>mine</p>');
  expect(readFileSync(join(folder, 'hill.yaml'), 'utf8')).toBe(CASE);
});

it('a fault of the case is told with its place', () => {
  const folder = temporaryFolder();
  writeFiles(folder, { 'hill.yaml': CASE.replace('hold:', 'hodl:'), 'vehicle.yaml': VEHICLE });
  const { status, stderr } = ridgehold(folder, ['workbench', 'hill.yaml']);
  expect(status).toBe(2);
  expect(stderr).toContain('hodl');
  expect(existsSync(join(folder, 'out'))).toBe(false);
});
