import { surroundingsBetween } from '../loop/places.ts';
import type { HoldPlan, RiderPlan } from '../loop/plan.ts';
import type { Road } from '../road/road.ts';
import { fromKmh } from '../units/convert.ts';
import { atCharge } from '../vehicle/at-charge.ts';
import { derateFactor } from '../vehicle/derating.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { Demand, Stretch } from './findings.ts';
import { keptInGear, plannedGears } from './gear-course.ts';
import { chosenGear, gearAt } from './gear-demand.ts';
import { greatestGrip } from './grip-places.ts';
import { nominalCourse, setSpeedAt } from './hold-course.ts';
import { quasiSteadySpeeds } from './quasi-steady.ts';
import { runawayFrom, sustainedFrom } from './settling-speed.ts';

/** An ideal hold this close to the set speed has it back [m/s]. */
const BACK = fromKmh(0.5);
/** Share of demand up to which a cell between two knots needs no look at what lies between. */
const WELL_IN_RANGE = 0.9;
/** Granted after that for settling [s]. */
const SETTLING = 10;

/**
 * Demand and authority along the road: the wheel force that the set speed needs against what the drive has in each
 * gear, up and down, with altitude, end stops of the actuator and grip; where that is too little in the gear in force,
 * the speed that can be sustained; where even the least force is too much, the speed it runs away to and the braking
 * power that holds the set speed.
 *
 * The gear in force is the one engaged, or that of the rider's plan; a gearbox that shifts by itself is taken to be in
 * the highest gear that holds, wherever its shift lines would have it. Of a battery it is taken what it gives and accepts
 * cold, at the charge of the start: for regeneration the worst case, since a full battery accepts more once it has been
 * driven on; of the force what heat and the falling voltage take on the way is a run's, not the road's.
 *
 * @param road the road
 * @param rated vehicle with the gear engaged and the charge at the start
 * @param hold set speed and its changes; a change at a time is placed by the set speeds before it
 * @param rider the plan of shifts, and whether a brake stands by, for the ideal hold
 * @returns one value a knot, SI; `setSpeed` is true speed also where the plan's means the indicated one
 */
export function demandOf(
  road: Road,
  rated: Vehicle,
  hold: HoldPlan,
  rider: RiderPlan = { brakesAbove: null, shifts: [] },
): Demand {
  const vehicle = atCharge(rated);
  const course = nominalCourse(road, hold, vehicle, rider.shifts);
  const setSpeed = setSpeedAt(road, course);
  const along = demandAlong(road, vehicle, setSpeed, plannedGears(road, vehicle.drive, rider.shifts));
  const ideal = quasiSteadySpeeds(
    {
      road,
      vehicle,
      setSpeed,
      gear: along.gear,
      brakesAbove: rider.brakesAbove,
      throttle: null,
      held: surelyHeld(setSpeed, along.share),
    },
    0,
    road.size - 1,
    course.startSpeed,
  );
  const holdable = holdableKnots(road, setSpeed, along.share, ideal, course.settling);
  return {
    setSpeed,
    ...along,
    ideal,
    holdable,
    holdableShare: shareOfLength(road, holdable),
    settling: course.following,
  };
}

type AlongRoad = Pick<
  Demand,
  | 'required'
  | 'upper'
  | 'lower'
  | 'grip'
  | 'gears'
  | 'gear'
  | 'share'
  | 'sustained'
  | 'runaway'
  | 'brakePower'
>;

function demandAlong(road: Road, vehicle: Vehicle, setSpeed: Float64Array, planned: Uint8Array): AlongRoad {
  const { drive } = vehicle;
  const chooses = drive.gearbox.kind === 'automatic';
  const gear = planned.slice();
  const inGears = drive.gears.map((_, g) => keptInGear(vehicle, g));
  const column = (): Float64Array => new Float64Array(road.size);
  const gears = drive.gears.map(() => ({
    upper: column(),
    lower: column(),
    share: column(),
    shaftSpeed: column(),
  }));
  const required = column();
  const [upper, lower, share, brakePower] = [column(), column(), column(), column()];
  const [sustained, runaway] = [setSpeed.slice(), setSpeed.slice()];
  const grip = vehicle.traction === null ? null : column();
  for (let i = 0; i < road.size; i++) {
    const at = surroundingsBetween(road, i, 0);
    const speed = setSpeed[i];
    const derate = derateFactor(drive, at.airDensity, at.airTemperature);
    required[i] = requiredForce(vehicle, speed, at);
    if (grip !== null) grip[i] = greatestGrip(vehicle, at.grade);
    for (let g = 0; g < gears.length; g++) {
      const one = gearAt(inGears[g], g, speed, required[i], at, derate);
      gears[g].upper[i] = one.greatest;
      gears[g].lower[i] = one.least;
      gears[g].share[i] = one.share;
      gears[g].shaftSpeed[i] = one.shaftSpeed;
    }
    if (chooses) {
      const shares = gears.map((one) => one.share[i]);
      gear[i] = chosenGear(vehicle, speed, shares);
    }
    const inForce = gears[gear[i]];
    upper[i] = inForce.upper[i];
    lower[i] = inForce.lower[i];
    share[i] = inForce.share[i];
    const here = chooses ? vehicle : inGears[gear[i]];
    if (share[i] > 1) sustained[i] = sustainedFrom(here, at, speed);
    if (required[i] < lower[i]) {
      runaway[i] = runawayFrom(here, at, speed);
      brakePower[i] = (lower[i] - required[i]) * speed;
    }
  }
  return { required, upper, lower, grip, gears, gear, share, sustained, runaway, brakePower };
}

/** Cells at one set speed whose demand is well in range at both ends: a hold at the set speed loses nothing there. */
function surelyHeld(setSpeed: Float64Array, share: Float64Array): Uint8Array {
  const held = new Uint8Array(share.length);
  for (let i = 0; i + 1 < share.length; i++)
    if (
      setSpeed[i] === setSpeed[i + 1] &&
      Math.abs(share[i]) <= WELL_IN_RANGE &&
      Math.abs(share[i + 1]) <= WELL_IN_RANGE
    )
      held[i] = 1;
  return held;
}

function holdableKnots(
  road: Road,
  setSpeed: Float64Array,
  share: Float64Array,
  ideal: Float64Array,
  settling: readonly Stretch[],
): Uint8Array {
  const holdable = new Uint8Array(road.size);
  let freeFrom = 0;
  for (let i = 0; i < road.size; i++) {
    const x = road.distance[i];
    const out = Math.abs(share[i]) > 1 || Math.abs(ideal[i] - setSpeed[i]) > BACK;
    if (out) freeFrom = x + SETTLING * setSpeed[i];
    const following = settling.some(({ from, to }) => x >= from && x < to);
    holdable[i] = !out && x >= freeFrom && !following ? 1 : 0;
  }
  return holdable;
}

/** Share of the road's length between two knots of which both are marked. */
function shareOfLength(road: Road, marks: Uint8Array): number {
  let marked = 0;
  for (let i = 0; i + 1 < road.size; i++)
    if (marks[i] === 1 && marks[i + 1] === 1) marked += road.distance[i + 1] - road.distance[i];
  const length = road.distance[road.size - 1] - road.distance[0];
  return length > 0 ? marked / length : 0;
}
