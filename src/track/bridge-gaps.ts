import { InputError } from '../problems/input-error.ts';
import { impliedSpeed, tooFast } from './leave-out-jumps.ts';
import { GAP, LONGEST_GAP } from './limits.ts';
import { placeOfPoint } from './place-of-point.ts';
import type { RawTrack } from './raw-track.ts';
import type { RepairLog } from './repair-log.ts';

/**
 * Measures the way along the kept points, and notes what it bridges: the joins of segments, legs longer than 500 m,
 * and legs that imply more than 70 m/s.
 *
 * @param kept raw indices
 * @param leg see legLength
 * @returns distance of each kept point from the first [m], strictly increasing
 * @throws InputError `track-gap` for a leg longer than 3 km
 */
export function bridgeGaps(
  raw: RawTrack,
  kept: Int32Array,
  leg: (from: number, to: number) => number,
  log: RepairLog,
): Float64Array {
  const distance = new Float64Array(kept.length);
  for (let k = 1; k < kept.length; k++) {
    const [a, b] = [kept[k - 1]!, kept[k]!];
    const length = leg(a, b);
    // Sums are taken of the file's own column where it has one, so that no rounding grows along the way.
    distance[k] =
      raw.distance === null ? distance[k - 1]! + length : raw.distance[b]! - raw.distance[kept[0]!]!;
    const metres = `${length.toFixed(0)} m`;
    if (length > LONGEST_GAP)
      throw new InputError({
        code: 'track-gap',
        place: placeOfPoint(raw, b),
        message: 'the track has a long stretch without points before this one',
        found: metres,
        allowed: `up to ${LONGEST_GAP} m`,
      });
    if (raw.segment[a] !== raw.segment[b])
      log.add('segment_joined', a, b, 0, `two segments of the file joined by a straight line of ${metres}`);
    if (length > GAP) log.add('gap', a, b, 0, `no points for ${metres}; bridged by a straight line`);
    else if (tooFast(raw, length, a, b))
      log.add(
        'gap',
        a,
        b,
        0,
        `${metres} in ${impliedSpeed(raw, length, a, b)} between two points; bridged by a straight line`,
      );
  }
  return distance;
}
