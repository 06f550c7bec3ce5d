// A plan run over its road and searched for limit cycles: what the tests of them start from.
import type { LoopPlan } from '../../src/loop/plan.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { demandOf } from '../../src/study/demand.ts';
import type { LimitCycle } from '../../src/study/findings.ts';
import { findLimitCycles } from '../../src/study/limit-cycles.ts';
import { roadOf } from './road-of.ts';

/** A steady grade behind a short rise that sets the loop swinging. */
export const kicked = (length: number, grade = 0, rise = 20) =>
  roadOf([
    { length: 100, grade },
    { length: rise, grade: grade + 0.03 },
    { length: length - 100 - rise, grade },
  ]);

export function cyclesOf(plan: LoopPlan, leastAmplitude?: number): readonly LimitCycle[] {
  const { road, vehicle, hold, rider } = plan;
  return findLimitCycles({
    road,
    demand: demandOf(road, vehicle, hold, rider),
    replayed: [{ name: 'pi', plan, result: runLoop(plan) }],
    ...(leastAmplitude === undefined ? {} : { leastAmplitude }),
  });
}
