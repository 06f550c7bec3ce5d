import { expect, test } from 'vitest';
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
