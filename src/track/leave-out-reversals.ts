import { InputError } from '../problems/input-error.ts';
import { LONGEST_DISTANCE_REVERSAL, LONGEST_TIME_REVERSAL } from './limits.ts';
import { placeOfPoint } from './place-of-point.ts';
import type { RawTrack } from './raw-track.ts';
import { countPoints, type RepairLog } from './repair-log.ts';

/**
 * Leaves out points at which the distance column or the clock runs backwards for a short way: those below the
 * highest value so far; or the single high one, where its neighbours fit each other without it.
 *
 * @param kept raw indices to look at
 * @returns raw indices that stay
 * @throws InputError `distance-reversal` or `time-reversal` beyond 50 m or 60 s
 */
export function leaveOutReversals(raw: RawTrack, kept: Int32Array, log: RepairLog): Int32Array {
  let stay = kept;
  if (raw.distance !== null)
    stay = forwardOnly(raw, stay, raw.distance, LONGEST_DISTANCE_REVERSAL, 'distance', 'm', log);
  if (raw.time !== null) stay = forwardOnly(raw, stay, raw.time, LONGEST_TIME_REVERSAL, 'time', 's', log);
  return stay;
}

function forwardOnly(
  raw: RawTrack,
  kept: Int32Array,
  values: Float64Array,
  longest: number,
  what: 'distance' | 'time',
  unit: string,
  log: RepairLog,
): Int32Array {
  const stay: number[] = [];
  let highest = Number.NEGATIVE_INFINITY;
  let [first, last, count, back] = [-1, -1, 0, 0];
  const close = (): void => {
    if (count === 0) return;
    log.add(
      'reversal',
      first,
      last,
      count,
      `${what} ran ${back.toFixed(1)} ${unit} backwards; ${countPoints(count)} left out`,
    );
    [count, back] = [0, 0];
  };
  const leaveOut = (i: number, by: number): void => {
    if (count === 0) first = i;
    last = i;
    count++;
    back = Math.max(back, by);
  };
  for (let k = 0; k < kept.length; k++) {
    const i = kept[k]!;
    const value = values[i]!;
    const next = k + 1 < kept.length ? values[kept[k + 1]!]! : value;
    const afterNext = k + 2 < kept.length ? values[kept[k + 2]!]! : next;
    if (value < highest) {
      const by = highest - value;
      if (by > longest)
        throw new InputError({
          code: `${what}-reversal`,
          place: placeOfPoint(raw, i),
          message: `${what} runs backwards`,
          found: `${by.toFixed(1)} ${unit} back`,
          allowed: `up to ${longest} ${unit}`,
        });
      leaveOut(i, by);
    } else if (k > 0 && value > next && next >= highest && afterNext >= next) {
      leaveOut(i, value - next);
    } else {
      close();
      highest = value;
      stay.push(i);
    }
  }
  close();
  return Int32Array.from(stay);
}
