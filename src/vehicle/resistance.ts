import { atan2 } from '../numeric/elementary.ts';
import { STANDARD_GRAVITY } from '../units/constants.ts';
import { dragArea, dragAreaSlope } from './road-load.ts';
import type { Surroundings } from './surroundings.ts';
import type { RoadLoad, Vehicle } from './vehicle.ts';

/**
 * Force of the air against travel: 1/2 rho CdA(beta) va (v + w), with air speed va and yaw beta of the air that
 * meets the vehicle (wind axis drag area; J. C. Martin et al., J. Appl. Biomech. 14 (1998) 276-291). Signed: a tail
 * wind faster than the vehicle pushes.
 *
 * @param roadLoad of the vehicle
 * @param airDensity [kg/m3]
 * @param speed of the vehicle [m/s]
 * @param headwind positive against travel [m/s]
 * @param crosswind positive from the right [m/s]
 * @returns [N]
 */
export function aeroForce(
  roadLoad: RoadLoad,
  airDensity: number,
  speed: number,
  headwind: number,
  crosswind: number,
): number {
  const ahead = speed + headwind;
  const airSpeed = Math.sqrt(ahead * ahead + crosswind * crosswind);
  return 0.5 * airDensity * dragArea(roadLoad, atan2(crosswind, ahead)) * airSpeed * ahead;
}

/** Derivatives of the force of the air [N/(m/s)] by speed, which is also that by headwind, and by crosswind. */
function aeroSlopes(
  roadLoad: RoadLoad,
  airDensity: number,
  speed: number,
  headwind: number,
  crosswind: number,
): { readonly bySpeed: number; readonly byCrosswind: number } {
  const ahead = speed + headwind;
  const square = ahead * ahead + crosswind * crosswind;
  if (square === 0) return { bySpeed: 0, byCrosswind: 0 };
  const airSpeed = Math.sqrt(square);
  const yaw = atan2(crosswind, ahead);
  const area = dragArea(roadLoad, yaw);
  const areaSlope = dragAreaSlope(roadLoad, yaw);
  const side = Math.abs(crosswind);
  const half = 0.5 * airDensity;
  return {
    bySpeed: half * (area * (airSpeed + (ahead * ahead) / airSpeed) - (areaSlope * side * ahead) / airSpeed),
    byCrosswind:
      half *
      ((area * ahead * crosswind) / airSpeed + (Math.sign(crosswind) * areaSlope * ahead * ahead) / airSpeed),
  };
}

const cosineOfGrade = (grade: number): number => 1 / Math.sqrt(1 + grade * grade);

/** Rolling force m g cos(theta) (c0 + c1 v + c2 v^2) against the motion [N]; 0 at standstill. */
export function rollingForce(
  vehicle: Pick<Vehicle, 'mass' | 'roadLoad'>,
  speed: number,
  grade: number,
): number {
  const { c0, c1, c2 } = vehicle.roadLoad;
  const size = Math.abs(speed);
  const coefficient = c0 + size * (c1 + size * c2);
  return Math.sign(speed) * vehicle.mass * STANDARD_GRAVITY * cosineOfGrade(grade) * coefficient;
}

/** Weight along the slope, m g sin(theta) [N], positive uphill. */
export function gradeForce(mass: number, grade: number): number {
  return mass * STANDARD_GRAVITY * grade * cosineOfGrade(grade);
}

/** Wheel force that keeps a speed steady [N]: air, rolling and slope; negative where the vehicle must be held back. */
export function requiredForce(vehicle: Vehicle, speed: number, at: Surroundings): number {
  const aero = aeroForce(vehicle.roadLoad, at.airDensity, speed, at.headwind, at.crosswind);
  return aero + rollingForce(vehicle, speed, at.grade) + gradeForce(vehicle.mass, at.grade);
}

/** Derivatives of the required force: by speed, headwind and crosswind [N/(m/s)], and by the grade as a ratio [N]. */
export interface ResistanceSlopes {
  readonly bySpeed: number;
  readonly byHeadwind: number;
  readonly byCrosswind: number;
  readonly byGrade: number;
}

/** Exact derivatives of `requiredForce` for a speed above 0 [m/s]. */
export function resistanceSlopes(vehicle: Vehicle, speed: number, at: Surroundings): ResistanceSlopes {
  const { c0, c1, c2 } = vehicle.roadLoad;
  const air = aeroSlopes(vehicle.roadLoad, at.airDensity, speed, at.headwind, at.crosswind);
  const weight = vehicle.mass * STANDARD_GRAVITY;
  const cosine = cosineOfGrade(at.grade);
  const coefficient = c0 + speed * (c1 + speed * c2);
  // d sin(theta) / d tan(theta) = cos^3, d cos(theta) / d tan(theta) = -sin cos^2.
  return {
    bySpeed: air.bySpeed + weight * cosine * (c1 + 2 * c2 * speed),
    byHeadwind: air.bySpeed,
    byCrosswind: air.byCrosswind,
    byGrade: weight * cosine * cosine * cosine * (1 - coefficient * at.grade),
  };
}
