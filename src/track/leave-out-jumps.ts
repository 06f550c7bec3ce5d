import { toKmh } from '../units/convert.ts';
import { CLOCK_RESOLUTION, FASTEST, JUMP_LEG, JUMP_RATIO, LONGEST_GAP } from './limits.ts';
import type { RawTrack } from './raw-track.ts';
import type { RepairLog } from './repair-log.ts';

/** Legs on either side of a suspect that say how long legs are hereabouts. */
const AROUND = 5;

/**
 * Leaves out single positions far off the line. With times: both legs of the point imply more than 70 m/s and the
 * leg past it does not. Without: both its legs are longer than 100 m and ten times the legs around, and the leg past
 * it is less than half of them, so that a sparse route or a hairpin keeps its points. A first or last point more than
 * 3 km away from a track of much shorter legs is left out too.
 *
 * @param kept raw indices to look at
 * @param leg see legLength
 * @returns raw indices that stay
 */
export function leaveOutJumps(
  raw: RawTrack,
  kept: Int32Array,
  leg: (from: number, to: number) => number,
  log: RepairLog,
): Int32Array {
  if (raw.distance !== null || kept.length < 4) return kept;
  const n = kept.length;
  const legs = new Float64Array(n - 1);
  for (let k = 1; k < n; k++) legs[k - 1] = leg(kept[k - 1]!, kept[k]!);
  const stay: number[] = [];
  for (let k = 0; k < n; k++) {
    const i = kept[k]!;
    const off = k === 0 || k === n - 1 ? endIsOff(legs, k) : isOff(k);
    if (off === null) {
      stay.push(i);
      continue;
    }
    log.add('position_jump', i, i, 1, `a single position ${off.toFixed(0)} m off the line left out`);
  }
  return Int32Array.from(stay);

  /** How far the point lies off [m]; null: it belongs to the line. */
  function isOff(k: number): number | null {
    const [before, after] = [legs[k - 1]!, legs[k]!];
    // Two jumps never stand side by side here: the second is judged from the first, which is itself off.
    if (before <= JUMP_LEG || after <= JUMP_LEG) return null;
    const [a, i, b] = [kept[k - 1]!, kept[k]!, kept[k + 1]!];
    const past = leg(a, b);
    const off = Math.max(before, after);
    if (tooFast(raw, before, a, i) && tooFast(raw, after, i, b) && !tooFast(raw, past, a, b)) return off;
    const usual = JUMP_RATIO * medianAround(legs, k - 1, k);
    return before > usual && after > usual && past < off / 2 ? off : null;
  }
}

/** Whether a leg implies a speed that no road vehicle has; false where there are no times. */
export function tooFast(raw: RawTrack, length: number, from: number, to: number): boolean {
  if (raw.time === null) return false;
  return length > FASTEST * (raw.time[to]! - raw.time[from]! + CLOCK_RESOLUTION);
}

/** `250 km/h` */
export function impliedSpeed(raw: RawTrack, length: number, from: number, to: number): string {
  const interval = raw.time === null ? 0 : raw.time[to]! - raw.time[from]!;
  return interval > 0 ? `${toKmh(length / interval).toFixed(0)} km/h` : 'no time at all';
}

function endIsOff(legs: Float64Array, k: number): number | null {
  const end = k === 0 ? 0 : legs.length - 1;
  const length = legs[end]!;
  return length > LONGEST_GAP && length > JUMP_RATIO * medianAround(legs, end, end) ? length : null;
}

/** Median of up to five legs on either side of the legs `first` to `last`. */
function medianAround(legs: Float64Array, first: number, last: number): number {
  const around = [
    ...legs.subarray(Math.max(0, first - AROUND), first),
    ...legs.subarray(last + 1, last + 1 + AROUND),
  ].sort((a, b) => a - b);
  return around.length === 0 ? Number.POSITIVE_INFINITY : around[around.length >> 1]!;
}
