import type { LoopPlan } from '../loop/plan.ts';
import { nearestCheckpoint, replay } from '../loop/replay.ts';
import type { FullSeries, HoldEvent, HoldEventKind, LoopResult } from '../loop/result.ts';
import type { Figure, Replayed } from './findings.ts';
import { courseOfRun, type HoldCourse, trueSpeedFactor } from './hold-course.ts';
import { type HoldMeasure, type HoldTransient, type HoldTransients, NEXT_CAME } from './hold-transient.ts';
import { RECOVERED_BAND, RECOVERED_FOR } from './recovery.ts';
import { errorAt, sampleAt, thinSeries } from './series-measures.ts';
import { transientWords } from './transient-words.ts';

/** Shown before the event, and behind the end of what is measured [s]. */
const LEAD = 5;
const TAIL = 5;
/** A transient is followed for so long [s]; with hold off for so long. */
const LONGEST = 60;
const LONGEST_OFF = 10;
/** Jerk is the change of acceleration over this [s]. */
const JERK_OVER = 0.2;
/** Of one kind and candidate at most so many are shown; rows of a picture. */
const MOST_SHOWN = 4;
const PICTURE_ROWS = 400;
/** The reference has arrived this near to the set speed [m/s]. */
const ARRIVED = 1e-6;

/** Kinds that are followed by a transient. An override's is told from where the grip is let go. */
const FOLLOWED: readonly HoldEventKind[] = ['engaged', 'resumed', 'tapped', 'override_ended', 'ended'];

const NOT_SETTLED = 'it was not within 1 km/h for 3 s in a minute';
const RUN_ENDED = 'the run ended first';
const HOLD_OFF = 'hold is off';
const NOT_BACK = 'hold did not come back';
const NOT_ARRIVED = 'the reference did not arrive at the set speed first';

/** A transient with every sample of its window. */
interface Followed {
  readonly measure: HoldMeasure;
  readonly series: FullSeries;
  /** Sample at which what is measured ends. */
  readonly last: number;
}

/**
 * What follows every event of the hold of a run, by replay from the nearest checkpoint, every sample looked at.
 *
 * @returns in order along the way; empty for a run without events
 */
export const holdMeasures = (replayed: Replayed): readonly HoldMeasure[] =>
  eventsOf(replayed).map((at) => follow(replayed, at).measure);

/** What follows the events of all candidates. */
export interface FollowedHolds {
  readonly transients: HoldTransients;
  /** Of all events, by the run. */
  readonly measures: ReadonlyMap<LoopResult, readonly HoldMeasure[]>;
}

/** The transients of all candidates: figures of all, pictures of the worst few of one kind and candidate. */
export function followHolds(candidates: readonly Replayed[]): FollowedHolds {
  const measures = new Map<LoopResult, readonly HoldMeasure[]>();
  const shown: HoldTransient[] = [];
  const leftOut: HoldTransients['leftOut'][number][] = [];
  for (const replayed of candidates) {
    const followed = eventsOf(replayed).map((at) => ({ at, ...follow(replayed, at) }));
    measures.set(
      replayed.result,
      followed.map(({ measure }) => measure),
    );
    const kept = new Set<number>();
    for (const kind of FOLLOWED) {
      const alike = followed.filter(({ measure }) => measure.event.kind === kind);
      const worst = alike.toSorted((a, b) => badness(b.measure) - badness(a.measure) || a.at - b.at);
      for (const { at } of worst.slice(0, MOST_SHOWN)) kept.add(at);
      if (alike.length > MOST_SHOWN)
        leftOut.push({ candidate: replayed.name, kind, count: alike.length - MOST_SHOWN });
    }
    for (const { at, measure, series, last } of followed) {
      if (!kept.has(at)) continue;
      const picture = thinSeries(series, 0, endOfTail(series, last), PICTURE_ROWS);
      shown.push({ ...measure, words: transientWords(measure), picture });
    }
  }
  return { transients: { shown, leftOut }, measures };
}

/** Indices of the events that are followed. */
const eventsOf = ({ result }: Replayed): number[] =>
  (result.holdEvents ?? []).flatMap(({ kind }, i) => (FOLLOWED.includes(kind) ? [i] : []));

/** What is not over is worst, then what goes furthest from the set speed or, with hold off, jerks most. */
function badness({ event, settling, lowest, highest, jerk }: HoldMeasure): number {
  const size = (figure: Figure): number => (typeof figure === 'number' ? Math.abs(figure) : 0);
  if (event.kind === 'ended') return size(jerk);
  const unsettled = typeof settling === 'number' || settling.none === NEXT_CAME ? 0 : 1000;
  return unsettled + Math.max(size(lowest), size(highest));
}

function follow(replayed: Replayed, at: number): Followed {
  const { plan, result } = replayed;
  const events = result.holdEvents ?? [];
  const event = events[at]!;
  const toTrue = trueSpeedFactor(plan.hold, plan.vehicle);
  const speed = Math.max(event.measured, event.setSpeed) * toTrue;
  const off = event.kind === 'ended';
  const next = endedBy(events, at, courseOfRun(replayed));
  const longest = off ? LONGEST_OFF : LONGEST;
  const horizon = event.distance + (longest + TAIL) * speed;
  const to = Math.min(next.place, horizon, result.endDistance);
  const from = Math.max(0, event.distance - LEAD * speed);
  const { series } = replay(plan, nearestCheckpoint(result, from), to, from);
  const why = to === next.place ? NEXT_CAME : to === horizon ? NOT_SETTLED : RUN_ENDED;
  return { ...measured(replayed.name, plan, events, at, series, longest, why), series };
}

/** The event, or the change of set speed, that a transient ends at. */
function endedBy(
  events: readonly HoldEvent[],
  at: number,
  { changes }: Pick<HoldCourse, 'changes'>,
): { readonly place: number } {
  const { kind, distance } = events[at]!;
  const ends = ({ kind: other }: HoldEvent): boolean =>
    other !== 'refused' && !(kind === 'override_ended' && other === 'reentered');
  const event = events.slice(at + 1).find(ends)?.distance ?? Number.POSITIVE_INFINITY;
  const change = changes.find((one) => one.at > distance)?.at ?? Number.POSITIVE_INFINITY;
  return { place: Math.min(event, change) };
}

function measured(
  candidate: string,
  plan: LoopPlan,
  events: readonly HoldEvent[],
  at: number,
  series: FullSeries,
  longest: number,
  why: string,
): Omit<Followed, 'series'> {
  const event = events[at]!;
  const first = Math.min(sampleAtTime(series, event.time), Math.max(0, series.size - 1));
  const off = event.kind === 'ended';
  const settled = off ? null : settledAt(series, first);
  const lastTime = Math.min(
    settled === null ? Number.POSITIVE_INFINITY : series.time[settled]! + RECOVERED_FOR,
    event.time + longest,
  );
  const last = Math.min(series.size, sampleAtTime(series, lastTime) + 1);
  const from = countedFrom(events, at, series, first);
  return {
    last,
    measure: {
      candidate,
      event,
      commandStep: stepAt(plan, events, at, series, first),
      ...extremes(series, from, last),
      settling: settled === null ? { none: off ? HOLD_OFF : why } : series.time[settled]! - event.time,
      jerk: greatestJerk(series, first, last),
    },
  };
}

/** First sample at or behind a time. */
const sampleAtTime = (series: FullSeries, time: number): number =>
  sampleAt({ ...series, distance: series.time }, time - 1e-9);

/** Jump of the command where hold takes over or ends. */
function stepAt(
  plan: LoopPlan,
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
    ? Math.abs(withinRange(plan, series.command[i]!) - event.command)
    : { none: NOT_BACK };
}

/** The command as the actuator takes it: within the range of the drive and the end stops. */
function withinRange({ vehicle: { actuator, drive } }: LoopPlan, command: number): number {
  const least = Math.max(drive.throttleMin, actuator.travel?.least ?? drive.throttleMin);
  const greatest = Math.min(drive.throttleMax, actuator.travel?.greatest ?? drive.throttleMax);
  return Math.min(Math.max(command, least), greatest);
}

/** Sample at which 3 s within 1 km/h of the set speed begin; null: none do. */
function settledAt(series: FullSeries, first: number): number | null {
  let inside = -1;
  for (let i = first; i < series.size; i++) {
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
): number | { readonly none: string } {
  const { kind } = events[at]!;
  if (kind === 'ended') return { none: HOLD_OFF };
  if (kind === 'override_ended') {
    const back = events[at + 1];
    const i = back?.kind === 'reentered' ? sampleAtTime(series, back.time) : series.size;
    return i < series.size ? i : { none: NOT_BACK };
  }
  if (kind === 'engaged') return first;
  for (let i = first; i < series.size; i++)
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
  // Where it settles before the reference arrives, the sample of the arrival counts.
  for (let i = from; i < Math.max(last, Math.min(from + 1, series.size)); i++) {
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

function endOfTail(series: FullSeries, last: number): number {
  const until = (series.time[Math.max(0, last - 1)] ?? 0) + TAIL;
  return Math.min(series.size, Math.max(last, sampleAtTime(series, until)));
}
