import { surroundingsBetween } from '../loop/places.ts';
import type { LoopPlan } from '../loop/plan.ts';
import { atCharge } from '../vehicle/at-charge.ts';
import { authority } from '../vehicle/authority.ts';
import { derateFactor } from '../vehicle/derating.ts';
import type { Drive } from '../vehicle/drive.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import { demandShare } from './demand-share.ts';
import type { Cause, Derating } from './findings.ts';
import { keptInGear, plannedGears } from './gear-course.ts';
import { gearAt } from './gear-demand.ts';
import type { HillFacts } from './hill-facts.ts';
import type { HillWindow } from './hill-window.ts';
import { nominalCourse, setSpeedAt } from './hold-course.ts';
import { has, without } from './limitations.ts';
import { atKm, gearName, inKw, inNewton } from './wording.ts';

export interface RangeCause {
  readonly cause: Cause;
  /** Of the cause `derating`. */
  readonly derating?: Derating;
  readonly why: string;
}

/**
 * Names what limits the range of the force, by the demand over the hill: with one thing taken away it would be in range.
 * The first of these is the cause:
 *
 * 1. `traction`: the force is there, the grip of the driven wheel does not pass it on; or grip takes at least half of
 *    what is missing.
 * 2. `gear`: in another gear, from the nearest lower one down, then upwards, the whole hill would be in range. Not of a
 *    gearbox or a belt that chooses by itself, whose demand is that of the best gear.
 * 3. `derating`: it would be in range at sea level, or with a battery at nominal voltage and with room.
 * 4. `wind`: it would be in range in still air.
 * 5. Downwards `closed_throttle`; upwards `power` where the power limit binds (of an engine: no gear could give so much
 *    power), else `torque`.
 *
 * @param up more force is asked for than there is; else less than there can be
 * @returns null where the demand is in range throughout
 */
export function nameRange(
  windowed: LoopPlan,
  window: HillWindow,
  hill: HillFacts,
  up: boolean,
): RangeCause | null {
  const [from, to] = [hill.from - window.start, hill.until - window.start];
  const extremeOf = (plan: LoopPlan, kept: number | null = null): Extreme =>
    extremeDemand(plan, from, to, up, kept);
  const gripped = extremeOf(windowed);
  if (gripped.share <= 1) return null;
  const plan = without(windowed, 'grip');
  const here = extremeOf(plan);
  const ungripped = extremeDemand(plan, gripped.at, gripped.at, up, null).available;
  const taken = Math.abs(ungripped - gripped.available);
  if (here.share <= 1 || taken >= Math.abs(gripped.required - gripped.available) / 2)
    return { cause: 'traction', why: gripWords(window, gripped, ungripped, up) };
  const { drive } = windowed.vehicle;
  const geared = drive.gears.length > 1;
  const inIt = geared ? ` in ${gearName(here.gear)}` : '';
  const asked = `At ${atKm(window.start + here.at)} the set speed needs ${inNewton(here.required)} and ${throttleWords(windowed, up)} gives ${inNewton(here.available)}${inIt}`;
  for (const gear of drive.gearbox.kind === 'automatic' ? [] : otherGears(drive.gears.length, here.gear)) {
    const there = extremeOf(plan, gear);
    if (there.share > 1) continue;
    // A gear whose force the wheel cannot pass on is none that would do.
    if (extremeOf(windowed, gear).share > 1)
      return { cause: 'traction', why: gripWords(window, gripped, ungripped, up) };
    return {
      cause: 'gear',
      why: `${asked}; in ${gearName(gear)} it would be ${inNewton(there.available)} there, which is enough: the gear is the reason.`,
    };
  }
  if (has(plan, 'derating')) {
    const there = extremeOf(without(plan, 'derating'));
    if (there.share <= 1)
      return {
        cause: 'derating',
        ...deratingWords(drive, up, asked, inNewton(there.available)),
      };
  }
  if (has(plan, 'wind')) {
    const there = extremeOf(without(plan, 'wind'));
    if (there.share <= 1)
      return { cause: 'wind', why: `${asked}; in still air it would need ${inNewton(there.required)}.` };
  }
  if (!up) return { cause: 'closed_throttle', why: `${asked}: it cannot hold back enough.` };
  return powerOrTorque(windowed, here, asked);
}

function powerOrTorque({ vehicle }: LoopPlan, here: Extreme, asked: string): RangeCause {
  const { kind, peakForce, peakPower } = vehicle.drive;
  const ofEngine = kind === 'engine' || kind === 'variator';
  // An engine has its greatest power at one speed of the shaft: a power that it has nowhere no gear can give.
  const most = ofEngine ? here.required : peakForce;
  if (peakPower !== null && peakPower < most * here.speed)
    return { cause: 'power', why: `${asked}: the power limit of ${inKw(peakPower)} binds.` };
  const gears = vehicle.drive.gears.length > 1 ? ' in every gear' : '';
  return { cause: 'torque', why: `${asked}: the greatest force binds${gears}.` };
}

/** From the nearest lower gear down, then from the nearest higher one up. */
function otherGears(count: number, gear: number): number[] {
  const all = Array.from({ length: count }, (_, g) => g);
  return [...all.slice(0, gear).reverse(), ...all.slice(gear + 1)];
}

/** Thin air is the reason where the drive feels it; else the charge of a battery is. */
function deratingWords(
  { derate }: Drive,
  up: boolean,
  asked: string,
  there: string,
): Required<Pick<RangeCause, 'derating' | 'why'>> {
  if (derate !== 'none')
    return { derating: 'altitude', why: `${asked}; at sea level it would have ${there}, which is enough.` };
  return up
    ? { derating: 'voltage', why: `${asked}; at nominal voltage it would be ${there}, which is enough.` }
    : { derating: 'full', why: `${asked}; with room in the battery it would be ${there}, which is enough.` };
}

function gripWords(
  window: HillWindow,
  { at, required, available }: Extreme,
  ungripped: number,
  up: boolean,
): string {
  const asked = `At ${atKm(window.start + at)} the set speed needs ${inNewton(required)}`;
  const limit = `the grip of the driven wheel passes on ${inNewton(available)} of the ${inNewton(ungripped)} that ${up ? 'full' : 'the least'} throttle gives`;
  return up
    ? `${asked} and ${limit}: it would spin. The model has no slip.`
    : `${asked} and ${limit}: it would slide. The model has no slip.`;
}

function throttleWords({ vehicle: { actuator, drive } }: LoopPlan, up: boolean): string {
  const { travel } = actuator;
  if (up)
    return travel !== null && travel.greatest < drive.throttleMax
      ? 'the throttle at its end stop'
      : 'full throttle';
  return 'the least throttle';
}

export interface Extreme {
  readonly share: number;
  /** [m] of the windowed road. */
  readonly at: number;
  readonly required: number;
  readonly available: number;
  readonly speed: number;
  readonly gear: number;
}

/**
 * Greatest demand upwards (or downwards, as a positive share) between two places of a windowed plan, with a battery
 * that is cold and keeps its charge.
 *
 * @param kept gear all the way; null: that of the plan, or the best of all where the gearbox chooses
 */
export function extremeDemand(
  plan: LoopPlan,
  from: number,
  to: number,
  up: boolean,
  kept: number | null,
): Extreme {
  const { road, rider } = plan;
  const vehicle = atCharge(plan.vehicle);
  const setSpeed = setSpeedAt(road, nominalCourse(road, plan.hold, vehicle));
  const gears = plannedGears(road, vehicle.drive, rider.shifts);
  const chooses = kept === null && vehicle.drive.gearbox.kind === 'automatic';
  let found: Extreme | null = null;
  for (let i = 0; i < road.size; i++) {
    if (road.distance[i] < from || road.distance[i] > to) continue;
    const at = surroundingsBetween(road, i, 0);
    const speed = setSpeed[i];
    const derate = derateFactor(vehicle.drive, at.airDensity, at.airTemperature);
    const required = requiredForce(vehicle, speed, at);
    const gear = kept ?? gears[i];
    const range = chooses
      ? authority(vehicle, gear, speed, at, derate)
      : { ...gearAt(keptInGear(vehicle, gear), gear, speed, required, at, derate), gear, leastGear: gear };
    const signed = demandShare(required, range.least, range.greatest);
    const share = up ? signed : -signed;
    if (found === null || share > found.share)
      found = {
        share,
        at: road.distance[i],
        required,
        available: up ? range.greatest : range.least,
        speed,
        gear: up ? range.gear : range.leastGear,
      };
  }
  return found ?? { share: Number.NEGATIVE_INFINITY, at: from, required: 0, available: 0, speed: 0, gear: 0 };
}
