import { nearestCheckpoint, replay } from '../loop/replay.ts';
import type { BinRecord, FullSeries } from '../loop/result.ts';
import { type SpeedTrace, traceSpeeds } from '../loop/trace-speeds.ts';
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

/** A piece of a run behind and around a hill, horizontal distances [m]. */
interface Reach {
  readonly from: number;
  readonly to: number;
  /** It goes as far as a recovery is waited for. */
  readonly whole: boolean;
}

/**
 * Every sample of a run from `lead` [s at the set speed] before a hill until it is recovered from, or only a little
 * behind it, by replay from the nearest checkpoint; the record by bins tells how far the recovery is.
 *
 * @returns the series, and whether it goes as far as a recovery is waited for where it has none
 */
export function seriesOver(
  replayed: Replayed,
  hill: HillPlace,
  context: SeriesContext,
  { lead, recovers }: { readonly lead: number; readonly recovers: boolean },
): { readonly series: FullSeries; readonly whole: boolean } {
  const { plan, result } = replayed;
  const { from, to, whole } = reachOver(replayed, hill, context, lead, recovers);
  return { series: replay(plan, nearestCheckpoint(result, from), to, from).series, whole };
}

/** The speeds from the hill's beginning until it is recovered from, and nothing else. */
export function speedsOver(
  replayed: Replayed,
  hill: HillPlace,
  context: SeriesContext,
): { readonly series: SpeedTrace; readonly whole: boolean } {
  const { plan, result } = replayed;
  const { from, to, whole } = reachOver(replayed, hill, context, 0, true);
  return { series: traceSpeeds(plan, nearestCheckpoint(result, from), to, from), whole };
}

type HillPlace = Pick<Hill, 'from' | 'to' | 'until'>;

function reachOver(
  { plan, result }: Replayed,
  hill: HillPlace,
  context: SeriesContext,
  lead: number,
  recovers: boolean,
): Reach {
  const setSpeed = context.demand.setSpeed[cellOf(plan.road.distance, hill.to)];
  const from = Math.max(0, hill.from - lead * setSpeed);
  const tail = TAIL * setSpeed;
  const farthest = hill.until + FAR * setSpeed;
  const to = recovers
    ? Math.min(farthest, recoveredAt(result.bins, hill.until, context) + tail)
    : hill.until + tail;
  return { from, to: Math.min(to, result.endDistance), whole: farthest < result.endDistance };
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
