import { readdirSync, readFileSync } from 'node:fs';
import geodesic from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import { readTrack } from '../../src/track/read-track.ts';
import type { RepairKind, Track } from '../../src/track/track.ts';
import { expectClose } from '../compare.ts';

const folder = new URL('../broken/repaired-tracks/', import.meta.url);
const read = (file: string): Track => readTrack({ name: file, bytes: readFileSync(new URL(file, folder)) });

// Most files go north from 51.9 N in steps of 0.0009 degree: by Karney's solver (npm geographiclib-geodesic, MIT).
const STEP = geodesic.Geodesic.WGS84.Inverse(51.9, -14.5, 51.9009, -14.5).s12!;

// file, points left, kind, points touched, line, from and to in steps, words
type Row = readonly [string, number, RepairKind, number, number, number, number, string];
const table: readonly Row[] = [
  ['doubled-points.gpx', 4, 'doubled_point', 2, 6, 1, 1, '2 points without movement'],
  ['standing-still.gpx', 4, 'doubled_point', 8, 6, 1, 1, '40 s at rest'],
  ['missing-elevations.gpx', 8, 'missing_elevation', 2, 7, 2, 8 / 3, 'elevation is missing at 2 points'],
  ['unknown-elevation.gpx', 8, 'missing_elevation', 1, 7, 3, 3, 'elevation is impossible (-32768)'],
  [
    'elevation-starts-late.gpx',
    6,
    'missing_elevation',
    2,
    4,
    0,
    0,
    '2 points without elevation at the start',
  ],
  ['position-jump.gpx', 19, 'position_jump', 1, 14, 0.9, 0.9, 'a single position 2065 m off the line'],
  ['three-positions-off.gpx', 17, 'position_jump', 3, 13, 0.8, 0.8, '3 positions 688 m off the line'],
  ['null-island-first.gpx', 9, 'position_jump', 1, 4, 0, 0, 'a single position 5912173 m off the line'],
  ['jump-by-time.gpx', 9, 'position_jump', 1, 9, 4, 4, 'a single position 695 m off the line'],
  ['clock-back.gpx', 8, 'reversal', 2, 9, 4, 4, 'time ran 10.0 s backwards'],
  ['clock-ahead.gpx', 9, 'reversal', 1, 9, 4, 4, '1 point left out'],
  ['half-a-clock.gpx', 10, 'non_finite', 1, 8, 4, 4, 'the times of the file are not used'],
  ['gap.gpx', 8, 'gap', 0, 7, 3, 12, 'no points for 901 m'],
  ['dropout.gpx', 10, 'gap', 0, 8, 2, 6.63, 'no points for 464 m'],
  ['too-fast.gpx', 9, 'gap', 0, 8, 4, 7, '300 m in 1082 km/h'],
  ['segments.gpx', 9, 'segment_joined', 0, 8, 4, 5, 'straight line of 100 m'],
  ['nan-elevation.gpx', 8, 'non_finite', 1, 7, 3, 3, 'elevation is no finite number'],
];

describe('a repair', () => {
  it.each(table)('is made, counted and placed: %s', (file, size, kind, points, line, from, to, words) => {
    const track = read(file);
    expect(track.size).toBe(size);
    expect(track.repairs).toHaveLength(1);
    const repair = track.repairs[0]!;
    expect([repair.kind, repair.points, repair.line]).toEqual([kind, points, line]);
    expectClose([repair.from, repair.to], [from * STEP, to * STEP], 0.05, 'place');
    expect(repair.message).toContain(words);
    expect(repair.message).toMatch(
      new RegExp(`^(At|From) km [\\d.]+( to km [\\d.]+)? \\(line ${line}\\): .*[^.]\\.$`),
    );
    for (const column of [track.distance, track.elevation!, track.time ?? track.distance]) {
      expect(column).toHaveLength(size);
      expect(column.every(Number.isFinite)).toBe(true);
    }
    for (let i = 1; i < size; i++) expect(track.distance[i]! > track.distance[i - 1]!).toBe(true);
  });

  it.each([
    ['distance-back.csv', 'reversal', 1, 4, [0, 100, 190, 195, 300, 400]],
    ['distance-ahead.csv', 'reversal', 1, 4, [0, 100, 200, 300, 400]],
  ] as const)(
    'of the distance column leaves the fewest points out: %s',
    (file, kind, points, line, distance) => {
      const track = read(file);
      expectClose(track.distance, distance, 0);
      expect(track.repairs).toEqual([expect.objectContaining({ kind, points, line })]);
    },
  );

  it('leaves out a row whose place is no number', () => {
    const track = read('nan-place.csv');
    expect(track.size).toBe(29);
    expect(track.repairs).toEqual([expect.objectContaining({ kind: 'non_finite', points: 1, line: 9 })]);
  });

  it('fills holes linearly over distance', () => {
    // Every file's true elevation is 100 + 10 a step; the short one steps by two thirds.
    for (const file of ['missing-elevations.gpx', 'unknown-elevation.gpx', 'nan-elevation.gpx']) {
      expectClose(read(file).elevation!, [100, 110, 120, 130, 140, 150, 160, 170], 1e-3, file);
    }
  });

  it('fills the other columns too, a heading the short way round, an end with its neighbour', () => {
    const track = read('holes.csv');
    expectClose(track.grade!, [0, 0.01, 0.02, 0.03, 0.04, 0.05], 1e-12, 'grade');
    const degrees = [340, 350, 0, 10, 20, 30].map((deg) => (deg * Math.PI) / 180);
    expectClose(track.heading!, degrees, 1e-12, 'heading');
    expectClose(track.headwind!, [0, -1, -2, -3, -4, -5], 1e-12, 'headwind');
    expectClose(track.speed!, [10, 20, 30, 40, 50, 50], 1e-9, 'speed');
    expect(track.repairs.map((r) => r.line)).toEqual([3, 4, 5, 7]);
  });

  it('leaves the times of a file relative to its first kept point', () => {
    expectClose(read('jump-by-time.gpx').time!, [0, 5, 10, 15, 20, 30, 35, 40, 45], 1e-9);
    expect(read('half-a-clock.gpx').time).toBeNull();
  });

  it('is shown by a file, each of them named here', () => {
    const named = [...table.map((row) => row[0]), 'distance-back.csv', 'distance-ahead.csv'];
    expect([...named, 'nan-place.csv', 'holes.csv'].sort()).toEqual(readdirSync(folder).sort());
  });
});

describe('no repair', () => {
  const bytes = (text: string): Uint8Array => new TextEncoder().encode(text);
  const point = (lat: number, lon: number): string => `<trkpt lat="${lat}" lon="${lon}"><ele>5</ele></trkpt>`;
  const gpx = (points: readonly string[]): Uint8Array =>
    bytes(`<gpx version="1.1"><trk><trkseg>${points.join('')}</trkseg></trk></gpx>`);

  it('is made on a sparse route with a dead end and back', () => {
    // Legs of about 330 m; the fourth point is the end of a side road.
    const points = [
      [51, 0],
      [51.003, 0],
      [51.006, 0],
      [51.006, 0.005],
      [51.00601, 0.0001],
      [51.009, 0],
      [51.012, 0],
    ];
    const track = readTrack({ name: 'a.gpx', bytes: gpx(points.map(([lat, lon]) => point(lat!, lon!))) });
    expect([track.size, track.repairs]).toEqual([7, []]);
  });

  it('is made on a sparse table of distances', () => {
    const track = readTrack({
      name: 'a.csv',
      bytes: bytes('distance_m,elevation_m\n0,0\n5000,50\n11000,50\n16000,0'),
    });
    expect([track.size, track.distance.at(-1), track.repairs]).toEqual([4, 16000, []]);
  });

  it('is made on a dense hairpin', () => {
    const up = Array.from({ length: 50 }, (_, i) => point(51 + i * 1e-4, 0));
    const down = Array.from({ length: 50 }, (_, i) => point(51 + (49 - i) * 1e-4, 0.0002));
    const track = readTrack({ name: 'a.gpx', bytes: gpx([...up, ...down]) });
    expect([track.size, track.repairs]).toEqual([100, []]);
  });
});
