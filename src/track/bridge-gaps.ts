import { InputError } from '../problems/input-error.ts';
import { impliedSpeed, tooFast } from './leave-out-jumps.ts';
import { GAP, LONGEST_GAP, USUAL_LEGS } from './limits.ts';
import { placeOfPoint } from './place-of-point.ts';
import type { RawTrack } from './raw-track.ts';
import type { RepairLog } from './repair-log.ts';

/**
 * Measures the way along the kept points, and notes what it bridges: the joins of segments, legs longer than 100 m and
 * than five usual ones, and legs that imply more than 70 m/s. Where the file gives distances, a table may be as sparse
 * as it likes, as long as it is so evenly.
 *
 * @param kept raw indices
 * @param leg see legLength
 * @returns distance of each kept point from the first [m], strictly increasing
 * @throws InputError `track-gap` for a leg longer than 3 km; in a table, only where it is longer than five usual legs too
 */
export function bridgeGaps(
  raw: RawTrack,
  kept: Int32Array,
  leg: (from: number, to: number) => number,
  log: RepairLog,
): Float64Array {
  const distance = new Float64Array(kept.length);
  const usual = USUAL_LEGS * medianLeg(kept, leg);
  const longest = raw.distance === null ? LONGEST_GAP : Math.max(LONGEST_GAP, usual);
  for (let k = 1; k < kept.length; k++) {
    const [a, b] = [kept[k - 1]!, kept[k]!];
    const length = leg(a, b);
    // Sums are taken of the file's own column where it has one, so that no rounding grows along the way.
    distance[k] =
      raw.distance === null ? distance[k - 1]! + length : raw.distance[b]! - raw.distance[kept[0]!]!;
    const metres = `${length.toFixed(0)} m`;
    if (length > longest)
      throw new InputError({
        code: 'track-gap',
        place: placeOfPoint(raw, b),
        message: 'the track has a long stretch without points before this one',
        found: metres,
        allowed: `up to ${longest.toFixed(0)} m`,
      });
    if (raw.segment[a] !== raw.segment[b])
      log.add('segment_joined', a, b, 0, `two segments of the file joined by a straight line of ${metres}`);
    if (length > Math.max(GAP, usual))
      log.add('gap', a, b, 0, `no points for ${metres}; bridged by a straight line`);
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

/** The lower one of the middle two of an even number: of two legs, the shorter is the usual one. */
function medianLeg(kept: Int32Array, leg: (from: number, to: number) => number): number {
  const legs = Float64Array.from({ length: kept.length - 1 }, (_, k) => leg(kept[k]!, kept[k + 1]!)).sort();
  return legs[(legs.length - 1) >> 1]!;
}
