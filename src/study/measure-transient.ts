import type { FullSeries, HoldEvent } from '../loop/result.ts';
import type { Figure } from './findings.ts';
import type { HoldMeasure } from './hold-transient.ts';
import { RECOVERED_BAND, RECOVERED_FOR } from './recovery.ts';
import { errorAt, sampleAt } from './series-measures.ts';

/** Jerk is the change of acceleration over this [s]. */
const JERK_OVER = 0.2;
/** The reference has arrived this near to the set speed [m/s]. */
const ARRIVED = 1e-6;

const HOLD_OFF = 'hold is off';
const BRAKE = "the rider's brake";
const NOT_BACK = 'hold did not come back first';
const NOT_BEYOND = 'it does not go beyond the new set speed';
const NOT_ARRIVED = 'the reference did not arrive at the set speed first';

/** What a window is about. */
export interface TransientWindow {
  readonly candidate: string;
  /** Of the command, as the actuator takes it. */
  readonly range: { readonly least: number; readonly greatest: number };
  /** Of the run, and which of them it is. */
  readonly events: readonly HoldEvent[];
  readonly at: number;
  /** It is followed for so long [s]. */
  readonly longest: number;
  /** Why it has no settling where it had all of that time, and where the series ends before. */
  readonly never: string;
  readonly unsettled: string;
}

export interface MeasuredTransient {
  readonly measure: HoldMeasure;
  /** Sample behind the last that is measured. */
  readonly last: number;
}

/**
 * The figures of a transient.
 *
 * @param series every sample of its window, from before the event to where the next one comes
 */
export function measureTransient(
  series: FullSeries,
  { candidate, range, events, at, longest, never, unsettled }: TransientWindow,
): MeasuredTransient {
  const event = events[at]!;
  const first = Math.min(sampleAtTime(series, event.time), Math.max(0, series.size - 1));
  const off = event.kind === 'ended';
  const settled = off ? null : settledAt(series, first, event.time + longest);
  const seen = series.time[series.size - 1] ?? 0;
  const why = seen >= event.time + longest + RECOVERED_FOR ? never : unsettled;
  const last = Math.min(series.size, sampleAtTime(series, event.time + longest) + 1);
  const from = countedFrom(events, at, series, first, last);
  return {
    last,
    measure: {
      candidate,
      event,
      commandStep: stepAt(range, events, at, series, first),
      ...extremes(series, from, last),
      settling: settled === null ? { none: off ? HOLD_OFF : why } : series.time[settled]! - event.time,
      jerk: isBraking(event) ? { none: BRAKE } : greatestJerk(series, first, last),
    },
  };
}

/** Hold ends by a brake: what is felt is the rider's doing, no design's. */
const isBraking = ({ kind, cause }: HoldEvent): boolean =>
  kind === 'ended' && (cause === 'brake' || cause === 'bend');

/** First sample at or behind a time. */
export const sampleAtTime = (series: FullSeries, time: number): number =>
  sampleAt({ ...series, distance: series.time }, time - 1e-9);

/** Jump of the command where hold takes over or ends. */
function stepAt(
  range: TransientWindow['range'],
  events: readonly HoldEvent[],
  at: number,
  series: FullSeries,
  first: number,
): Figure {
  const override = events[at]!.kind === 'override_ended';
  const event = override ? events[at + 1] : events[at]!;
  if (event === undefined || (override && event.kind !== 'reentered')) return { none: NOT_BACK };
  const i = override ? sampleAtTime(series, event.time) : first;
  return i < series.size
    ? Math.abs(Math.min(Math.max(series.command[i]!, range.least), range.greatest) - event.command)
    : { none: NOT_BACK };
}

/** Sample at which the first 3 s within 1 km/h of the set speed begin, up to a time [s]; null: none do. */
function settledAt(series: FullSeries, first: number, latest: number): number | null {
  let inside = -1;
  for (let i = first; i < series.size; i++) {
    if (inside < 0 && series.time[i]! > latest) return null;
    if (Math.abs(errorAt(series, i)) > RECOVERED_BAND) inside = -1;
    else if (inside < 0) inside = i;
    if (inside >= 0 && series.time[i]! - series.time[inside]! >= RECOVERED_FOR - 1e-9) return inside;
  }
  return null;
}

/** Sample from which the extremes count, or why none does. */
function countedFrom(
  events: readonly HoldEvent[],
  at: number,
  series: FullSeries,
  first: number,
  last: number,
): number | { readonly none: string } {
  const { kind } = events[at]!;
  if (kind === 'ended') return { none: HOLD_OFF };
  if (kind === 'override_ended') {
    const back = events[at + 1];
    const i = back?.kind === 'reentered' ? sampleAtTime(series, back.time) : last;
    return i < last ? i : { none: NOT_BACK };
  }
  if (kind === 'engaged') return first;
  if (kind === 'tapped') {
    for (let i = first + 1; i < last; i++) if (errorAt(series, i) * errorAt(series, first) < 0) return i;
    return { none: NOT_BEYOND };
  }
  for (let i = first; i < last; i++)
    if (Math.abs(series.reference[i]! - series.setSpeed[i]!) <= ARRIVED) return i;
  return { none: NOT_ARRIVED };
}

function extremes(
  series: FullSeries,
  from: number | { readonly none: string },
  last: number,
): Pick<HoldMeasure, 'lowest' | 'highest'> {
  if (typeof from !== 'number') return { lowest: from, highest: from };
  let [lowest, highest] = [0, 0];
  for (let i = from; i < last; i++) {
    lowest = Math.min(lowest, errorAt(series, i));
    highest = Math.max(highest, errorAt(series, i));
  }
  return { lowest, highest };
}

function greatestJerk(series: FullSeries, first: number, last: number): Figure {
  let greatest = 0;
  let behind = 0;
  let any = false;
  for (let i = first; i < last; i++) {
    const since = series.time[i]! - JERK_OVER;
    while (series.time[behind + 1]! <= since + 1e-9) behind++;
    if (series.time[behind]! > since + 1e-9) continue;
    any = true;
    const span = series.time[i]! - series.time[behind]!;
    greatest = Math.max(greatest, Math.abs(series.acceleration[i]! - series.acceleration[behind]!) / span);
  }
  return any ? greatest : { none: 'the window is too short' };
}
