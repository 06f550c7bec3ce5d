import type { BinRecord } from '../loop/result.ts';
import type { SpeedTrace } from '../loop/trace-speeds.ts';
import type { Road } from '../road/road.ts';
import type { Demand, RecoveredHill, Replayed, Stretch } from './findings.ts';
import { type HillPlace, hillPassage, marksHill, type PassageContext } from './hill-passage.ts';
import { hillStretches } from './hill-stretches.ts';
import { courseOfRun } from './hold-course.ts';
import { outOfRange } from './out-of-range.ts';
import { isLost, RECOVERED_BAND, recoveryOf } from './recovery.ts';

/** Slower ones are looked at sample for sample whatever the others are: they may be none within the time that is waited [s]. */
const SLOW = 90;

type Outcome = RecoveredHill['outcomes'][number];

/**
 * The hills of a road with nothing but what the figure of recoveries needs, for a small part of the time of `findHills`:
 * the record by bins bounds every recovery from above, and from the slowest bound on hills are replayed sample for
 * sample until no other can be slower. The worst recovery is that of `findHills` bit for bit; for the others their
 * bounds stand, a bin or two above.
 *
 * @param replayed candidates after their runs over this road
 * @param band half-width of the band that a hill defeats [m/s]
 */
export function slowestRecoveries(
  road: Road,
  demand: Demand,
  replayed: readonly Replayed[],
  band: number,
): RecoveredHill[] {
  const out = outOfRange(road, demand);
  const stretches = hillStretches(road, demand, replayed, band);
  const outcomes = replayed.map((candidate) =>
    outcomesOf(candidate, stretches, {
      demand,
      outOfRange: out,
      course: courseOfRun(candidate),
      band,
      recoveryBand: RECOVERED_BAND,
    }),
  );
  return stretches.map(({ from, to, until }, k) => ({
    number: k + 1,
    from,
    to,
    until,
    outcomes: outcomes.map((ofCandidate) => ofCandidate[k]),
  }));
}

/** In the order of the hills. */
function outcomesOf(replayed: Replayed, hills: readonly HillPlace[], context: PassageContext): Outcome[] {
  const { name: candidate, plan, result } = replayed;
  const { band, course } = context;
  const none: Outcome = { candidate, affected: false, recovery: 0 };
  const outcomes = hills.map(() => none);
  if (plan.controller.kind === 'locked') return outcomes;
  const bounds = boundsByBins(result.bins, context);
  const marked = hills
    .map((hill, k) => ({ hill, k }))
    .filter(({ hill }) => result.endDistance > hill.from && marksHill(result, hill, course, band))
    .map((one) => ({ ...one, bound: bounds(one.hill) }));
  for (const { k, bound } of marked) outcomes[k] = { candidate, affected: true, recovery: bound };
  let slowest = 0;
  const look = ({ hill, k }: { hill: HillPlace; k: number }): Outcome => {
    const { events, recovery } = hillPassage(replayed, hill, context);
    if (typeof recovery.time === 'number') slowest = Math.max(slowest, recovery.time);
    outcomes[k] = { candidate, affected: events.affected, recovery: recovery.time };
    return outcomes[k];
  };
  // One that never came, the first along the way, is before any other: nothing else needs to be known then.
  for (const one of marked.filter(({ bound }) => bound >= SLOW)) {
    const { affected, recovery } = look(one);
    if (affected && isLost(recovery))
      return outcomes.map((outcome) => (outcome.recovery === Number.POSITIVE_INFINITY ? none : outcome));
  }
  for (const one of marked
    .filter(({ bound }) => bound < SLOW)
    .sort((a, b) => b.bound - a.bound || a.k - b.k)) {
    if (one.bound < slowest) break;
    look(one);
  }
  return outcomes;
}

/**
 * What a recovery from a hill takes at most [s]: the same rule over bins in the place of samples, each at its beginning
 * with its greatest error, and out of range or following only where the whole bin is; infinite where it never ends.
 */
function boundsByBins(bins: BinRecord, context: PassageContext): (hill: HillPlace) => number {
  const { size, edge, timeAt, errorMin, errorMax } = bins;
  const series: SpeedTrace = {
    size,
    time: timeAt,
    distance: edge,
    setSpeed: new Float64Array(size),
    speed: Float64Array.from({ length: size }, (_, i) => Math.max(errorMax[i], -errorMin[i])),
  };
  const width = edge[1] - edge[0];
  const whole = (stretches: readonly Stretch[]): Stretch[] =>
    stretches.map(({ from, to }) => ({ from, to: to - width })).filter(({ from, to }) => to > from);
  const rule = {
    ...context,
    outOfRange: whole(context.outOfRange),
    settling: whole(context.course.settling),
    gaveUp: context.course.gaveUp,
    whole: true,
  };
  return ({ from, until }) => {
    const first = Math.min(Math.floor(from / width), size - 1);
    const { time } = recoveryOf(series, first, Math.min(size, Math.ceil(until / width) + 1), rule);
    return typeof time === 'number' ? time : Number.POSITIVE_INFINITY;
  };
}
