import { expect, test } from 'vitest';
import { routeGeoJson } from '../../../src/report/data/route.ts';
import type { Road } from '../../../src/road/road.ts';
import { expectClose } from '../../compare.ts';

/** A road through given positions, 100 m a piece; nothing else of it matters here. */
function roadThrough(positions: readonly (readonly [number, number, number])[] | null, size = 3): Road {
  const count = positions?.length ?? size;
  const zeros = new Float64Array(count);
  const distance = Float64Array.from({ length: count }, (_, i) => 100 * i);
  const column = (k: 0 | 1 | 2) => Float64Array.from(positions ?? [], (position) => position[k]);
  return {
    along: 'distance',
    name: 'test road',
    size: count,
    station: distance,
    distance,
    elevation: positions === null ? zeros : column(2),
    rawElevation: null,
    grade: zeros,
    gradeSd: zeros,
    heading: null,
    curvature: null,
    headwind: zeros,
    crosswind: zeros,
    airDensity: zeros.map(() => 1.2),
    airTemperature: zeros.map(() => 288),
    latitudeDeg: positions === null ? null : column(1),
    longitudeDeg: positions === null ? null : column(0),
    grid: 100,
    smoothing: null,
    masks: [],
    repairs: [],
    warnings: [],
    turnsAt: null,
    points: null,
  };
}

interface Geometry {
  readonly type: string;
  readonly coordinates: never;
}

interface Collection {
  readonly type: string;
  readonly bbox?: readonly number[];
  readonly features: readonly {
    readonly type: string;
    readonly geometry: Geometry | null;
    readonly properties: Readonly<Record<string, unknown>>;
  }[];
}
const routeOf = (road: Road): Collection => JSON.parse(routeGeoJson(road, []));

test('a route is a line of longitude, latitude and elevation with its figures', () => {
  const { type, features } = routeOf(
    roadThrough([
      [-1.5, 50, 10],
      [-1.4986, 50, 30],
      [-1.4972, 50.002, 25],
    ]),
  );
  expect(type).toBe('FeatureCollection');
  expect(features[0]).toMatchObject({
    type: 'Feature',
    geometry: {
      type: 'LineString',
      coordinates: [
        [-1.5, 50, 10],
        [-1.4986, 50, 30],
        [-1.4972, 50.002, 25],
      ],
    },
    properties: { name: 'test road', length_m: 200, climb_m: 20, descent_m: 5 },
  });
});

test('a road without positions is a feature without a geometry', () => {
  expect(routeOf(roadThrough(null)).features[0]?.geometry).toBeNull();
});

test('a line over the antimeridian is cut there, both parts ending on it', () => {
  for (const beyond of [-179.999, 180.001]) {
    const { features } = routeOf(
      roadThrough([
        [179.999, 10, 0],
        [beyond, 10, 8],
      ]),
    );
    expect(features[0]?.geometry).toEqual({
      type: 'MultiLineString',
      coordinates: [
        [
          [179.999, 10, 0],
          [180, 10, 4],
        ],
        [
          [-180, 10, 4],
          [-179.999, 10, 8],
        ],
      ],
    });
  }
});

test('a line that begins, ends or bends on the antimeridian has no lone point beyond it', () => {
  // -180 and 180 are one meridian; a road has -180.
  const geometry = (longitudes: readonly number[]): Geometry | null | undefined =>
    routeOf(roadThrough(longitudes.map((lon, i) => [lon, 10 + 0.1 * i, 0] as const))).features[0]?.geometry;
  expect(geometry([179.99, -180])).toEqual({
    type: 'LineString',
    coordinates: [
      [179.99, 10, 0],
      [180, 10.1, 0],
    ],
  });
  expect(geometry([-180, 179.99])).toEqual({
    type: 'LineString',
    coordinates: [
      [180, 10, 0],
      [179.99, 10.1, 0],
    ],
  });
  const longitudes = (line: readonly number[]): number[][] =>
    ((geometry(line)?.coordinates ?? []) as number[][][]).map((part) => part.map((place) => place[0]!));
  expect(longitudes([179.99, -180, 179.98])).toEqual([
    [179.99, 180],
    [180, 179.98],
  ]);
  expect(longitudes([179.99, -180, -179.98])).toEqual([
    [179.99, 180],
    [-180, -179.98],
  ]);
});

test('the bounding box is west, south, lowest, east, north, highest, also over the antimeridian', () => {
  const box = routeOf(
    roadThrough([
      [-1.5, 50, 10],
      [-1.4986, 50, 30],
      [-1.4972, 50.002, 25],
    ]),
  ).bbox;
  expect(box).toEqual([-1.5, 50, 10, -1.4972, 50.002, 30]);
  // RFC 7946, section 5.2: the box of the Fiji islands is [177, -20, -178, -16].
  const fiji = routeOf(
    roadThrough([
      [177, -20, 0],
      [179.5, -18, 90],
      [-178, -16, 5],
    ]),
  ).bbox;
  expect(fiji).toEqual([177, -20, 0, -178, -16, 90]);
  expect(routeOf(roadThrough(null))).not.toHaveProperty('bbox');
});

test('a way out and back keeps its turn, and a straight its ends', () => {
  const out = [0, 1, 2, 3].map((i) => [0.001 * i, 45, 0] as const);
  const both = [...out, ...out.slice(0, -1).reverse()];
  const line = (road: Road) => (routeOf(road).features[0]?.geometry?.coordinates ?? []) as number[][];
  expect(line(roadThrough(out)).length).toBe(2);
  const turned = line(roadThrough(both));
  expect(turned.length).toBe(3);
  expectClose(turned[1]![0]!, 0.003, 1e-9, 'turn [deg]');
});
