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
 * A flat map about the middle of a line: an equirectangular projection, true to scale on the ellipsoid along the middle
 * latitude. Over a route of 100 km the scale at its northern and southern ends is about 1 % off: for pictures and
 * tolerances, never for distances or headings (see legBetween).
 *
 * @param latitudeDeg of the line, at least one point [degree]
 * @param longitudeDeg of the same points [degree], also over the antimeridian
 * @returns lays any line on that map, in metres from the middle of the first one's bounding box
 */
export function flatMapOf(
  latitudeDeg: Float64Array,
  longitudeDeg: Float64Array,
): (latitudeDeg: Float64Array, longitudeDeg: Float64Array) => PlanLine {
  const [west, east] = rangeOf(unwindLongitudes(longitudeDeg));
  const [south, north] = rangeOf(latitudeDeg);
  const [lat, lon] = [(south + north) / 2, (west + east) / 2];
  // Metres for a degree, from a leg about the middle; beyond 85 degrees there are no roads, but still finite numbers.
  const side = 0.005;
  const toNorth = legBetween(Math.max(lat - side, -90), 0, Math.min(lat + side, 90), 0).north / (2 * side);
  const toEast =
    Math.abs(lat) < 85 ? legBetween(lat, 0, lat, 2 * side).east / (2 * side) : toNorth * cos(fromDeg(lat));
  return (latitudes, longitudes) => {
    const unwound = unwindLongitudes(longitudes);
    // The turn that begins nearest to the middle of the map.
    const turn = unwound.length === 0 ? 0 : 360 * Math.round((unwound[0]! - lon) / 360);
    return {
      x: unwound.map((longitude) => (longitude - turn - lon) * toEast),
      y: latitudes.map((latitude) => (latitude - lat) * toNorth),
    };
  };
}

/** Lays a line of at least one point [degree] on its own flat map: see flatMapOf. */
export const planLine = (latitudeDeg: Float64Array, longitudeDeg: Float64Array): PlanLine =>
  flatMapOf(latitudeDeg, longitudeDeg)(latitudeDeg, longitudeDeg);

/** Points that are thinned at a time: the method goes down by recursion, in the worst case as deep as the line is long. */
const BLOCK = 1024;

/**
 * Thins a road for outputs by Ramer, Douglas and Peucker's method: in plan, on a flat map in metres, and in height over
 * the way; what either keeps stays. The method is turf's, which uses arithmetic alone, so that the result is the same on
 * every engine. No point that is left out lies farther than the tolerance from the line that remains in plan, or
 * farther than that from its height.
 *
 * @param line any number of points: latitude and longitude [degree], way along the line and elevation [m]
 * @param tolerance [m], 0 or more; 0 leaves out only points exactly on the line
 * @returns indices of the points that stay, ascending; the first and the last are always among them
 */
export function simplifyLine(
  line: {
    readonly latitudeDeg: Float64Array;
    readonly longitudeDeg: Float64Array;
    readonly distance: Float64Array;
    readonly elevation: Float64Array;
  },
  tolerance: number,
): Int32Array {
  const size = line.latitudeDeg.length;
  if (size <= 2) return Int32Array.from({ length: size }, (_, i) => i);
  const { x, y } = planLine(line.latitudeDeg, line.longitudeDeg);
  const keep = new Uint8Array(size);
  // A point that only one of the two keeps moves the other's line by up to its tolerance: half of it to each.
  thin(keep, x, y, tolerance / 2);
  thin(keep, line.distance, line.elevation, tolerance / 2);
  return Int32Array.from(keep.keys()).filter((i) => keep[i] === 1);
}

/** Marks the points of a flat line that stay, both ends of each block among them. */
function thin(keep: Uint8Array, x: Float64Array, y: Float64Array, tolerance: number): void {
  for (let from = 0; from < x.length - 1; from += BLOCK) {
    const to = Math.min(from + BLOCK, x.length - 1);
    // The third coordinate is carried along untouched, and brings the index back.
    const block = Array.from({ length: to - from + 1 }, (_, k) => [x[from + k]!, y[from + k]!, from + k]);
    const thinned = simplify(lineString(block), { tolerance, highQuality: true, mutate: true });
    for (const position of thinned.geometry.coordinates) keep[position[2]!] = 1;
    // Where many points are one place, turf keeps any of them; the ends must be the ends.
    keep[from] = keep[to] = 1;
  }
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
