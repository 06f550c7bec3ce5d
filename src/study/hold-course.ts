import type { ControllerSetup } from '../control/setup.ts';
import type { HoldPlan, LoopPlan, RiderPlan, SetSpeedChange } from '../loop/plan.ts';
import type { BinRecord, HoldEvent, LoopResult } from '../loop/result.ts';
import { intervalOf } from '../numeric/interpolate.ts';
import { distanceAt } from '../road/lookup.ts';
import type { Road } from '../road/road.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { Stretch } from './findings.ts';
import { holdOff, isByRule } from './hold-off.ts';

/** Rate at which a change of set speed is granted to be followed when neither it nor the controller says one [m/s2]. */
const GRANTED_RATE = 0.5;
/** Granted for settling after it [s]. */
export const GRANTED_SETTLING = 10;

/** The set speed in the order of the way, as true speeds [m/s]. */
export interface HoldCourse {
  /** In force before the first change. */
  readonly setSpeed: number;
  /** Speed at the start. */
  readonly startSpeed: number;
  /** Changes with their places [m]; infinite for one that was never made. */
  readonly changes: readonly { readonly at: number; readonly setSpeed: number }[];
  /**
   * From each change, and from a start at another speed: |change| / ramp and 10 s for settling, at the higher of the
   * two speeds. The ramp is the change's own, or the controller's, or 0.5 m/s2. And from each shift of the rider's,
   * which cancels hold, to 10 s after hold resumes. Of a run also where hold was off, or overridden by the grip, to 10 s
   * after it is back at the set speed by its ramp. In order along the way.
   */
  readonly settling: readonly Stretch[];
  /** Of those the changes of set speed alone, a start at another speed first. */
  readonly following: readonly Stretch[];
  /** Of a run in which the rider changed the set speed: the plan's hold with those changes among its own. */
  readonly hold?: HoldPlan;
  /** Of a run: where a rule of the unit ended hold, in order [m]. */
  readonly gaveUp?: readonly number[];
}

/** Factor from speeds of the plan's set speed to true ones: measured = (1 + scale error) true. */
export const trueSpeedFactor = (hold: HoldPlan, { sensor }: Pick<Vehicle, 'sensor'>): number =>
  hold.setSpeedIs === 'indicated' ? 1 / (1 + sensor.scaleError) : 1;

/**
 * The course that belongs to the road: a change at a time stands where a vehicle at the set speeds before it would be,
 * and a shift of the rider's takes the time that the gearbox says, at the set speed.
 */
export function nominalCourse(
  road: Road,
  hold: HoldPlan,
  vehicle: Pick<Vehicle, 'sensor'> & Partial<Pick<Vehicle, 'drive'>>,
  shifts: RiderPlan['shifts'] = [],
): HoldCourse {
  const course = courseOf(hold, vehicle, null, (time, last) => {
    const at = road.along === 'time' ? distanceAt(road, time) : last.at + (time - last.time) * last.setSpeed;
    return { at, from: at };
  });
  const gearbox = vehicle.drive?.gearbox;
  if (gearbox?.kind !== 'clutch') return course;
  const seconds = gearbox.open + gearbox.resume + GRANTED_SETTLING;
  return withStretches(
    course,
    shifts.map(({ distance }) => ({ from: distance, to: distance + seconds * speedAt(course, distance) })),
  );
}

/** Set speed in force at a place [m/s]. */
const speedAt = ({ setSpeed, changes }: HoldCourse, place: number): number =>
  changes.findLast(({ at }) => at <= place)?.setSpeed ?? setSpeed;

const withStretches = (course: HoldCourse, more: readonly Stretch[]): HoldCourse => ({
  ...course,
  settling: [...course.settling, ...more].sort((a, b) => a.from - b.from),
});

/** What the course of a run is told by. */
interface PlannedRun {
  readonly plan: Pick<LoopPlan, 'hold' | 'vehicle' | 'controller' | 'supervisor'>;
  readonly result: LoopResult;
}

/** The course of one candidate: a change at a time stands where its run made it, its controller's ramp is granted, and hold resumes when it did. */
export function courseOfRun(run: PlannedRun): HoldCourse {
  const { plan, result } = run;
  const ramp = rampOf(plan.controller);
  const hold = riddenHold(run);
  const course = {
    ...courseOf(hold, plan.vehicle, ramp, (time) => placeInRun(result, time)),
    ...(hold === plan.hold ? {} : { hold }),
  };
  const shifts = result.shifts.flatMap(({ distance, resumedAt }) => {
    if (resumedAt === null) return [];
    const { at } = placeInRun(result, resumedAt);
    const resumed = Number.isFinite(at) ? at : result.endDistance;
    return [{ from: distance, to: resumed + GRANTED_SETTLING * speedAt(course, distance) }];
  });
  const apart = [...shifts, ...withoutHold(run)];
  if (apart.length === 0) return course;
  const gaveUp = (result.holdEvents ?? []).filter((event) => event.kind === 'ended' && isByRule(event));
  return { ...withStretches(course, apart), gaveUp: gaveUp.map(({ distance }) => distance) };
}

/** The hold of the plan with the set speeds that taps and engaging made on the way; the plan's own where there are none. */
function riddenHold({ plan, result }: PlannedRun): HoldPlan {
  const { hold, supervisor } = plan;
  const { holdEvents = [] } = result;
  const placeOf = ({ at }: SetSpeedChange): number =>
    'distance' in at ? at.distance : placeInRun(result, at.time).at;
  let inForce = hold.setSpeed;
  let next = 0;
  const made: SetSpeedChange[] = [];
  for (const { kind, distance, setSpeed } of holdEvents) {
    if (kind !== 'tapped' && kind !== 'engaged' && kind !== 'resumed') continue;
    while (next < hold.changes.length && placeOf(hold.changes[next]) <= distance)
      inForce = hold.changes[next++].setSpeed;
    if (setSpeed !== inForce) made.push({ at: { distance }, setSpeed, ramp: supervisor?.tapRamp ?? null });
    inForce = setSpeed;
  }
  return made.length === 0 ? hold : { ...hold, changes: changesInOrder(hold.changes, made, placeOf) };
}

/** Changes of a plan and those made on the way, along the way: of a plan's by time the place is told by `placeOf`. */
export function changesInOrder(
  planned: readonly SetSpeedChange[],
  made: readonly SetSpeedChange[],
  placeOf: (change: SetSpeedChange) => number,
): SetSpeedChange[] {
  const all: SetSpeedChange[] = [];
  let next = 0;
  for (const change of planned) {
    while (next < made.length && placeOf(made[next]) < placeOf(change)) all.push(made[next++]);
    all.push(change);
  }
  return [...all, ...made.slice(next)];
}

/** Where hold was off or overridden, and what it takes to be back. */
function withoutHold({ plan, result }: PlannedRun): Stretch[] {
  const toTrue = trueSpeedFactor(plan.hold, plan.vehicle);
  const own = rampOf(plan.controller) ?? GRANTED_RATE;
  const followed = ({ distance, setSpeed, measured }: HoldEvent, ramp: number): Stretch => {
    const seconds = Math.abs(setSpeed - measured) / ramp + GRANTED_SETTLING;
    return { from: distance, to: distance + seconds * Math.max(setSpeed, measured) * toTrue };
  };
  const { holdEvents = [] } = result;
  const stretches: Stretch[] = holdOff(plan, result).map(({ from, to }) => ({ from, to }));
  let grip: number | null = null;
  for (const event of holdEvents) {
    if (event.kind === 'engaged' || event.kind === 'resumed')
      stretches.push(followed(event, plan.supervisor?.resumeRamp ?? own));
    else if (event.kind === 'override_began') grip = event.distance;
    else if (grip !== null && (event.kind === 'reentered' || event.kind === 'ended')) {
      const behind = event.kind === 'ended' ? event.distance : followed(event, own).to;
      stretches.push({ from: grip, to: behind });
      grip = null;
    }
  }
  if (grip !== null) stretches.push({ from: grip, to: result.endDistance });
  return stretches;
}

const rampOf = (controller: ControllerSetup): number | null =>
  controller.kind === 'locked' ? null : controller.ramp;

/** Place of a time, and a place that is certainly not behind it: the beginning of its bin. */
interface TimedPlace {
  readonly at: number;
  readonly from: number;
}

/** Where a run was at a time from its start; infinite where it had ended [m]. */
export function placeInRun({ bins, endTime, endDistance }: LoopResult, time: number): TimedPlace {
  if (time >= endTime || bins.size === 0)
    return { at: Number.POSITIVE_INFINITY, from: Number.POSITIVE_INFINITY };
  const i = intervalOf(bins.timeAt.subarray(0, bins.size), time);
  return { at: Math.min(placeInBin(bins, i, time), endDistance), from: bins.edge[i] };
}

function placeInBin({ edge, timeAt, time }: BinRecord, i: number, moment: number): number {
  const share = time[i] > 0 ? Math.min(1, (moment - timeAt[i]) / time[i]) : 0;
  return edge[i] + Math.max(0, share) * (edge[i + 1] - edge[i]);
}

interface Reached {
  readonly at: number;
  readonly time: number;
  readonly setSpeed: number;
}

function courseOf(
  hold: HoldPlan,
  vehicle: Pick<Vehicle, 'sensor'>,
  ramp: number | null,
  placeOf: (time: number, last: Reached) => TimedPlace,
): HoldCourse {
  const toTrue = trueSpeedFactor(hold, vehicle);
  const setSpeed = hold.setSpeed * toTrue;
  const startSpeed = hold.startSpeed * toTrue;
  const changes: { at: number; setSpeed: number }[] = [];
  const settling: Stretch[] = [];
  const grant = (from: number, at: number, before: number, after: number, own: number | null): void => {
    const seconds = Math.abs(after - before) / (own ?? ramp ?? GRANTED_RATE) + GRANTED_SETTLING;
    settling.push({ from, to: at + seconds * Math.max(before, after) });
  };
  if (startSpeed !== setSpeed) grant(0, 0, startSpeed, setSpeed, null);
  let last: Reached = { at: 0, time: 0, setSpeed };
  for (const change of hold.changes) {
    const next = change.setSpeed * toTrue;
    const place =
      'distance' in change.at
        ? { at: change.at.distance, from: change.at.distance }
        : placeOf(change.at.time, last);
    // Changes are made in their order, none before the one that stands before it.
    const at = Math.max(place.at, last.at);
    const passed = last.setSpeed > 0 ? (at - last.at) / last.setSpeed : 0;
    changes.push({ at, setSpeed: next });
    grant(Math.min(place.from, at), at, last.setSpeed, next, change.ramp);
    last = { at, time: last.time + passed, setSpeed: next };
  }
  return { setSpeed, startSpeed, changes, settling, following: settling };
}

/** Set speed at each knot, or at each place of another list; at the place of a change the new one [m/s]. */
export function setSpeedAt(
  road: Pick<Road, 'size' | 'distance'>,
  { setSpeed, changes }: HoldCourse,
): Float64Array {
  const column = new Float64Array(road.size);
  let k = -1;
  for (let i = 0; i < road.size; i++) {
    while (k + 1 < changes.length && changes[k + 1].at <= road.distance[i]) k++;
    column[i] = k < 0 ? setSpeed : changes[k].setSpeed;
  }
  return column;
}
