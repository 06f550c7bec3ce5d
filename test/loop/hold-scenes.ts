// Units, acts and rides of the tests of hold. Plain objects; nothing is computed by the code under test.

import type { SupervisorSetup } from '../../src/control/supervisor-setup.ts';
import type { LoopPlan, RiderAct, RiderDeed } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { FullSeries, HoldEvent, HoldEventKind, LoopResult } from '../../src/loop/result.ts';
import { runLoop } from '../../src/loop/run-loop.ts';

export const SAMPLE = 0.02;

/** A unit whose rules end nothing. */
export const patientUnit: SupervisorSetup = {
  lowestSpeed: 0,
  tooSlow: null,
  tooFast: null,
  believable: null,
  resumeRamp: 0.5,
  tap: 0.25,
  tapRamp: null,
  override: { integral: 'held', reentry: 0.4 },
};

/** Something that the rider does at a distance [m]. */
export const at = (distance: number, does: RiderDeed): RiderAct => ({
  at: { distance },
  does,
  reason: 'written',
});
/** Something that the rider does at a time [s]. */
export const atTime = (time: number, does: RiderDeed): RiderAct => ({
  at: { time },
  does,
  reason: 'written',
});
export const rider = (...acts: RiderAct[]): LoopPlan['rider'] => ({ brakesAbove: null, shifts: [], acts });

export const ENGAGE: RiderDeed = { kind: 'engage' };
export const RESUME: RiderDeed = { kind: 'resume' };
// biome-ignore lint/suspicious/noThenProperty: a key of the plan, never a promise
export const CANCEL: RiderDeed = { kind: 'cancel', then: 'holds_speed' };
// biome-ignore lint/suspicious/noThenProperty: a key of the plan, never a promise
export const COAST: RiderDeed = { kind: 'cancel', then: 'coasts' };
export const brakeTo = (to: number, deceleration = 2): RiderDeed => ({ kind: 'brake', to, deceleration });

export interface Ride {
  readonly result: LoopResult;
  readonly series: FullSeries;
  readonly events: readonly HoldEvent[];
  /** The only event of a kind, and the sample that starts at it. */
  readonly only: (kind: HoldEventKind) => HoldEvent;
  readonly sampleOf: (event: HoldEvent) => number;
}

/** A run with every sample of it. */
export function ride(plan: LoopPlan): Ride {
  const result = runLoop(plan);
  const { series } = replay(plan, result.checkpoints[0]!, Number.POSITIVE_INFINITY);
  const events = result.holdEvents ?? [];
  return {
    result,
    series,
    events,
    only: (kind) => {
      const found = events.filter((event) => event.kind === kind);
      if (found.length !== 1) throw new Error(`${found.length} events of kind ${kind}`);
      return found[0]!;
    },
    sampleOf: ({ time }) => Math.round(time / SAMPLE),
  };
}
