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

interface Collection {
  readonly type: string;
  readonly features: readonly {
    readonly type: string;
    readonly geometry: { readonly type: string; readonly coordinates: never } | null;
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

test('a way out and back keeps its turn, and a straight its ends', () => {
  const out = [0, 1, 2, 3].map((i) => [0.001 * i, 45, 0] as const);
  const both = [...out, ...out.slice(0, -1).reverse()];
  const line = (road: Road) => (routeOf(road).features[0]?.geometry?.coordinates ?? []) as number[][];
  expect(line(roadThrough(out)).length).toBe(2);
  const turned = line(roadThrough(both));
  expect(turned.length).toBe(3);
  expectClose(turned[1]![0]!, 0.003, 1e-9, 'turn [deg]');
});
