import { nearestCheckpoint, replay } from '../loop/replay.ts';
import type { BinRecord, FullSeries } from '../loop/result.ts';
import { cellOf, intervalOf } from '../numeric/interpolate.ts';
import type { Demand, Hill, Replayed, Stretch } from './findings.ts';
import type { HoldCourse } from './hold-course.ts';
import { RECOVERED_FOR } from './recovery.ts';

/** Kept behind the hill, and behind its recovery [s at the set speed]. */
const TAIL = 5;
/** A recovery is looked for this long behind the hill [s at the set speed]. */
const FAR = 120;
/** Beyond the time that a recovery must last by the samples, so that bins that say so are enough [s]. */
const SPARE = 1;

export interface SeriesContext {
  readonly demand: Demand;
  /** Where the demand leaves the range, in order. */
  readonly outOfRange: readonly Stretch[];
  /** The candidate's own. */
  readonly course: HoldCourse;
  /** Half-width within which a run has recovered [m/s]. */
  readonly recoveryBand: number;
}

/** What part of a run is wanted. */
export interface SeriesWanted {
  /** Seconds at the set speed before the hill. */
  readonly lead: number;
  /** As far as the recovery, or only a little behind the hill. */
  readonly recovers: boolean;
}

/**
 * Every sample of a run from a little before a hill until it is recovered from, by replay from the nearest checkpoint;
 * the record by bins tells how far that is.
 *
 * @returns the series, and whether it goes as far as a recovery is waited for where it has none
 */
export function seriesOver(
  { plan, result }: Replayed,
  hill: Pick<Hill, 'from' | 'to' | 'until'>,
  context: SeriesContext,
  { lead, recovers }: SeriesWanted,
): { readonly series: FullSeries; readonly whole: boolean } {
  const setSpeed = context.demand.setSpeed[cellOf(plan.road.distance, hill.to)];
  const from = Math.max(0, hill.from - lead * setSpeed);
  const tail = TAIL * setSpeed;
  const farthest = hill.until + FAR * setSpeed;
  const to = recovers
    ? Math.min(farthest, recoveredAt(result.bins, hill.until, context) + tail)
    : hill.until + tail;
  const start = nearestCheckpoint(result, from);
  const { series } = replay(plan, start, Math.min(to, result.endDistance), from);
  return { series, whole: farthest < result.endDistance };
}

/** Where bins behind a place have been within the recovery band for long enough, or what comes next ends the waiting [m]. */
function recoveredAt(
  bins: BinRecord,
  place: number,
  { outOfRange, course, recoveryBand }: SeriesContext,
): number {
  let next = Number.POSITIVE_INFINITY;
  for (const stretch of [...outOfRange, ...course.settling])
    if (stretch.to > place) next = Math.min(next, Math.max(stretch.from, place));
  let inside = 0;
  for (let i = intervalOf(bins.edge, place); i < bins.size && bins.edge[i] < next; i++) {
    const within = bins.errorMax[i] <= recoveryBand && -bins.errorMin[i] <= recoveryBand;
    inside = within ? inside + bins.time[i] : 0;
    if (inside >= RECOVERED_FOR + SPARE) return bins.edge[i + 1];
  }
  return next;
}
