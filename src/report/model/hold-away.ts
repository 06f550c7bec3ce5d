import type { LoopResult } from '../../loop/result.ts';
import type { RunResult } from '../../run/run-result.ts';
import type { Stretch } from '../../study/findings.ts';
import { type HoldOff, holdOff } from '../../study/hold-off.ts';

/** Something in the case lets hold change hands, or its sensor fail. */
export const asksOfHold = ({ supervisor, faults, hold, rider, bends }: RunResult): boolean =>
  supervisor !== null ||
  faults.length > 0 ||
  hold.starts === 'by_hand' ||
  (rider.acts?.length ?? 0) > 0 ||
  bends !== null;

/** Where hold of a candidate was off, in order along the way. */
export const offOf = ({ hold }: Pick<RunResult, 'hold'>, result: LoopResult): readonly HoldOff[] =>
  holdOff({ hold }, result);

/** Where the rider's grip had the throttle, in order along the way. */
export function overridesOf({
  holdEvents = [],
  endDistance,
}: Pick<LoopResult, 'holdEvents' | 'endDistance'>): Stretch[] {
  const found: Stretch[] = [];
  let from: number | null = null;
  for (const { kind, distance } of holdEvents) {
    if (kind === 'override_began') from ??= distance;
    else if (from !== null && (kind === 'override_ended' || kind === 'ended')) {
      found.push({ from, to: distance });
      from = null;
    }
  }
  if (from !== null) found.push({ from, to: endDistance });
  return found;
}
