import { expect, it } from 'vitest';
import { candidatesOf } from '../../src/case/candidates-of.ts';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { starterCase } from '../../src/case/starter-case.ts';
import { vehicleOf } from '../../src/case/vehicle-of.ts';

const files = new Map(starterCase().map(({ name, text }) => [name, text]));

it('is read without a fault, and names only files that it brings', () => {
  const [first] = starterCase();
  const document = readCaseFile(first!.text, first!.name);
  expect(files.has(document.trackFile!)).toBe(true);
  expect(files.has(document.vehicleFile!)).toBe(true);
  expect(() => readVehicleFile(files.get(document.vehicleFile!)!, document.vehicleFile!)).not.toThrow();
});

it('says that it is invented', () => {
  expect(files.get('case.yaml')).toContain('invented');
  expect(files.get('vehicle.yaml')).toContain('invented');
});

it('works with every line that is commented out', () => {
  const uncommented = files
    .get('case.yaml')!
    .replaceAll(/^( *)# (masks|wind|air|changes): /gm, '$1$2: ')
    .replaceAll(/^# (track: \{profile.*)$/gm, '# $1');
  expect(uncommented).toContain('\nwind: ');
  expect(uncommented).toContain('\n  masks: ');
  expect(() => readCaseFile(uncommented, 'case.yaml')).not.toThrow();
  const profile = /^# (track: \{profile.*\})$/m.exec(files.get('case.yaml')!)![1]!;
  expect(() =>
    readCaseFile(files.get('case.yaml')!.replace('track: {file: track.csv}', profile), 'case.yaml'),
  ).not.toThrow();
  const load = /^# (road_load: \{f0.*\})$/m.exec(files.get('vehicle.yaml')!)![1]!;
  expect(() =>
    readVehicleFile(files.get('vehicle.yaml')!.replace(/^road_load: .*$/m, load), 'v.yaml'),
  ).not.toThrow();
});

it('brings a track with rising distances, up and down again', () => {
  const [header, ...rows] = files.get('track.csv')!.trimEnd().split('\n');
  expect(header).toBe('distance_m,elevation_m');
  const points = rows.map((row) => row.split(',').map(Number) as [number, number]);
  expect(points.at(-1)![0]).toBe(5000);
  for (let i = 1; i < points.length; i++) expect(points[i]![0] - points[i - 1]![0]).toBe(20);
  const heights = points.map(([, z]) => z);
  // 600 m at 1.5 %, 500 m at 3 %, 300 m at 4.5 %, 400 m at 2 %: 9 + 15 + 13.5 + 8 m above the start at 120 m.
  expect(Math.max(...heights)).toBeCloseTo(165.5, 6);
});

it('has designs that its vehicle can meet', () => {
  const document = readCaseFile(files.get('case.yaml')!, 'case.yaml');
  const vehicle = vehicleOf(readVehicleFile(files.get('vehicle.yaml')!, 'vehicle.yaml'));
  const candidates = candidatesOf(document, vehicle);
  expect(candidates.map(({ name }) => name)).toEqual(['locked', 'from-the-hill', 'settles-in-30s', 'typed']);
});
