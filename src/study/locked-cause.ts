import { surroundingsBetween } from '../loop/places.ts';
import type { LoopPlan } from '../loop/plan.ts';
import { cellOf } from '../numeric/interpolate.ts';
import { SPEED_CEILING, settledSpeed } from '../vehicle/equilibrium.ts';
import type { Demand } from './findings.ts';
import { keptInGear } from './gear-course.ts';
import type { CauseFinding } from './hill-cause.ts';
import type { HillFacts } from './hill-facts.ts';
import { demandWords, gearName, inKmh, inPct } from './wording.ts';

/**
 * A locked throttle has no cause: it does not regulate. Told instead is where its own balance lies at the place of
 * greatest demand. On the rising side of an engine's torque there may be none: as the engine slows its force falls
 * faster than what the road asks, and the vehicle slows down until it stops or the gear can turn no longer.
 *
 * @param throttle at which it is locked on this hill
 */
export function lockedCause(
  { road, vehicle }: LoopPlan,
  hill: HillFacts,
  demand: Demand,
  throttle: number,
): CauseFinding {
  const cause = { none: 'a locked throttle does not regulate' };
  const asked = `The throttle is locked at ${inPct(throttle)}; the demand here is up to ${demandWords(hill.share)}`;
  if (vehicle.drive.gearbox.kind === 'automatic') return { cause, why: `${asked}.` };
  const knot = cellOf(road.distance, hill.shareAt);
  const kept = keptInGear(vehicle, demand.gear[knot]);
  const { gears, gear, belt, stallSpeed } = kept.drive;
  const settles = settledSpeed(kept, surroundingsBetween(road, knot, 0), throttle, demand.setSpeed[knot]);
  const ratio = belt === null ? gears[gear].ratio : belt.greatest;
  const inIt = gears.length > 1 ? ` in ${gearName(gear)}` : '';
  if (settles >= SPEED_CEILING) return { cause, why: `${asked}. There it would run away.` };
  if (settles > 0 && ratio * settles >= stallSpeed)
    return {
      cause,
      why: `${asked}. There, from the set speed, it would settle at ${inKmh(settles)}${inIt}.`,
    };
  const end = stallSpeed > 0 ? `could turn no longer${inIt}` : 'stood still';
  return { cause, why: `${asked}. There no speed would hold: it would slow down until it ${end}.` };
}
