import { InputError } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import { HIGHEST_ELEVATION, LOWEST_ELEVATION } from '../track/limits.ts';
import { toKm } from '../units/convert.ts';

/**
 * Most knots of a road: its tables take about 250 MB, and their CSV text half of what a string can hold. At the finest
 * grid of 0.5 m it is 1,000 km, at the usual 10 m it is 20,000 km.
 */
const MOST_KNOTS = 2_000_000;

/**
 * Refuses a road of too many knots before any is made.
 *
 * @param knots about how many there would be, way back included
 * @param length horizontal, of the whole drive [m]
 * @throws InputError `road-too-fine`
 */
export function checkKnots(knots: number, length: number): void {
  if (knots <= MOST_KNOTS) return;
  throw new InputError({
    code: 'road-too-fine',
    place: { key: 'road.grid_m' },
    message: `the road of ${toKm(length).toFixed(1)} km would have too many knots`,
    found: `about ${knots.toFixed(0)} knots`,
    allowed: `at most ${MOST_KNOTS} knots: a shorter road, or a coarser grid`,
  });
}

/**
 * Refuses a road that leaves the range of elevations that roads have, where grades add up to more than there is: the air
 * up there would not be any air.
 *
 * @param distance horizontal [m]
 * @param elevation of the same knots [m]
 * @param placeOf what made the road at a knot
 * @throws InputError `elevation-out-of-range`, at the first knot outside
 */
export function checkElevation(
  distance: Float64Array,
  elevation: Float64Array,
  placeOf: (knot: number) => Place,
): void {
  const out = elevation.findIndex((z) => !(z >= LOWEST_ELEVATION && z <= HIGHEST_ELEVATION));
  if (out < 0) return;
  throw new InputError({
    code: 'elevation-out-of-range',
    place: placeOf(out),
    message: `the grades lead to no elevation of a road at km ${toKm(distance[out]!).toFixed(2)}`,
    found: `${elevation[out]!.toFixed(0)} m`,
    allowed: `${LOWEST_ELEVATION} to ${HIGHEST_ELEVATION} m`,
  });
}
