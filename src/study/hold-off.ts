import type { LoopPlan } from '../loop/plan.ts';
import type { HoldEvent, HoldEventCause, LoopResult } from '../loop/result.ts';
import type { Stretch } from './findings.ts';

/** Part of a run in which hold was off: the rider rode by hand. */
export interface HoldOff extends Stretch {
  /** [s], from the start of the run. */
  readonly since: number;
  readonly until: number;
  /** What ended hold; null: it was off from the start. */
  readonly ended: HoldEvent | null;
  /** Hold came back; false: it was off to the end of the run. */
  readonly back: boolean;
}

/** Rules of the unit itself; anything else is the rider's doing. */
const RULES: readonly HoldEventCause[] = [
  'too_slow',
  'too_fast',
  'below_lowest_speed',
  'sensor_not_believed',
];
export const isByRule = ({ cause }: HoldEvent): boolean => RULES.includes(cause);

/** Where hold was off, in order along the way. */
export function holdOff(
  { hold }: Pick<LoopPlan, 'hold'>,
  { holdEvents = [], endDistance, endTime }: Pick<LoopResult, 'holdEvents' | 'endDistance' | 'endTime'>,
): HoldOff[] {
  const off: HoldOff[] = [];
  let open: Pick<HoldOff, 'from' | 'since' | 'ended'> | null =
    hold.starts === 'by_hand' ? { from: 0, since: 0, ended: null } : null;
  for (const event of holdEvents) {
    const { kind, distance, time } = event;
    if (kind === 'ended') open ??= { from: distance, since: time, ended: event };
    else if (open !== null && (kind === 'engaged' || kind === 'resumed')) {
      off.push({ ...open, to: distance, until: time, back: true });
      open = null;
    }
  }
  if (open !== null && endTime > open.since)
    off.push({ ...open, to: endDistance, until: endTime, back: false });
  return off;
}

/**
 * The plan with hold on all the way: no rule ends it, the rider does nothing with it, the sensor has no fault. What a
 * study asks of the gains it asks of this: a replay of a piece of the road is no place for the acts of the whole.
 */
export function heldThroughout(plan: LoopPlan): LoopPlan {
  const { supervisor: _rules, faults: _faults, ...rest } = plan;
  const { starts: _starts, ...hold } = rest.hold;
  const { acts: _acts, resumesAfter: _resumes, ...rider } = rest.rider;
  return { ...rest, hold, rider };
}
