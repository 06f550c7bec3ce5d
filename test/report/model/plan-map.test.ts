import geodesic from 'geographiclib-geodesic';
import { expect, it } from 'vitest';
import { planMap } from '../../../src/report/model/plan-map.ts';
import type { Road } from '../../../src/road/road.ts';

const roadAt = (latitude: number[], longitude: number[]): Road =>
  ({
    size: latitude.length,
    latitudeDeg: Float64Array.from(latitude),
    longitudeDeg: Float64Array.from(longitude),
  }) as unknown as Road;

it('the plan keeps lengths to 0.1 % over 20 km (against the WGS 84 geodesic of GeographicLib)', () => {
  for (const [lat, lon] of [
    [52, -1.2],
    [-33.9, 151.1],
    [0.2, 30],
    [61, 179.95],
  ] as const) {
    const there: readonly [number, number] = [lat + 0.1, lon + 0.15];
    const map = planMap(roadAt([lat, there[0]], [lon, there[1] > 180 ? there[1] - 360 : there[1]]))!;
    const length = Math.hypot(map.east[1]! - map.east[0]!, map.north[1]! - map.north[0]!);
    const truth = geodesic.Geodesic.WGS84.Inverse(lat, lon, there[0], there[1]).s12!;
    expect(Math.abs(length / truth - 1)).toBeLessThan(1e-3);
    expect(map.east[1]!).toBeGreaterThan(0);
    expect(map.north[1]!).toBeGreaterThan(0);
  }
});

it('there is no plan without positions', () => {
  expect(planMap({ size: 3, latitudeDeg: null, longitudeDeg: null } as unknown as Road)).toBeNull();
});
