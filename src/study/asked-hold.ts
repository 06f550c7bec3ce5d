import type { SupervisorSetup } from '../control/supervisor-setup.ts';
import type { HoldPlan, RiderPlan, SetSpeedChange } from '../loop/plan.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { changesInOrder, trueSpeedFactor } from './hold-course.ts';

/**
 * The set speeds that a ride asks for by what is written of it: those of the plan, and what taps and engaging make of
 * them. What a run makes of it may differ, where a rule ends hold or refuses a tap. Acts placed by time have no place here.
 *
 * @returns the plan's own hold where the rider changes no set speed
 */
export function askedHold(
  hold: HoldPlan,
  { acts = [] }: RiderPlan,
  { tap = 0, tapRamp = null }: Partial<Pick<SupervisorSetup, 'tap' | 'tapRamp'>>,
  vehicle: Pick<Vehicle, 'sensor'>,
): HoldPlan {
  const toTrue = trueSpeedFactor(hold, vehicle);
  const made: SetSpeedChange[] = [];
  let on = hold.starts !== 'by_hand';
  let inHand = hold.startSpeed;
  let inForce = hold.setSpeed;
  let next = 0;
  const planned = (place: number): void => {
    for (; next < hold.changes.length; next++) {
      const { at, setSpeed } = hold.changes[next]!;
      if (!('distance' in at) || at.distance > place) return;
      inForce = setSpeed;
    }
  };
  for (const { at, does } of acts) {
    if (!('distance' in at)) continue;
    planned(at.distance);
    let setSpeed = inForce;
    if (does.kind === 'tap' && on) setSpeed += does.taps * tap;
    if (does.kind === 'engage' && !on) setSpeed = inHand;
    if (setSpeed !== inForce && setSpeed > 0) made.push({ at, setSpeed, ramp: tapRamp });
    inForce = setSpeed > 0 ? setSpeed : inForce;
    if (on) inHand = inForce;
    if (does.kind === 'brake') inHand = Math.min(inHand, does.to / toTrue);
    if (does.kind === 'ride') inHand = does.to / toTrue;
    if (does.kind === 'engage' || does.kind === 'resume') on = true;
    else if (does.kind !== 'tap' && does.kind !== 'override') on = false;
  }
  return made.length === 0 ? hold : { ...hold, changes: changesInOrder(hold.changes, made, placeOf) };
}

/** A change at a time stays behind the planned one before it. */
const placeOf = ({ at }: SetSpeedChange): number =>
  'distance' in at ? at.distance : Number.NEGATIVE_INFINITY;
