import { toKmh } from '../units/convert.ts';
import { CLOCK_RESOLUTION, FASTEST, JUMP_LEG, JUMP_RATIO, LONGEST_GAP, LONGEST_JUMP } from './limits.ts';
import type { RawTrack } from './raw-track.ts';
import type { RepairLog } from './repair-log.ts';

/** Legs on either side of a suspect that say how long legs are hereabouts. */
const AROUND = 5;

/**
 * Leaves out single positions, or up to five in a row, far off the line. With times: the legs to and from them imply
 * more than 70 m/s and the leg past them does not. Without: both legs are longer than 100 m and ten times the legs
 * around, and the leg past them is less than half of that, so that a sparse route or a hairpin keeps its points. A
 * first or last point more than 3 km away from a track of much shorter legs is left out too.
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
  const n = kept.length;
  if (raw.distance !== null || n < 4) return kept;
  const legs = new Float64Array(n - 1);
  for (let k = 1; k < n; k++) legs[k - 1] = leg(kept[k - 1]!, kept[k]!);
  const stay: number[] = [];
  const leaveOut = (k: number, points: number, off: number): void => {
    const what = points === 1 ? 'a single position' : `${points} positions`;
    const message = `${what} ${off.toFixed(0)} m off the line left out`;
    log.add('position_jump', kept[k]!, kept[k + points - 1]!, points, message);
  };
  for (let k = 0; k < n; k++) {
    if ((k === 0 && endIsOff(legs, 0)) || (k === n - 1 && endIsOff(legs, n - 2))) {
      leaveOut(k, 1, legs[Math.min(k, n - 2)]!);
      continue;
    }
    const points = k === 0 ? 0 : pointsOff(raw, kept, legs, leg, k);
    if (points > 0) {
      leaveOut(k, points, legs[k - 1]!);
      k += points;
    }
    // The point after a jump is on the line again, though its own leg is long.
    stay.push(kept[k]!);
  }
  return Int32Array.from(stay);
}

/** How many points from the k-th on lie off the line; 0: it belongs to the line. */
function pointsOff(
  raw: RawTrack,
  kept: Int32Array,
  legs: Float64Array,
  leg: (from: number, to: number) => number,
  k: number,
): number {
  const away = legs[k - 1]!;
  if (away <= JUMP_LEG) return 0;
  for (let points = 1; points <= LONGEST_JUMP && k + points < kept.length; points++) {
    const back = legs[k + points - 1]!;
    if (back <= JUMP_LEG) continue;
    const [a, first, last, b] = [kept[k - 1]!, kept[k]!, kept[k + points - 1]!, kept[k + points]!];
    const past = leg(a, b);
    if (tooFast(raw, away, a, first) && tooFast(raw, back, last, b) && !tooFast(raw, past, a, b))
      return points;
    const usual = JUMP_RATIO * medianAround(legs, k - 1, k + points - 1);
    if (away > usual && back > usual && past < Math.max(away, back) / 2) return points;
  }
  return 0;
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

function endIsOff(legs: Float64Array, end: number): boolean {
  const length = legs[end]!;
  return length > LONGEST_GAP && length > JUMP_RATIO * medianAround(legs, end, end);
}

/** Median of up to five legs on either side of the legs `first` to `last`. */
function medianAround(legs: Float64Array, first: number, last: number): number {
  const around = [
    ...legs.subarray(Math.max(0, first - AROUND), first),
    ...legs.subarray(last + 1, last + 1 + AROUND),
  ].sort((a, b) => a - b);
  return around.length === 0 ? Number.POSITIVE_INFINITY : around[around.length >> 1]!;
}
