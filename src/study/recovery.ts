import type { SpeedTrace } from '../loop/trace-speeds.ts';
import { fromKmh } from '../units/convert.ts';
import type { Figure, Stretch } from './findings.ts';
import { errorAt } from './series-measures.ts';

/** Half-width within which a run counts as recovered, and for how long [m/s], [s]. */
export const RECOVERED_BAND = fromKmh(1);
export const RECOVERED_FOR = 3;

/** Said of a recovery that the record does not contain. */
export const NOT_RECOVERED = 'it was not back within 1 km/h for 3 s in two minutes';
export const GAVE_UP = 'a rule of the unit ended hold before it was back within 1 km/h for 3 s';
export const ROAD_ENDED = 'the run ended before it was back within 1 km/h for 3 s';

/** There was road and time for a recovery, and none came. */
export const isLost = (time: Figure): boolean =>
  typeof time !== 'number' && (time.none === NOT_RECOVERED || time.none === GAVE_UP);

export interface RecoveryRule {
  /** Half-width of the band that is left [m/s]. */
  readonly band: number;
  /** Half-width within which the run has recovered [m/s]. */
  readonly recoveryBand: number;
  /** Where the demand leaves the range, in order. */
  readonly outOfRange: readonly Stretch[];
  /** Where a change of set speed is being followed, in order: nothing is judged there. */
  readonly settling: readonly Stretch[];
  /** Where a rule of the unit ended hold, in order [m]. */
  readonly gaveUp?: readonly number[] | undefined;
  /** The series goes as far as a recovery is waited for. */
  readonly whole: boolean;
}

/**
 * Longest recovery from a hill over samples [first, last): from leaving the band where the demand is in range, or
 * where it comes back into range, to the beginning of 3 s within the recovery band. How long the command stayed at a
 * limit does not matter: a design that stays there longer than the demand does answers for it. The search goes on
 * behind `last` until the run is back. Where the demand leaves the range again first, or the set speed changes, there
 * was no road to be back on, and the time counts up to there; what follows is what comes next's. Where a rule of the
 * unit ends hold while the time is counted, there is no recovery.
 *
 * @returns the time [s], 0 where neither happened, and the sample at which it was over (the end where it was not)
 */
export function recoveryOf(
  series: SpeedTrace,
  first: number,
  last: number,
  rule: RecoveryRule,
): { readonly time: Figure; readonly over: number } {
  const { size, time, distance } = series;
  const isOut = along(rule.outOfRange);
  const isFollowing = along(rule.settling);
  let longest = 0;
  let over = last;
  /** Sample from which is counted, and the first of those within the recovery band up to now; -1: none. */
  let clock = -1;
  let inside = -1;
  let wasOut = false;
  for (let i = first; i < size && (i < last || clock >= 0 || wasOut); i++) {
    const out = isOut(distance[i]);
    if (out || isFollowing(distance[i])) {
      if (clock >= 0 && gaveUpBetween(rule, distance[clock], distance[i]))
        return { time: { none: GAVE_UP }, over: i };
      if (clock >= 0) longest = Math.max(longest, time[i] - time[clock]);
      clock = -1;
      inside = -1;
      wasOut = out && i < last;
      continue;
    }
    const error = Math.abs(errorAt(series, i));
    if (clock < 0 && (wasOut || (i < last && error > rule.band))) clock = i;
    wasOut = false;
    if (error > rule.recoveryBand) inside = -1;
    else if (inside < 0) inside = i;
    if (clock < 0 || inside < 0 || time[i] - time[inside] < RECOVERED_FOR - 1e-9) continue;
    longest = Math.max(longest, time[Math.max(inside, clock)] - time[clock]);
    over = Math.max(over, inside);
    clock = -1;
  }
  if (clock < 0 && !wasOut) return { time: longest, over };
  return { time: { none: rule.whole ? NOT_RECOVERED : ROAD_ENDED }, over: size };
}

const gaveUpBetween = ({ gaveUp = [] }: RecoveryRule, from: number, to: number): boolean =>
  gaveUp.some((place) => place >= from && place <= to);

/** Tells whether a place lies in one of the stretches, asked in order along the way. */
function along(stretches: readonly Stretch[]): (place: number) => boolean {
  let k = 0;
  return (place) => {
    while (k < stretches.length && stretches[k].to <= place) k++;
    return k < stretches.length && stretches[k].from <= place;
  };
}
