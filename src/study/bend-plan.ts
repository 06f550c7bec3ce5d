import type { SupervisorSetup } from '../control/supervisor-setup.ts';
import type { HoldPlan, RiderAct, RiderPlan } from '../loop/plan.ts';
import type { Bend } from '../road/bend.ts';
import { BEND_RESOLUTION, bendsOf } from '../road/bends.ts';
import type { Road } from '../road/road.ts';
import { fromKmh } from '../units/convert.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { askedHold } from './asked-hold.ts';
import type { Stretch } from './findings.ts';
import { type HoldCourse, nominalCourse } from './hold-course.ts';
import { type Gaining, gainedAt } from './way-to-gain.ts';

/** The vehicle may come to a bend this much faster than the set speed and still be slow enough at its beginning [m/s]. */
const SPARE = fromKmh(5);
/** Slower by less than this is no reason to brake again [m/s]. */
const SAME = fromKmh(0.5);

/** Behind a bend that is slower than the unit holds the rider gains speed by hand at this, where the drive has it [m/s2]: an assumption. */
const GAINS = 1;

/** How the rider rides bends. SI. */
export interface BendRiding {
  /** Greatest lateral acceleration [m/s2]. */
  readonly maxLateral: number;
  /** [m/s2] */
  readonly deceleration: number;
  /** From the end of a bend to where the rider resumes [s], at the speed of the bend. */
  readonly resumesAfter: number;
  /** Between bends nearer than this [s at the set speed] the rider does not resume. */
  readonly shortestHold: number;
}

/** A stretch that the rider rides by hand because of bends: from where they brake to where they resume. */
export interface BendStop extends Stretch {
  /** The bends in it: indices into the list, the last one included. */
  readonly first: number;
  readonly last: number;
  /** True speed to which the rider brakes for each of them, not above what it allows [m/s]. */
  readonly speeds: readonly number[];
  /** Where the rider, too slow for the unit to take over, gains the set speed by hand [m]; null: hold can be resumed from the bend's speed. */
  readonly gainsFrom: number | null;
  /** The rider resumes at `to`; false: the road ends, or what is written says otherwise. */
  readonly resumes: boolean;
}

/** Where speed hold does not belong. */
export interface UnfitPlace extends Stretch {
  /** `bends_follow`: bends so near to each other that hold would not be worth resuming; `below_lowest`: a bend slower than the unit holds. */
  readonly reason: 'bends_follow' | 'below_lowest';
  /** Bends in it. */
  readonly bends: number;
  /** Lowest speed in it, true [m/s]. */
  readonly lowestSpeed: number;
}

/** What bends ask of the rider. */
export interface BendPlan {
  readonly riding: BendRiding;
  /** Curves shorter than this are not told apart [m]. */
  readonly resolution: number;
  readonly bends: readonly Bend[];
  readonly stops: readonly BendStop[];
  readonly unfit: readonly UnfitPlace[];
  /** Acts that are written within a stop, indices into the written acts: they are done as written. */
  readonly written: readonly number[];
}

/** What the bends of a ride are planned from. */
export interface BendRide {
  readonly road: Road;
  readonly vehicle: Vehicle;
  readonly hold: HoldPlan;
  /** With what is written, and not yet with bends. */
  readonly rider: RiderPlan;
  /** Left out: a unit without rules and taps. */
  readonly unit?: Pick<SupervisorSetup, 'lowestSpeed' | 'tap' | 'tapRamp'>;
}

/**
 * Where the set speed is more than a bend allows, the rider brakes for it, which ends hold, rides through by hand, and
 * resumes behind it.
 *
 * 1. Bends are found at the true set speed (bendsOf).
 * 2. From the last to the first, each is ridden no faster than what lets the next be reached at its speed with the
 *    rider's deceleration from the end of this one.
 * 3. Bends with less than the shortest hold between resuming and braking again are one stop: the rider stays on the
 *    throttle, at the lowest speed so far, and brakes again where a bend asks for less.
 * 4. Behind a bend slower than the unit holds the rider first gains the set speed by hand, at 1 m/s2 or as the drive can (gainedAt).
 * 5. Braking begins so early that a vehicle 5 km/h above the set speed is slow enough at the beginning of the bend.
 *
 * Written acts come first: they stay where they are, inside of a stop too. A bend's resume is left out where hold was
 * off by what is written before the stop, or something written within it ends hold.
 *
 * @param ride all written acts placed by distance
 * @returns the plan, and the ride's acts with those of the bends, in order along the way
 */
export function planBends(
  ride: BendRide,
  riding: BendRiding,
): { readonly plan: BendPlan; readonly acts: readonly RiderAct[] } {
  const { road, vehicle, hold, rider } = ride;
  const asked = askedHold(hold, rider, ride.unit ?? {}, vehicle);
  const course = nominalCourse(road, asked, vehicle, rider.shifts);
  const speedAt = speedOf(course);
  const bends = bendsOf(road, riding.maxLateral, speedAt);
  const speeds = reachable(bends, riding.deceleration);
  const end = road.distance[road.size - 1]!;
  const lowest = (ride.unit?.lowestSpeed ?? 0) / (1 + vehicle.sensor.scaleError);
  const gaining = {
    road,
    vehicle,
    shifts: rider.shifts,
    acceleration: GAINS,
    goalAt: speedAt,
    enough: lowest + SAME,
  };
  const groups = grouped(bends, speeds, { ...riding, speedAt, end, gaining });
  const written = rider.acts ?? [];
  const stops = groups.map((group): BendStop => {
    const { to, first, last } = group;
    return {
      ...group,
      speeds: speeds.slice(first, last + 1),
      resumes: to < end && resumesHold(written, hold.starts !== 'by_hand', group),
    };
  });
  const plan: BendPlan = {
    riding,
    resolution: BEND_RESOLUTION,
    bends,
    stops,
    unfit: stops.flatMap((stop) => unfitPlace(stop, lowest)),
    written: written.flatMap((act, i) =>
      stops.some(({ from, to }) => placeOf(act) >= from && placeOf(act) < to) ? [i] : [],
    ),
  };
  const acts = [
    ...written.map((act) => ({ act, order: 0 })),
    ...stops.flatMap((stop) => actsOf(stop, bends, riding, speedAt)).map((act) => ({ act, order: 1 })),
  ].sort((a, b) => placeOf(a.act) - placeOf(b.act) || a.order - b.order);
  return { plan, acts: acts.map(({ act }) => act) };
}

const placeOf = ({ at }: RiderAct): number => ('distance' in at ? at.distance : Number.POSITIVE_INFINITY);

/** True speed that is asked for at a place: at the start no less than the start speed [m/s]. */
function speedOf({ setSpeed, changes }: HoldCourse): (distance: number) => number {
  return (distance) => changes.findLast(({ at }) => at <= distance)?.setSpeed ?? setSpeed;
}

/** Speeds from which each next bend can be reached [m/s]. */
function reachable(bends: readonly Bend[], deceleration: number): number[] {
  const speeds = bends.map(({ speed }) => speed);
  for (let i = bends.length - 2; i >= 0; i--) {
    const way = bends[i + 1]!.from - bends[i]!.to;
    const before = Math.sqrt(speeds[i + 1]! * speeds[i + 1]! + 2 * deceleration * Math.max(0, way));
    speeds[i] = Math.min(speeds[i]!, before);
  }
  return speeds;
}

/** Where braking from one speed begins, to have another at a place; not before the road [m]. */
const brakingFrom = (place: number, from: number, to: number, deceleration: number): number =>
  Math.max(0, place - Math.max(0, from * from - to * to) / (2 * deceleration));

/** Speed at which a bend may be come to: the set speed where it begins, or in force on the way there, and some to spare [m/s]. */
function approach(bend: Bend, speed: number, deceleration: number, speedAt: (x: number) => number): number {
  const near = speedAt(bend.from);
  const from = brakingFrom(bend.from, near + SPARE, speed, deceleration);
  return Math.max(near, speedAt(from)) + SPARE;
}

type Group = Stretch & Pick<BendStop, 'first' | 'last' | 'gainsFrom'>;

/** What decides which bends are one stop. */
interface Grouping extends BendRiding {
  readonly speedAt: (distance: number) => number;
  /** Of the road [m]. */
  readonly end: number;
  readonly gaining: Gaining;
}

function grouped(bends: readonly Bend[], speeds: readonly number[], grouping: Grouping): Group[] {
  const { deceleration, shortestHold, speedAt } = grouping;
  const groups: Group[] = [];
  let inHand = Number.POSITIVE_INFINITY;
  bends.forEach((bend, i) => {
    const speed = speeds[i]!;
    const from = brakingFrom(bend.from, approach(bend, speed, deceleration, speedAt), speed, deceleration);
    const before = groups.at(-1);
    const joins = before !== undefined && from - before.to < shortestHold * speedAt(before.to);
    inHand = joins ? Math.min(inHand, speed) : speed;
    const behind = { ...resumeBehind(bend, bends[i + 1] ?? null, inHand, grouping), last: i };
    if (joins) groups[groups.length - 1] = { ...before, ...behind };
    else groups.push({ from, first: i, ...behind });
  });
  return groups;
}

/** Where the rider resumes behind a bend with a speed in hand, and where they gain speed for it. */
function resumeBehind(
  bend: Bend,
  next: Bend | null,
  inHand: number,
  { resumesAfter, end, gaining }: Grouping,
): Pick<Group, 'to' | 'gainsFrom'> {
  const place = bend.to + resumesAfter * inHand;
  if (inHand >= gaining.enough) return { to: Math.min(end, place), gainsFrom: null };
  const gainsFrom = Math.min(end, place);
  // What is not gained before the next bend makes one stop with it.
  const until = Math.max(gainsFrom, Math.min(end, next?.from ?? end));
  return { to: gainedAt(gaining, gainsFrom, until, inHand), gainsFrom };
}

/** Whether hold was on before a stop by what is written, and nothing written in it ends hold. */
function resumesHold(written: readonly RiderAct[], startsOn: boolean, { from, to }: Stretch): boolean {
  let on = startsOn;
  for (const act of written) {
    if (placeOf(act) >= to) break;
    if (act.does.kind === 'engage' || act.does.kind === 'resume') on = true;
    else if (act.does.kind !== 'tap' && act.does.kind !== 'override') on = false;
    if (placeOf(act) >= from && !on) return false;
  }
  return on;
}

/** Brakings of a stop, each for a bend that asks for less than before, and the resume. */
function actsOf(
  { to, first, speeds, gainsFrom, resumes }: BendStop,
  bends: readonly Bend[],
  { deceleration }: BendRiding,
  speedAt: (x: number) => number,
): RiderAct[] {
  const acts: RiderAct[] = [];
  let inHand = Number.POSITIVE_INFINITY;
  speeds.forEach((speed, k) => {
    if (speed > inHand - SAME) return;
    const bend = bends[first + k]!;
    const comes = Math.min(inHand, approach(bend, speed, deceleration, speedAt));
    acts.push({
      at: { distance: brakingFrom(bend.from, comes, speed, deceleration) },
      does: { kind: 'brake', to: speed, deceleration },
      reason: 'bend',
    });
    inHand = speed;
  });
  if (resumes && gainsFrom !== null)
    acts.push({
      at: { distance: gainsFrom },
      does: { kind: 'ride', to: speedAt(to), acceleration: GAINS },
      reason: 'bend',
    });
  if (resumes) acts.push({ at: { distance: to }, does: { kind: 'resume' }, reason: 'bend' });
  return acts;
}

function unfitPlace({ from, to, first, last, speeds }: BendStop, lowest: number): UnfitPlace[] {
  const bends = last - first + 1;
  const lowestSpeed = speeds.reduce((least, speed) => Math.min(least, speed), Number.POSITIVE_INFINITY);
  if (lowestSpeed < lowest) return [{ from, to, reason: 'below_lowest', bends, lowestSpeed }];
  return bends > 1 ? [{ from, to, reason: 'bends_follow', bends, lowestSpeed }] : [];
}
