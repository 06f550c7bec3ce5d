import { lineString, simplify } from '@turf/turf';
import { cos } from '../numeric/elementary.ts';
import { fromDeg } from '../units/convert.ts';
import { legBetween } from './geodesic.ts';

/** West, south, east, north [degree] (RFC 7946, section 5): west is greater than east where the box spans the antimeridian. */
export type BoundingBox = readonly [west: number, south: number, east: number, north: number];

/** A line on a flat map about its middle. */
export interface PlanLine {
  /** To the east of the middle [m]. */
  readonly x: Float64Array;
  /** To the north of the middle [m]. */
  readonly y: Float64Array;
}

/**
 * The longitudes of a line without the step of 360 degrees at the antimeridian: each within half a turn of the one
 * before, so that they can leave [-180, 180].
 */
export function unwindLongitudes(longitudeDeg: Float64Array): Float64Array {
  const unwound = longitudeDeg.slice();
  for (let i = 1; i < unwound.length; i++)
    unwound[i] = unwound[i]! - 360 * Math.round((unwound[i]! - unwound[i - 1]!) / 360);
  return unwound;
}

/** The smallest box around a line of at least one point, over the antimeridian where the line goes there. */
export function boundingBox(latitudeDeg: Float64Array, longitudeDeg: Float64Array): BoundingBox {
  const [west, east] = rangeOf(unwindLongitudes(longitudeDeg));
  const [south, north] = rangeOf(latitudeDeg);
  return [rewind(west), south, rewind(east), north];
}

/**
 * Lays a line on a flat map: an equirectangular projection, true to scale on the ellipsoid along the middle
 * latitude. Over a route of 100 km the scale at its northern and southern ends is about 1 % off: for pictures and
 * tolerances, never for distances or headings (see legBetween).
 *
 * @param latitudeDeg at least one point [degree]
 * @param longitudeDeg of the same points [degree], also over the antimeridian
 * @returns metres from the middle of the bounding box
 */
export function planLine(latitudeDeg: Float64Array, longitudeDeg: Float64Array): PlanLine {
  const longitudes = unwindLongitudes(longitudeDeg);
  const [west, east] = rangeOf(longitudes);
  const [south, north] = rangeOf(latitudeDeg);
  const [lat, lon] = [(south + north) / 2, (west + east) / 2];
  // Metres for a degree, from a leg about the middle; beyond 85 degrees there are no roads, but still finite numbers.
  const side = 0.005;
  const toNorth = legBetween(Math.max(lat - side, -90), 0, Math.min(lat + side, 90), 0).north / (2 * side);
  const toEast =
    Math.abs(lat) < 85 ? legBetween(lat, 0, lat, 2 * side).east / (2 * side) : toNorth * cos(fromDeg(lat));
  return {
    x: longitudes.map((longitude) => (longitude - lon) * toEast),
    y: latitudeDeg.map((latitude) => (latitude - lat) * toNorth),
  };
}

/**
 * Thins a line for outputs: Ramer, Douglas and Peucker's method (turf's, on a flat map in metres, so that the
 * tolerance is the same in both directions and the result the same on every engine). No point that is left out lies
 * farther than the tolerance from the line that remains.
 *
 * @param latitudeDeg any number of points [degree]
 * @param longitudeDeg of the same points [degree]
 * @param tolerance [m], 0 or more; 0 leaves out only points exactly on the line
 * @returns indices of the points that stay, ascending; the first and the last are always among them
 */
export function simplifyLine(
  latitudeDeg: Float64Array,
  longitudeDeg: Float64Array,
  tolerance: number,
): Int32Array {
  const size = latitudeDeg.length;
  if (size <= 2) return Int32Array.from({ length: size }, (_, i) => i);
  const { x, y } = planLine(latitudeDeg, longitudeDeg);
  // The third coordinate is carried along untouched, and brings the index back.
  const line = lineString(Array.from(x, (_, i) => [x[i]!, y[i]!, i]));
  const thinned = simplify(line, { tolerance, highQuality: true, mutate: true });
  const kept = Int32Array.from(thinned.geometry.coordinates, (position) => position[2]!);
  // Where many points are one place, turf keeps any of them; the ends must be the ends.
  kept[0] = 0;
  kept[kept.length - 1] = size - 1;
  return kept;
}

function rangeOf(values: Float64Array): [least: number, most: number] {
  let [least, most] = [values[0]!, values[0]!];
  for (const value of values) {
    if (value < least) least = value;
    if (value > most) most = value;
  }
  return [least, most];
}

/** Back into [-180, 180], leaving both ends as they are. */
function rewind(longitude: number): number {
  if (longitude >= -180 && longitude <= 180) return longitude;
  return longitude - 360 * Math.floor((longitude + 180) / 360);
}
