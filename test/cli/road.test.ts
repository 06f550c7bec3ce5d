import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import { expect, test } from 'vitest';
import { expectClose } from '../compare.ts';
import { filesBelow, ridgehold, temporaryFolder, VEHICLE, writeFiles } from './start-program.ts';

const here = temporaryFolder();
const table = (name: string): Record<string, string>[] =>
  parse(readFileSync(join(here, name), 'utf8'), { columns: true });

/** 3 km straight north in steps of 10 m, rising 2 %, with one point doubled. */
const positions = Array.from(
  { length: 301 },
  (_, i) => [50 + (i * 10) / 111_229, -5.123456, 20 + 0.2 * i] as const,
);
const points = [...positions.slice(0, 100), positions[99]!, ...positions.slice(100)]
  .map(
    ([lat, lon, ele]) => `<trkpt lat="${lat.toFixed(7)}" lon="${lon}"><ele>${ele.toFixed(2)}</ele></trkpt>`,
  )
  .join('\n');
const GPX = `<?xml version="1.0"?>
<gpx version="1.1" xmlns="http://www.topografix.com/GPX/1/1"><trk><name>Ramp</name><trkseg>
${points}
</trkseg></trk></gpx>
`;
writeFiles(here, { 'ramp.gpx': GPX, 'vehicle.yaml': VEHICLE });

test('a bare track becomes disturbances, and people are told of repairs and uncertainty', () => {
  const { status, stdout, stderr } = ridgehold(here, ['road', 'ramp.gpx']);
  expect([status, stdout]).toEqual([0, '']);
  expect(stderr).toContain('gnss (assumed)');
  expect(stderr).toContain('1 doubled point');
  expect(stderr).toMatch(/Ramp: 3\.00 km, 301 points of the track, \d+ knots/);
  expect(stderr).toMatch(/Grade: one standard deviation [\d.]+ %/);
  expect(Object.keys(filesBelow(join(here, 'out/ramp'))).sort()).toEqual([
    'disturbance.csv',
    'road.json',
    'road.svg',
    'route.geojson',
  ]);
  const rows = table('out/ramp/disturbance.csv');
  const middle = rows[Math.floor(rows.length / 2)]!;
  expectClose(Number(middle.grade_pct), 2, 0.05, 'grade in the middle [%]');
  expectClose(Number(middle.heading_deg) % 360, 0, 0.2, 'heading [deg]');
  // one degree of latitude at 50 degrees north is 111 229 m (series of the meridian, WGS 84, from memory)
  expectClose(Number(rows.at(-1)!.distance_m), 3000, 1, 'length [m]');
});

test('--json prints the road as road.json holds it', () => {
  const { stdout } = ridgehold(here, ['road', 'ramp.gpx', '--json', '--quiet', '-o', 'json']);
  expect(stdout).toBe(readFileSync(join(here, 'json/road.json'), 'utf8'));
  const road = JSON.parse(stdout);
  expect(road.route).toMatchObject({ repairs: 1, name: 'Ramp', points: 301 });
  expect(road.files).toContain('road.svg');
  const half = ridgehold(here, [
    'road',
    'ramp.gpx',
    '--json',
    '--quiet',
    '--set',
    'road.grid_m=20',
    '-o',
    'half',
  ]);
  const coarse = JSON.parse(half.stdout).route;
  expect(coarse.points).toBe(301);
  expectClose(coarse.knots, 151, 1, 'knots every 20 m over 3 km');
});

test('the road of a case is the one that a run writes', () => {
  const text = `track: {file: ramp.gpx, trim_ends_m: 400}
road: {elevation_source: barometric}
vehicle: vehicle.yaml
hold: {set_speed_kmh: 60}
candidates: [{kind: locked}]
`;
  writeFiles(here, { 'case.yaml': text });
  expect(ridgehold(here, ['road', 'case.yaml', '-o', 'road', '--quiet']).status).toBe(0);
  expect(ridgehold(here, ['run', 'case.yaml', '-o', 'run', '--quiet']).status).toBe(0);
  const read = (name: string) => readFileSync(join(here, name), 'utf8');
  expect(read('road/disturbance.csv')).toBe(read('run/disturbance.csv'));
});

test('what trim_ends_m cuts off is in no file that is written', () => {
  // the positions within 370 m of both ends, cut to four decimals of a degree (11 m)
  const cut = ([lat]: (typeof positions)[number]) => lat.toFixed(6).slice(0, -2);
  const hidden = [...positions.slice(0, 38), ...positions.slice(-38)].map(cut);
  const shown = positions.slice(39, -39).map(cut);
  const all = Object.values(filesBelow(join(here, 'run'))).join('\n');
  expect(all).toContain('-5.123456');
  expect(shown.some((lat) => all.includes(lat))).toBe(true);
  expect(hidden.filter((lat) => all.includes(lat))).toEqual([]);
});

test('a key that no road has is refused, and no folder is left', () => {
  const { status, stderr } = ridgehold(here, ['road', 'ramp.gpx', '--set', 'road.grid=5', '-o', 'refused']);
  expect(stderr).toContain('grid_m');
  expect(status).toBe(2);
  expect(existsSync(join(here, 'refused'))).toBe(false);
});
