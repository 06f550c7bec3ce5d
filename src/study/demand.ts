import { surroundingsBetween } from '../loop/places.ts';
import type { HoldPlan, RiderPlan } from '../loop/plan.ts';
import type { Road } from '../road/road.ts';
import { fromKmh } from '../units/convert.ts';
import { derateFactor } from '../vehicle/derating.ts';
import { forceRange } from '../vehicle/drive-law.ts';
import { runawaySpeed, settledSpeed } from '../vehicle/equilibrium.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { Demand, Stretch } from './findings.ts';
import { nominalCourse, setSpeedAt } from './hold-course.ts';
import { quasiSteadySpeeds } from './quasi-steady.ts';

/** Beyond this a share says no more [1]. */
export const GREATEST_SHARE = 9.99;
/** An ideal hold this close to the set speed has it back [m/s]. */
const BACK = fromKmh(0.5);
/** Granted after that for settling [s]. */
const SETTLING = 10;

/**
 * Demand and authority along the road: the wheel force that the set speed needs against what the drive has, up and
 * down, with altitude; where that is too little, the speed that can be sustained; where even the least force is too
 * much, the speed it runs away to and the braking power that holds the set speed.
 *
 * @param road the road
 * @param vehicle with its engaged gear
 * @param hold set speed and its changes; a change at a time is placed by the set speeds before it
 * @param rider whether a brake stands by, for the ideal hold
 * @returns one value a knot, SI; `setSpeed` is true speed also where the plan's means the indicated one
 */
export function demandOf(
  road: Road,
  vehicle: Vehicle,
  hold: HoldPlan,
  rider: RiderPlan = { brakesAbove: null, shifts: [] },
): Demand {
  const course = nominalCourse(road, hold, vehicle);
  const { startSpeed, settling } = course;
  const setSpeed = setSpeedAt(road, course);
  const column = (): Float64Array => new Float64Array(road.size);
  const required = column();
  const upper = column();
  const lower = column();
  const share = column();
  const sustained = setSpeed.slice();
  const runaway = setSpeed.slice();
  const brakePower = column();
  for (let i = 0; i < road.size; i++) {
    const at = surroundingsBetween(road, i, 0);
    const range = forceRange(
      vehicle.drive,
      vehicle.drive.gear,
      setSpeed[i],
      derateFactor(vehicle.drive, at.airDensity, at.airTemperature),
    );
    required[i] = requiredForce(vehicle, setSpeed[i], at);
    upper[i] = range.greatest;
    lower[i] = range.least;
    share[i] = demandShare(required[i], lower[i], upper[i]);
    if (required[i] > upper[i])
      sustained[i] = settledSpeed(vehicle, at, vehicle.drive.throttleMax, setSpeed[i]);
    if (required[i] < lower[i]) {
      runaway[i] = runawaySpeed(vehicle, at, setSpeed[i]);
      brakePower[i] = (lower[i] - required[i]) * setSpeed[i];
    }
  }
  const ideal = quasiSteadySpeeds(
    { road, vehicle, setSpeed, brakesAbove: rider.brakesAbove, throttle: null },
    0,
    road.size - 1,
    startSpeed,
  );
  const holdable = holdableKnots(road, setSpeed, share, ideal, settling);
  return {
    setSpeed,
    required,
    upper,
    lower,
    grip: null,
    gears: [{ upper, lower, share, shaftSpeed: setSpeed }],
    gear: new Uint8Array(road.size),
    share,
    sustained,
    runaway,
    brakePower,
    ideal,
    holdable,
    holdableShare: shareOfLength(road, holdable),
    settling,
  };
}

/** Share of the range in use (Demand.share). */
export function demandShare(required: number, lower: number, upper: number): number {
  if (required >= 0) {
    // A drive whose least force pushes (a high idle) is asked for too little of it.
    if (required < lower) return -GREATEST_SHARE;
    return upper > 0 ? Math.min(GREATEST_SHARE, required / upper) : required > 0 ? GREATEST_SHARE : 0;
  }
  if (lower >= 0) return -GREATEST_SHARE;
  return Math.max(-GREATEST_SHARE, -required / lower);
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
