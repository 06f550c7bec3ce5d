import type { FullSeries, LoopResult } from '../loop/result.ts';
import type { Figure, Hill, Replayed } from './findings.ts';
import { type HillEvents, hillEvents } from './hill-events.ts';
import { type SeriesContext, seriesOver } from './hill-series.ts';
import { marksBin } from './hill-stretches.ts';
import type { HoldCourse } from './hold-course.ts';
import { recoveryOf } from './recovery.ts';
import { sampleAt } from './series-measures.ts';

/** Kept before the hill [s at the set speed]. */
const LEAD = 10;
const LOCKED: Figure = { none: 'a locked throttle does not regulate' };

export interface PassageContext extends SeriesContext {
  /** Half-width of the band that is left [m/s]. */
  readonly band: number;
}

/** A candidate over a hill, sample for sample as in its run. */
export interface HillPassage {
  /** From a little before the hill. */
  readonly series: FullSeries;
  /** Samples [first, last) are on what the hill is answerable for. */
  readonly first: number;
  readonly last: number;
  readonly events: HillEvents;
  readonly recovery: { readonly time: Figure; readonly over: number };
}

export type HillPlace = Pick<Hill, 'from' | 'to' | 'until'>;

/** Replays a candidate over a hill that it got to, from the nearest checkpoint of its run. */
export function hillPassage(replayed: Replayed, hill: HillPlace, context: PassageContext): HillPassage {
  const { band, course } = context;
  const locked = replayed.plan.controller.kind === 'locked';
  const regulates = !locked && marksHill(replayed.result, hill, course, band);
  const { series, whole } = seriesOver(replayed, hill, context, { lead: LEAD, recovers: regulates });
  const first = Math.min(sampleAt(series, hill.from), series.size - 1);
  const last = Math.min(Math.max(first + 1, sampleAt(series, hill.until)), series.size);
  const events = hillEvents(replayed.plan, series, first, last, course.settling, band);
  const recovery =
    events.affected && regulates
      ? recoveryOf(series, first, last, {
          ...context,
          settling: course.settling,
          gaveUp: course.gaveUp,
          whole,
        })
      : { time: locked ? LOCKED : 0, over: last };
  return { series, first, last, events, recovery };
}

/** By its record, the candidate left its band or sat on a limit on the hill or in a bin that reaches into it. */
export function marksHill({ bins }: LoopResult, hill: HillPlace, course: HoldCourse, band: number): boolean {
  const width = bins.edge[1] - bins.edge[0];
  for (let i = Math.floor(hill.from / width); i < bins.size && bins.edge[i] < hill.until; i++)
    if (marksBin(bins, i, band, course.settling)) return true;
  return false;
}
