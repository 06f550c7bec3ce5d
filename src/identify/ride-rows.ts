import { atan2 } from '../numeric/elementary.ts';
import { runningIntegral } from '../numeric/running-integral.ts';
import { STANDARD_GRAVITY } from '../units/constants.ts';
import type { RideStretch, RideVehicle } from './ride.ts';

/** The account of energy of a stretch up to each of its rows. */
export interface RideLevels {
  /** Work of the drive [J]. */
  readonly work: Float64Array;
  /** v^2 / 2 + g z: times the mass what lies in motion and height [J/kg]. */
  readonly held: Float64Array;
  /** v^2 / 2: times the rotating mass [J/kg]. */
  readonly turning: Float64Array;
  /** g ds cos(theta): times mass and coefficient the work of the tyres [J/kg], and that with the growth of the coefficient in it. */
  readonly rolling: Float64Array;
  readonly rollingGrowth: Float64Array;
  /** 1/2 rho int va (v + w) ds with the growth by yaw: times the drag area the work of the air [J/m2]. */
  readonly air: Float64Array;
  /** Way along the slope [m]. */
  readonly way: Float64Array;
}

/** Integrals of a ride, row by row: see `coastRows` for the method. */
export function rideLevels(stretch: RideStretch, vehicle: RideVehicle): RideLevels {
  const { time, speed, grade, elevation } = stretch;
  const integral = (of: (v: number, i: number) => number): Float64Array =>
    runningIntegral(time, speed.map(of));
  const across = (i: number): number => 1 / Math.sqrt(1 + grade[i]! * grade[i]!);
  return {
    work: integral((v, i) => stretch.driveForce(i, v) * v),
    held: speed.map((v, i) => (v * v) / 2 + STANDARD_GRAVITY * elevation[i]!),
    turning: speed.map((v) => (v * v) / 2),
    rolling: integral((v, i) => STANDARD_GRAVITY * v * across(i)),
    rollingGrowth: integral((v, i) => STANDARD_GRAVITY * v * across(i) * v * (vehicle.c1 + vehicle.c2 * v)),
    air: integral((v, i) => v * airPressure(stretch, vehicle, i, v)),
    way: integral((v) => v),
  };
}

/** Force of the air for a drag area of 1 m2 [N/m2]. */
function airPressure(
  { headwind, crosswind, airDensity }: RideStretch,
  { yawFactor }: RideVehicle,
  i: number,
  v: number,
): number {
  const ahead = v + headwind[i]!;
  const side = crosswind[i]!;
  const airSpeed = Math.sqrt(ahead * ahead + side * side);
  const yaw = side === 0 && ahead >= 0 ? 0 : atan2(side, ahead);
  return (airDensity[i]! / 2) * yawFactor(yaw) * airSpeed * ahead;
}

/** Force that slows the vehicle at a row and a speed [N]: air, tyres and slope. */
export function resistanceAt(stretch: RideStretch, vehicle: RideVehicle, i: number, v: number): number {
  const grade = stretch.grade[i]!;
  const cosine = 1 / Math.sqrt(1 + grade * grade);
  const rolling = vehicle.crr + v * (vehicle.c1 + v * vehicle.c2);
  const weight = vehicle.mass * STANDARD_GRAVITY * cosine;
  return vehicle.cda * airPressure(stretch, vehicle, i, v) + weight * (rolling + grade);
}
