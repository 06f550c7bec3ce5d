import type { Road } from '../road/road.ts';
import type { Demand, Figure, RecoveredHill, Replayed } from './findings.ts';
import { type HillPlace, hillPassage, marksHill, type PassageContext } from './hill-passage.ts';
import { speedsOver } from './hill-series.ts';
import { hillStretches } from './hill-stretches.ts';
import { courseOfRun } from './hold-course.ts';
import { outOfRange } from './out-of-range.ts';
import { RECOVERED_BAND, recoveryOf } from './recovery.ts';
import { sampleAt } from './series-measures.ts';

/** Recoveries by speeds alone lie within this of those by every sample: a sample or two of any controller [s]. */
const NEAR = 0.5;

type Outcome = RecoveredHill['outcomes'][number];

/**
 * The hills of a road with nothing but what the figure of recoveries needs, for a part of the time of `findHills`:
 * every hill is looked at by its speeds alone, and those that may be the slowest again sample for sample. The worst
 * recovery is that of `findHills` bit for bit; the others are right to a sample or two.
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
  if (plan.controller.kind === 'locked') return hills.map(() => none);
  const marked = hills.map((hill) => result.endDistance > hill.from && marksHill(result, hill, course, band));
  const near = hills.map((hill, k): Figure => (marked[k] ? bySpeeds(replayed, hill, context) : 0));
  const slowest = near.reduce<number>(
    (most, time) => (typeof time === 'number' ? Math.max(most, time) : most),
    0,
  );
  return hills.map((hill, k) => {
    const time = near[k];
    if (!marked[k]) return none;
    if (typeof time === 'number' && time < slowest - NEAR)
      return { candidate, affected: true, recovery: time };
    const { events, recovery } = hillPassage(replayed, hill, context);
    return { candidate, affected: events.affected, recovery: recovery.time };
  });
}

function bySpeeds(replayed: Replayed, hill: HillPlace, context: PassageContext): Figure {
  const { series, whole } = speedsOver(replayed, hill, context);
  const rule = { ...context, settling: context.course.settling, whole };
  return recoveryOf(series, sampleAt(series, hill.from), sampleAt(series, hill.until), rule).time;
}
