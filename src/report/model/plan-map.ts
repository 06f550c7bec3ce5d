import { cos } from '../../numeric/elementary.ts';
import type { Road } from '../../road/road.ts';
import { WGS84_EQUATORIAL_RADIUS, WGS84_FLATTENING } from '../../units/constants.ts';
import { fromDeg } from '../../units/convert.ts';

/** The route in plan: metres east and north of its first known point, knot by knot. */
export interface PlanMap {
  readonly east: Float64Array;
  readonly north: Float64Array;
}

/**
 * Equirectangular projection about the middle of the route, with the ellipsoid's two radii of curvature there: true to
 * scale along both axes at the middle, and within 1 % for routes that span less than 2 degrees of latitude below 60 degrees.
 * Null where the positions are unknown. Longitudes are taken the short way round, so a route may cross the date line.
 */
export function planMap(road: Road): PlanMap | null {
  const { latitudeDeg, longitudeDeg, size } = road;
  if (latitudeDeg === null || longitudeDeg === null || size === 0) return null;
  let [low, high] = [latitudeDeg[0]!, latitudeDeg[0]!];
  for (let i = 0; i < size; i++) {
    low = Math.min(low, latitudeDeg[i]!);
    high = Math.max(high, latitudeDeg[i]!);
  }
  const middle = fromDeg((low + high) / 2);
  const c = cos(middle);
  const e2 = WGS84_FLATTENING * (2 - WGS84_FLATTENING);
  const w2 = 1 - e2 * (1 - c * c);
  const normal = WGS84_EQUATORIAL_RADIUS / Math.sqrt(w2);
  const meridian = (normal * (1 - e2)) / w2;
  const east = new Float64Array(size);
  const north = new Float64Array(size);
  for (let i = 0; i < size; i++) {
    const turn = longitudeDeg[i]! - longitudeDeg[0]!;
    const short = turn > 180 ? turn - 360 : turn < -180 ? turn + 360 : turn;
    east[i] = fromDeg(short) * normal * c;
    north[i] = fromDeg(latitudeDeg[i]! - latitudeDeg[0]!) * meridian;
  }
  return { east, north };
}
