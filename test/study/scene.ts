// One hill between two levels, candidates replayed over it: what the tests of hills start from.
import type { LoopPlan } from '../../src/loop/plan.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { demandOf } from '../../src/study/demand.ts';
import { findHills } from '../../src/study/find-hills.ts';
import type { Demand, Hill, HillOutcome, Replayed } from '../../src/study/findings.ts';
import { type RoadOptions, roadOf } from './road-of.ts';
import { piOf } from './vehicle-of.ts';

export const BAND = 2 / 3.6;

/** Gains that keep the band on any grade step in these scenes as long as nothing else stands in the way. */
export const STIFF = piOf({ kp: 1, ki: 0.3 });

export const oneHill = (grade: number, length = 800, options: RoadOptions = {}) =>
  roadOf(
    [
      { length: 1500, grade: 0 },
      { length, grade },
      { length: 2000, grade: 0 },
    ],
    options,
  );

export interface Studied {
  readonly replayed: readonly Replayed[];
  readonly demand: Demand;
  readonly hills: readonly Hill[];
}

/** Runs the candidates and finds the hills; all plans share road, vehicle and hold. */
export function study(plans: Readonly<Record<string, LoopPlan>>): Studied {
  const replayed = Object.entries(plans).map(([name, plan]) => ({ name, plan, result: runLoop(plan) }));
  const { road, vehicle, hold, rider } = replayed[0]!.plan;
  const demand = demandOf(road, vehicle, hold, rider);
  return { replayed, demand, hills: findHills({ road, demand, replayed, band: BAND }) };
}

export function outcomeOn(hill: Hill, candidate: string): HillOutcome {
  const outcome = hill.outcomes.find((o) => o.candidate === candidate);
  if (outcome === undefined) throw new Error(`no outcome of ${candidate}`);
  return outcome;
}
