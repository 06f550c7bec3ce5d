import { expect, it } from 'vitest';
import { candidatesOf } from '../../src/case/candidates-of.ts';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { starterCase } from '../../src/case/starter-case.ts';
import { vehicleOf } from '../../src/case/vehicle-of.ts';
import { vehicleOfCase } from '../../src/case/vehicle-of-case.ts';

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
    .replaceAll(/^( *)# (masks|wind|air|changes|bends|does|supervisor|faults|logged_rides): /gm, '$1$2: ')
    .replaceAll(/^# (track: \{profile.*)$/gm, '# $1');
  expect(uncommented).toContain('\nwind: ');
  expect(uncommented).toContain('\n  masks: ');
  expect(uncommented).toContain('\nsupervisor: ');
  expect(uncommented).toContain('\nlogged_rides: ');
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

it('works with the engine that is commented out, its gears and its grip', () => {
  const text = files.get('vehicle.yaml')!;
  const [before, after] = text.split(/^drive:\n(?: {2}.*\n)+/m) as [string, string];
  const engine = after
    .replace(/^# drive:\n(?:# {3}.*\n)+/m, (block) => block.replaceAll(/^# /gm, ''))
    .replace(/^# traction: /m, 'traction: ');
  const vehicle = readVehicleFile(before + engine, 'vehicle.yaml');
  expect(vehicle.file.drive?.kind).toBe('engine');
  expect(vehicle.file.traction).toBeDefined();
  const ridden = files.get('case.yaml')!.replaceAll(/^ {2}# (gear|shifts): /gm, '  $1: ');
  const document = readCaseFile(ridden, 'case.yaml');
  expect(document.file.hold.shifts).toHaveLength(2);
  const compiled = vehicleOfCase(document, vehicle);
  expect(compiled.drive.gear).toBe(3);
  expect(candidatesOf(document, compiled)).toHaveLength(4);
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
