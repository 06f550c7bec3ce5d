import { expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { roadOf } from '../../src/run/road-of.ts';
import { expectClose } from '../compare.ts';

const bytes = (text: string) => new TextEncoder().encode(text);
const slope = Array.from({ length: 101 }, (_, i) => `${20 * i},${(0.8 * i).toFixed(1)}`).join('\n');
const TRACK = `distance_m,elevation_m\n${slope}\n`;

test('a bare track has the defaults of a case, and says which', () => {
  const result = roadOf({ file: 'slope.csv', read: () => bytes(TRACK) });
  expect(result.name).toBe('slope');
  expect(result.inputs.map(({ name }) => name)).toEqual(['slope.csv']);
  expectClose(result.road.distance[result.road.size - 1]!, 2000, 1e-9, 'length [m]');
  const middle = result.road.grade[Math.floor(result.road.size / 2)]!;
  expectClose(middle, 0.04, 1e-3, 'grade in the middle');
  const keys = result.defaults.map(({ key }) => key);
  expect(keys).toContain('road.elevation_source');
  expect(keys.every((key) => /^(track|road|wind|air)/.test(key))).toBe(true);
});

test('overrides of the road reach a bare track', () => {
  const overrides = ['road.elevation_source=exact', 'road.grid_m=20', 'track.trim_ends_m=100'];
  const { road } = roadOf({ file: 'slope.csv', read: () => bytes(TRACK), overrides });
  expectClose(road.distance[road.size - 1]!, 1800, 1e-6, 'length [m]');
  expect(road.grid).toBe(20);
  expect(road.smoothing).toBeNull();
});

test('the road of a case is made without its vehicle', () => {
  const text = `track: {file: slope.csv}
road: {elevation_source: exact}
vehicle: nowhere.yaml
hold: {set_speed_kmh: 60}
candidates: [{kind: locked}]
`;
  const asked: string[] = [];
  const read = (name: string) => {
    asked.push(name);
    return bytes(name === 'slope.csv' ? TRACK : text);
  };
  const { road } = roadOf({ file: 'case.yaml', read });
  expect(asked).toEqual(['case.yaml', 'slope.csv']);
  expectClose(road.distance[road.size - 1]!, 2000, 1e-9, 'length [m]');
});

test('a .json is a track when it says its GeoJSON type, else a case', () => {
  const line = {
    type: 'LineString',
    coordinates: Array.from({ length: 60 }, (_, i) => [-5 + 0.0005 * i, 50, 10 + 0.5 * i]),
  };
  expect(
    roadOf({ file: 'line.json', read: () => bytes(JSON.stringify(line)) }).road.latitudeDeg,
  ).not.toBeNull();
  const written = {
    track: { profile: [{ length_m: 500, grade_pct: 3 }] },
    vehicle: 'v.yaml',
    hold: { set_speed_kmh: 60 },
    candidates: [{ kind: 'locked' }],
  };
  const { road } = roadOf({ file: 'case.json', read: () => bytes(JSON.stringify(written)) });
  expectClose(road.distance[road.size - 1]!, 500, 1e-9, 'length [m]');
});

/** Line and message of what is refused. */
function refusal(file: string, files: Readonly<Record<string, string>>, overrides: readonly string[] = []) {
  try {
    roadOf({ file, read: (name) => bytes(files[name] ?? ''), overrides });
  } catch (error) {
    expect(error).toBeInstanceOf(InputError);
    return error as InputError;
  }
  return expect.unreachable();
}
const CASE_OF_PROFILE = (track: string): string => `track: ${track}
vehicle: nowhere.yaml
hold: {set_speed_kmh: 60}
candidates: [{kind: locked}]
`;

test('a written road that climbs out of the range of elevations is refused at the piece', () => {
  // 60 % over 20 km: 12 km up. The first piece is harmless.
  const text = CASE_OF_PROFILE(`
  profile:
    - {length_m: 1000, grade_pct: 0}
    - {length_m: 20000, grade_pct: 60}`);
  const there = refusal('case.yaml', { 'case.yaml': text });
  expect(there.message).toMatch(
    /^case\.yaml:4:7: track\.profile\.1: the grades lead to no elevation of a road at km 16\.\d\d \(found 90\d\d m; allowed: -500 to 9000 m\)$/,
  );
  // Driven back from up there, the start is the first place outside.
  const back = refusal('case.yaml', { 'case.yaml': text }, ['track.direction=back']);
  expect(back.message).toMatch(/^case\.yaml:4:7: track\.profile\.1: .* at km 0\.00 \(found 12000 m/);
});

test('a track whose grades climb out of the range of elevations is refused in its file', () => {
  const rows = Array.from({ length: 201 }, (_, i) => `${100 * i},55`).join('\n');
  expect(refusal('steep.csv', { 'steep.csv': `distance_m,grade_pct\n${rows}\n` }).message).toMatch(
    /^steep\.csv: track: the grades lead to no elevation of a road at km 16\.\d\d \(found 90\d\d m; allowed: -500 to 9000 m\)$/,
  );
});

test('a road of too many knots is refused at once, at the grid', () => {
  const pieces = Array.from({ length: 20 }, () => '{length_m: 1000000, grade_pct: 0}').join(', ');
  const text = `road: {grid_m: 0.5}\n${CASE_OF_PROFILE(`{profile: [${pieces}]}`)}`;
  expect(refusal('case.yaml', { 'case.yaml': text }).message).toMatch(
    /^case\.yaml:1:16: road\.grid_m: the road of 20000\.0 km would have too many knots \(found about 400000\d\d knots; allowed: at most 2000000 knots/,
  );
  const byTime = text.replaceAll('length_m: 1000000', 'for_s: 60000');
  expect(refusal('case.yaml', { 'case.yaml': byTime }).code).toBe('road-too-fine');
  // A thousand kilometres at half a metre is just too much there and back.
  const long = Array.from({ length: 1001 }, (_, i) => `${1000 * i},${i % 7}`).join('\n');
  const track = { 'long.csv': `distance_m,elevation_m\n${long}\n` };
  const fine = refusal('long.csv', track, ['road.grid_m=0.5', 'track.direction=both']);
  expect(fine.message).toMatch(/^--set road\.grid_m=0\.5: road\.grid_m: .*found about 4000002 knots/);
});

test('a mask or a shelter that begins beyond the end of the track is refused at its key', () => {
  const text = `road: {masks: [{from_km: 1.9, to_km: 5}, {from_km: 20, to_km: 21}], shelter: [{from_km: 2, to_km: 3, factor: 0.5}]}
${CASE_OF_PROFILE('{file: slope.csv, trim_ends_m: 50}')}`;
  const { problems, message } = refusal('case.yaml', { 'case.yaml': text, 'slope.csv': TRACK });
  expect(problems.map(({ code, place }) => [code, place.line, place.key])).toEqual([
    ['beyond-the-road', 1, 'road.masks.1.from_km'],
    ['beyond-the-road', 1, 'road.shelter.0.from_km'],
  ]);
  expect(message).toContain(
    'begin beyond the end of the track (found 20 km; allowed: less than 2 km, the length of the track)',
  );
  const written = `road: {shelter: [{from_km: 1.5, to_km: 3, factor: 0.5}]}
${CASE_OF_PROFILE('{profile: [{length_m: 1000, grade_pct: 0}], direction: both}')}`;
  expect(refusal('case.yaml', { 'case.yaml': written }).message).toMatch(
    /less than 1 km, the length of the track/,
  );
});
