import type { Road } from '../road/road.ts';
import type { Demand, RecoveredHill, Replayed } from './findings.ts';
import { hillPassage } from './hill-passage.ts';
import { hillStretches } from './hill-stretches.ts';
import { courseOfRun } from './hold-course.ts';
import { outOfRange } from './out-of-range.ts';
import { RECOVERED_BAND } from './recovery.ts';

/**
 * The hills of a road with the recoveries of one candidate, every one sample for sample: those of `findHills` bit for
 * bit, without the causes and searches that take its time. For requirements about a stretch, which may ask for another
 * recovery than the slowest (see slowestRecoveries).
 *
 * @param one that is asked about
 * @param replayed all that make the hills, that one among them, after their runs over this road
 * @param band half-width of the band that a hill defeats [m/s]
 */
export function allRecoveries(
  road: Road,
  demand: Demand,
  one: Replayed,
  replayed: readonly Replayed[],
  band: number,
): RecoveredHill[] {
  const context = {
    demand,
    outOfRange: outOfRange(road, demand),
    course: courseOfRun(one),
    band,
    recoveryBand: RECOVERED_BAND,
  };
  return hillStretches(road, demand, replayed, band).map((hill, k) => {
    const { from, to, until } = hill;
    if (one.result.endDistance <= from) return { number: k + 1, from, to, until, outcomes: [] };
    const { events, recovery } = hillPassage(one, hill, context);
    const outcome = { candidate: one.name, affected: events.affected, recovery: recovery.time };
    return { number: k + 1, from, to, until, outcomes: [outcome] };
  });
}
