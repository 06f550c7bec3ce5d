import { beltRatio } from './belt-law.ts';
import { type BeltMotion, beltMotion } from './belt-motion.ts';
import { derateFactor } from './derating.ts';
import { throttleFor, wheelForceSlopes } from './drive-law.ts';
import { requiredForce, resistanceSlopes } from './resistance.ts';
import type { Surroundings } from './surroundings.ts';
import type { Vehicle } from './vehicle.ts';

/** Where a vehicle is linearised: it holds this speed steadily in these surroundings. */
export interface OperatingPoint {
  /** [m/s], > 0 */
  readonly speed: number;
  readonly surroundings: Surroundings;
}

/**
 * The vehicle near an operating point, in deviations from it:
 * dv/dt = a v + b u + gradeGain grade + headwindGain headwind + crosswindGain crosswind,
 * u being what the actuator and the drive's lag pass on.
 */
export interface LinearVehicle {
  readonly speed: number;
  /** Throttle that holds the operating point; outside of the drive's range where the point cannot be held. */
  readonly throttle: number;
  /** The throttle is within the drive's range. */
  readonly feasible: boolean;
  /** [1/s], negative where a locked throttle is stable. */
  readonly a: number;
  /** [m/s2] for a throttle of 1. */
  readonly b: number;
  /** [m/s2] for a grade of 1 (a ratio, not an angle); negative. */
  readonly gradeGain: number;
  /** [m/s2 / (m/s)]; negative. */
  readonly headwindGain: number;
  readonly crosswindGain: number;
  /** m_e [kg]. */
  readonly effectiveMass: number;
  /** How a belt comes to the rest that is taken for granted above; absent or null: no such belt. */
  readonly belt?: BeltMotion | null;
}

/**
 * Mass that the wheel force must accelerate: mass, turning wheels, and what turns before the gear [kg]. A belt between its
 * limits keeps the engine's speed whatever the vehicle does, so that the engine's inertia then plays no part: with
 * m_e = m + J r^2 and w = r v kept, the energy that the belt takes from the engine is J r^2 v dv/dt. Faster than the
 * belt's lag the ratio stands, and m + J r^2 counts. Where the clutch slips the engine keeps its own speed: m alone.
 *
 * @param speed [m/s] and
 * @param throttle for the ratio of a belt; without them a belt is at its greatest ratio
 * @param gear by default the engaged one
 */
export function effectiveMass(
  vehicle: Vehicle,
  speed?: number,
  throttle?: number,
  gear: number = vehicle.drive.gear,
): number {
  const { belt, gears } = vehicle.drive;
  const mass = vehicle.mass + vehicle.rotatingMass;
  if (belt === null || speed === undefined || throttle === undefined) return mass + gears[gear]!.inertia;
  const ratio = beltRatio(belt, speed, throttle);
  const turnsAlong = ratio * speed >= belt.locked && (ratio <= belt.least || ratio >= belt.greatest);
  return turnsAlong ? mass + belt.inertia * ratio * ratio : mass;
}

/**
 * Linear model of the vehicle by exact derivatives; at a corner of the drive (power limit, node of a map, limit of a
 * belt) those of its upper side. Where the law steps over the operating point (fuel cut) it is that of the upper side of
 * the step, over which a hold there swings to and fro. A belt is taken to be at
 * rest; `belt` tells how it gets there.
 *
 * @param vehicle in its engaged gear
 * @param point operating point; a speed of 0 has no linear model
 * @returns plain numbers; null where the throttle has no effect at the operating point
 */
export function linearise(vehicle: Vehicle, point: OperatingPoint): LinearVehicle | null {
  const { speed, surroundings: at } = point;
  const { drive } = vehicle;
  const derate = derateFactor(drive, at.airDensity, at.airTemperature);
  const throttle = throttleFor(drive, drive.gear, speed, requiredForce(vehicle, speed, at), derate);
  if (throttle === null || !(speed > 0)) return null;
  const force = wheelForceSlopes(drive, drive.gear, speed, throttle, derate);
  if (force.byThrottle === 0) return null;
  const road = resistanceSlopes(vehicle, speed, at);
  const mass = effectiveMass(vehicle, speed, throttle);
  return {
    speed,
    throttle,
    feasible: throttle >= drive.throttleMin && throttle <= drive.throttleMax,
    a: (force.bySpeed - road.bySpeed) / mass,
    b: force.byThrottle / mass,
    gradeGain: -road.byGrade / mass,
    headwindGain: -road.byHeadwind / mass,
    crosswindGain: -road.byCrosswind / mass,
    effectiveMass: mass,
    belt: beltMotion(vehicle, speed, throttle, derate, road.bySpeed),
  };
}
