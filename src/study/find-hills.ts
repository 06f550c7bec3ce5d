import type { Road } from '../road/road.ts';
import type { Demand, Hill, Replayed } from './findings.ts';
import { hillFacts } from './hill-facts.ts';
import { hillOutcome } from './hill-outcome.ts';
import { hillStretches } from './hill-stretches.ts';
import { courseOfRun } from './hold-course.ts';
import { outOfRange } from './out-of-range.ts';
import { RECOVERED_BAND } from './recovery.ts';

export interface HillSearch {
  readonly road: Road;
  readonly demand: Demand;
  /** Candidates after their runs over this road. */
  readonly replayed: readonly Replayed[];
  /** Half-width of the band that a hill defeats [m/s]. */
  readonly band: number;
  /** Half-width within which a run has recovered [m/s]; 1 km/h by default. */
  readonly recoveryBand?: number;
  /** Told before each hill how many are done, and of how many. */
  readonly onHill?: (done: number, of: number) => void;
}

/**
 * Finds the hills of a road and what each candidate did on each. Hills are the road's and shared: every stretch where
 * the demand leaves the range, or a candidate that regulates leaves its band or sits on a limit. A locked throttle is
 * told what it did on them, but makes none: it would make one of the whole road.
 *
 * Everything about a candidate on a hill is found by replay over a window, so that its cost depends on the hills and not
 * on the length of the road: what it did from a checkpoint of its run, sample for sample that run; why, and what would
 * hold, over a piece cut out of the road that begins 1 to 1.5 km before the hill with the loop settled, which equals a
 * replay of that window on the whole road (see HillWindow).
 *
 * @returns hills in order along the way, empty where everything holds
 */
export function findHills(search: HillSearch): Hill[] {
  const { road, demand, replayed, band, recoveryBand = RECOVERED_BAND, onHill } = search;
  const out = outOfRange(road, demand);
  const contexts = replayed.map((candidate) => ({
    demand,
    outOfRange: out,
    course: courseOfRun(candidate),
    band,
    recoveryBand,
  }));
  return hillStretches(road, demand, replayed, band).map((stretch, k, all) => {
    onHill?.(k, all.length);
    const facts = hillFacts(road, demand, stretch, k + 1, replayed[0]?.plan.vehicle);
    return {
      ...facts,
      outcomes: replayed.map((candidate, i) => hillOutcome(candidate, facts, contexts[i])),
    };
  });
}
