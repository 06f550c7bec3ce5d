import { surroundingsBetween } from '../loop/places.ts';
import type { Road } from '../road/road.ts';
import { derateFactor } from '../vehicle/derating.ts';
import { forceRange, wheelForce } from '../vehicle/drive-law.ts';
import { effectiveMass } from '../vehicle/linearise.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';

/** Longest step along the slope [m]. */
const STEP = 10;
/** Below this the vehicle has stopped, for a hand formula [m/s]. */
const STANDSTILL = 0.5;

export interface QuasiSteadyPlan {
  readonly road: Road;
  readonly vehicle: Vehicle;
  /** Set speed as true speed, knot by knot of the road [m/s]. */
  readonly setSpeed: Float64Array;
  /** The rider brakes to hold this overspeed [m/s]; null: no brake. */
  readonly brakesAbove: number | null;
  /** Throttle locked in place; null: an ideal hold. */
  readonly throttle: number | null;
}

/**
 * The hand formula: quasi-steady force deficit plus momentum along the way,
 *
 *     d(v^2) = 2 (F - F_required(v)) ds / m_e,
 *
 * where F is what an ideal hold would give: whatever keeps the set speed while that is in the drive's range, full
 * throttle below the set speed, the least force above it; or the force of a throttle locked in place. No controller,
 * lag, rate or sampling is in it, so no design can do better, and the difference to a design is the design's own.
 * Work and energy along a path: any mechanics textbook; the deficit form is how truck climbing lanes are laid out
 * (AASHTO, A Policy on Geometric Design of Highways and Streets, speed-distance curves, from memory).
 *
 * Steps of at most 10 m along the slope by Heun's rule in v^2; exact for a constant deficit.
 *
 * @param from first knot; `entrySpeed` [m/s] is the speed there
 * @param to last knot, >= from
 * @returns speed at knots from..to [m/s]; 0 from where it comes to a stop
 */
export function quasiSteadySpeeds(
  plan: QuasiSteadyPlan,
  from: number,
  to: number,
  entrySpeed: number,
): Float64Array {
  const { road, vehicle, setSpeed } = plan;
  const speeds = new Float64Array(to - from + 1);
  const mass = effectiveMass(vehicle);
  let v = entrySpeed;
  speeds[0] = v;
  for (let i = from; i < to; i++) {
    const timed = road.along === 'time';
    const span = road.station[i + 1] - road.station[i];
    const steps = Math.max(1, Math.ceil((timed ? span * setSpeed[i] : span) / STEP));
    for (let k = 0; k < steps && span > 0 && v > 0; k++) {
      // Along time the way of a step depends on the speed; its beginning is near enough for a step of this length.
      const ds = timed ? (v * span) / steps : span / steps;
      const here = surroundingsBetween(road, i, k / steps);
      const next = surroundingsBetween(road, i, (k + 1) / steps);
      v = oneStep(plan, mass, v, setSpeed[i], ds, here, next);
    }
    speeds[i + 1 - from] = v;
  }
  return speeds;
}

function oneStep(
  plan: QuasiSteadyPlan,
  mass: number,
  v: number,
  target: number,
  ds: number,
  here: Surroundings,
  next: Surroundings,
): number {
  const { vehicle, throttle, brakesAbove } = plan;
  const { drive } = vehicle;
  /** Speed after the step under full, least or locked throttle. */
  const after = (force: (speed: number, derate: number) => number): number => {
    const slope = (speed: number, at: Surroundings): number =>
      (2 *
        (force(speed, derateFactor(drive, at.airDensity, at.airTemperature)) -
          requiredForce(vehicle, speed, at))) /
      mass;
    const first = slope(v, here);
    const trial = Math.sqrt(Math.max(STANDSTILL * STANDSTILL, v * v + ds * first));
    const square = v * v + (ds * (first + slope(trial, next))) / 2;
    return square > STANDSTILL * STANDSTILL ? Math.sqrt(square) : 0;
  };
  if (throttle !== null)
    return braked(
      after((speed, derate) => wheelForce(drive, drive.gear, speed, throttle, derate)),
      target,
      brakesAbove,
    );
  const most = after((speed, derate) => forceRange(drive, drive.gear, speed, derate).greatest);
  if (most <= target) return most;
  const least = after((speed, derate) => forceRange(drive, drive.gear, speed, derate).least);
  return braked(Math.max(least, target), target, brakesAbove);
}

const braked = (speed: number, target: number, above: number | null): number =>
  above === null ? speed : Math.min(speed, target + above);
