import { surroundingsBetween } from '../loop/places.ts';
import type { Road } from '../road/road.ts';
import { authority } from '../vehicle/authority.ts';
import { derateFactor } from '../vehicle/derating.ts';
import { wheelForce } from '../vehicle/drive-law.ts';
import { effectiveMass } from '../vehicle/linearise.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { inGear, keptInGear } from './gear-course.ts';

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
  /** Gear in force, knot by knot; the engaged one all the way where it is left out. An ideal hold with a gearbox that shifts by itself has the best of all gears at every speed. */
  readonly gear?: Uint8Array;
  /** 1 for each cell, by its first knot, in which an ideal hold that is at the set speed surely stays there. */
  readonly held?: Uint8Array;
}

/**
 * The hand formula: quasi-steady force deficit plus momentum along the way,
 *
 *     d(v^2) = 2 (F - F_required(v)) ds / m_e,
 *
 * where F is what an ideal hold would give: whatever keeps the set speed while that is in the drive's range, full
 * throttle below the set speed, the least force above it, both within end stops and grip; or the force of a throttle
 * locked in place. No controller, lag, rate or sampling is in it, so no design can do better, and the difference to a
 * design is the design's own. The effective mass is that of the gear in force. Shifts take no time and no energy here:
 * the speed that an open clutch loses is not in it, nor what voltage and heat take away, and a belt is at rest at every
 * speed.
 *
 * Work and energy along a path: any mechanics textbook; the deficit form is how truck climbing lanes are laid out
 * (AASHTO, A Policy on Geometric Design of Highways and Streets, speed-distance curves, from memory).
 *
 * Steps of at most 10 m along the slope by Heun's rule in v^2; exact for a constant deficit.
 *
 * @param from first knot; `entrySpeed` [m/s] is the speed there
 * @param to last knot, >= from
 * @returns speed at knots from..to [m/s]; 0 from where it comes to a stop, and the last speed at which the gear turned
 * from where it can turn no longer
 */
export function quasiSteadySpeeds(
  plan: QuasiSteadyPlan,
  from: number,
  to: number,
  entrySpeed: number,
): Float64Array {
  const { road, vehicle, setSpeed, gear, held } = plan;
  const inGears = vehicle.drive.gears.map((_, g) =>
    (plan.throttle === null ? inGear : keptInGear)(vehicle, g),
  );
  const speeds = new Float64Array(to - from + 1);
  let v = entrySpeed;
  speeds[0] = v;
  let stalled = false;
  for (let i = from; i < to; i++) {
    if (held?.[i] === 1 && v === setSpeed[i]) {
      speeds[i + 1 - from] = v;
      continue;
    }
    const geared = inGears[gear?.[i] ?? vehicle.drive.gear];
    const slowest = slowestOf(geared);
    const timed = road.along === 'time';
    const span = road.station[i + 1] - road.station[i];
    const steps = Math.max(1, Math.ceil((timed ? span * setSpeed[i] : span) / STEP));
    for (let k = 0; k < steps && span > 0 && v > 0 && !stalled; k++) {
      // Along time the way of a step depends on the speed; its beginning is near enough for a step of this length.
      const ds = timed ? (v * span) / steps : span / steps;
      const here = surroundingsBetween(road, i, k / steps);
      const next = surroundingsBetween(road, i, (k + 1) / steps);
      v = oneStep(plan, geared, v, setSpeed[i], ds, here, next);
      stalled = v < slowest;
      if (stalled) v = slowest;
    }
    speeds[i + 1 - from] = v;
  }
  return speeds;
}

/** Speed below which the gear, or the lowest of a gearbox that shifts by itself, turns no longer [m/s]. */
function slowestOf({ drive: { gears, gear, gearbox, belt, stallSpeed } }: Vehicle): number {
  if (belt !== null) return stallSpeed / belt.greatest;
  return stallSpeed / gears[gearbox.kind === 'automatic' ? 0 : gear].ratio;
}

function oneStep(
  { throttle, brakesAbove }: QuasiSteadyPlan,
  vehicle: Vehicle,
  v: number,
  target: number,
  ds: number,
  here: Surroundings,
  next: Surroundings,
): number {
  const { drive } = vehicle;
  /** Speed after the step under full, least or locked throttle. */
  const after = (throttleThen: number, force: (speed: number, at: Surroundings) => GearForce): number => {
    const slope = (speed: number, at: Surroundings): number => {
      const { gear, newton } = force(speed, at);
      const mass = effectiveMass(vehicle, speed, throttleThen, gear);
      return (2 * (newton - requiredForce(vehicle, speed, at))) / mass;
    };
    const first = slope(v, here);
    const trial = Math.sqrt(Math.max(STANDSTILL * STANDSTILL, v * v + ds * first));
    const square = v * v + (ds * (first + slope(trial, next))) / 2;
    return square > STANDSTILL * STANDSTILL ? Math.sqrt(square) : 0;
  };
  if (throttle !== null) {
    const locked = (speed: number, at: Surroundings): GearForce => ({
      gear: drive.gear,
      newton: wheelForce(
        drive,
        drive.gear,
        speed,
        throttle,
        derateFactor(drive, at.airDensity, at.airTemperature),
      ),
    });
    return braked(after(throttle, locked), target, brakesAbove);
  }
  const range = throttleRange(vehicle);
  const most = after(range.greatest, (speed, at) => {
    const { greatest, gear } = authority(vehicle, drive.gear, speed, at);
    return { gear, newton: greatest };
  });
  if (most <= target) return most;
  const least = after(range.least, (speed, at) => {
    const { least: newton, leastGear } = authority(vehicle, drive.gear, speed, at);
    return { gear: leastGear, newton };
  });
  return braked(Math.max(least, target), target, brakesAbove);
}

interface GearForce {
  readonly gear: number;
  readonly newton: number;
}

const braked = (speed: number, target: number, above: number | null): number =>
  above === null ? speed : Math.min(speed, target + above);
