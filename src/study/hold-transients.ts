import { nearestCheckpoint, replay } from '../loop/replay.ts';
import type { FullSeries, HoldEvent, HoldEventKind, LoopResult } from '../loop/result.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import type { Figure, Replayed, Stretch } from './findings.ts';
import { courseOfRun, type HoldCourse, trueSpeedFactor } from './hold-course.ts';
import { isByRule } from './hold-off.ts';
import {
  type HoldMeasure,
  type HoldTransient,
  type HoldTransients,
  NEXT_CAME,
  NOT_SETTLED,
  OUT_OF_RANGE,
} from './hold-transient.ts';
import { type MeasuredTransient, measureTransient, sampleAtTime } from './measure-transient.ts';
import { thinSeries } from './series-measures.ts';
import { transientWords } from './transient-words.ts';

/** Shown before the event, and behind the end of what is measured [s]. */
const LEAD = 5;
const TAIL = 5;
/** A transient is followed for so long [s]; with hold off for so long. */
const LONGEST = 60;
const LONGEST_OFF = 10;
/** Of one kind and candidate at most so many are shown; rows of a picture. */
const MOST_SHOWN = 4;
const PICTURE_ROWS = 400;

/** Kinds that are followed by a transient. An override's is told from where the grip is let go. */
const FOLLOWED: readonly HoldEventKind[] = ['engaged', 'resumed', 'tapped', 'override_ended', 'ended'];

const RUN_ENDED = 'the run ended first';

/** A transient with every sample of its window. */
interface Followed extends MeasuredTransient {
  readonly series: FullSeries;
}

/** With its number among the events of its run. */
interface Kept extends Followed {
  readonly at: number;
}

/**
 * What follows every event of the hold of a run, by replay from the nearest checkpoint, every sample looked at.
 *
 * @param out where the set speed is out of the range of the drive, in order: a transient is followed up to there
 * @returns in order along the way; empty for a run without events
 */
export function holdMeasures(replayed: Replayed, out: readonly Stretch[]): readonly HoldMeasure[] {
  const course = courseOfRun(replayed);
  return eventsOf(replayed).map((at) => follow(replayed, { course, out }, at).measure);
}

/** What follows the events of all candidates. */
export interface FollowedHolds {
  readonly transients: HoldTransients;
  /** Of all events, by the run. */
  readonly measures: ReadonlyMap<LoopResult, readonly HoldMeasure[]>;
}

/** The transients of all candidates: figures of all, pictures of the worst few of one kind and candidate; `out` as above. */
export function followHolds(candidates: readonly Replayed[], out: readonly Stretch[]): FollowedHolds {
  const measures = new Map<LoopResult, readonly HoldMeasure[]>();
  const shown: HoldTransient[] = [];
  const leftOut: HoldTransients['leftOut'][number][] = [];
  for (const replayed of candidates) {
    const course = courseOfRun(replayed);
    const all: HoldMeasure[] = [];
    // Samples of all windows at once would be a run's and more: only those of the worst are kept.
    const worst = new Map(FOLLOWED.map((kind): [HoldEventKind, Kept[]] => [kind, []]));
    const dropped = new Map<HoldEventKind, number>();
    for (const at of eventsOf(replayed)) {
      const followed = { ...follow(replayed, { course, out }, at), at };
      all.push(followed.measure);
      const { kind } = followed.measure.event;
      const alike = worst.get(kind) ?? [];
      alike.push(followed);
      alike.sort((a, b) => badness(b.measure) - badness(a.measure) || a.at - b.at);
      if (alike.length <= MOST_SHOWN) continue;
      alike.pop();
      dropped.set(kind, (dropped.get(kind) ?? 0) + 1);
    }
    measures.set(replayed.result, all);
    for (const kind of FOLLOWED) {
      const count = dropped.get(kind);
      if (count !== undefined) leftOut.push({ candidate: replayed.name, kind, count });
    }
    for (const { measure, series, last } of [...worst.values()].flat().sort((a, b) => a.at - b.at)) {
      const picture = thinSeries(series, 0, endOfTail(series, last), PICTURE_ROWS);
      shown.push({ ...measure, words: transientWords(measure), picture });
    }
  }
  return { transients: { shown, measures: [...measures.values()].flat(), leftOut }, measures };
}

/** Indices of the events that are followed. */
const eventsOf = ({ result }: Replayed): number[] =>
  (result.holdEvents ?? []).flatMap(({ kind }, i) => (FOLLOWED.includes(kind) ? [i] : []));

/** How bad a transient is, beside others of its kind: what is not over is worst, then what goes furthest from the set speed; of ends those by a rule of the unit, then what jerks most. */
export function badness({ event, settling, lowest, highest, jerk }: HoldMeasure): number {
  const size = (figure: Figure): number => (typeof figure === 'number' ? Math.abs(figure) : 0);
  if (event.kind === 'ended') return size(jerk) + (isByRule(event) ? 1000 : 0);
  const unsettled = typeof settling !== 'number' && settling.none === NOT_SETTLED ? 1000 : 0;
  return unsettled + Math.max(size(lowest), size(highest));
}

/** What a transient is cut short by, beside the events of its run. */
interface Way {
  readonly course: HoldCourse;
  readonly out: readonly Stretch[];
}

function follow(replayed: Replayed, { course, out }: Way, at: number): Followed {
  const { plan, result } = replayed;
  const events = result.holdEvents ?? [];
  const event = events[at]!;
  const toTrue = trueSpeedFactor(plan.hold, plan.vehicle);
  const speed = Math.max(event.measured, event.setSpeed) * toTrue;
  const off = event.kind === 'ended';
  const next = endedBy(events, at, course);
  const left = leavesRange(out, event.distance);
  const longest = off ? LONGEST_OFF : LONGEST;
  const horizon = event.distance + (longest + TAIL) * speed;
  const to = Math.min(next, left, horizon, result.endDistance);
  const from = Math.max(0, event.distance - LEAD * speed);
  const { series } = replay(plan, nearestCheckpoint(result, from), to, from);
  const isOut = out.some((stretch) => event.distance >= stretch.from && event.distance < stretch.to);
  const never = isOut ? OUT_OF_RANGE : NOT_SETTLED;
  const unsettled = to === next ? NEXT_CAME : to === left ? OUT_OF_RANGE : to === horizon ? never : RUN_ENDED;
  const range = throttleRange(plan.vehicle);
  const window = { candidate: replayed.name, range, events, at, longest, never, unsettled };
  return { ...measureTransient(series, window), series };
}

/** The event, or the change of set speed, that a transient ends at. */
function endedBy(events: readonly HoldEvent[], at: number, { changes }: Pick<HoldCourse, 'changes'>): number {
  const { kind, distance } = events[at]!;
  const ends = ({ kind: other }: HoldEvent): boolean =>
    other !== 'refused' && !(kind === 'override_ended' && other === 'reentered');
  const event = events.slice(at + 1).find(ends)?.distance ?? Number.POSITIVE_INFINITY;
  const change = changes.find((one) => one.at > distance)?.at ?? Number.POSITIVE_INFINITY;
  return Math.min(event, change);
}

/** Where the demand leaves the range next [m]. */
const leavesRange = (out: readonly Stretch[], distance: number): number =>
  out.find(({ from }) => from > distance)?.from ?? Number.POSITIVE_INFINITY;

function endOfTail(series: FullSeries, last: number): number {
  const until = (series.time[Math.max(0, last - 1)] ?? 0) + TAIL;
  return Math.min(series.size, Math.max(last, sampleAtTime(series, until)));
}
