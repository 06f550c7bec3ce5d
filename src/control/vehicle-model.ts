import { derateFactor } from '../vehicle/derating.ts';
import type { Drive } from '../vehicle/drive.ts';
import { throttleFor, wheelForce } from '../vehicle/drive-law.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { ModelSetup } from './setup.ts';

/** Corners of the tables: every so many m/s up to the last, and over the force so many at each of them. */
const SPEED_STEP = 0.5;
const SPEEDS = 201;
const FORCES = 33;
/** Least force, one over the range of forces, then a throttle for each corner. */
const ROW = 2 + FORCES;

/** What a controller knows of the vehicle, as tables that a small processor can hold. */
export interface VehicleModel {
  /** Vehicle without what turns [kg]. */
  readonly mass: number;
  /** With the turning parts, in a gear [kg]. */
  readonly movedMass: (gear: number) => number;
  /** Force of air and rolling on the level at a speed [N]. */
  readonly dragAt: (speed: number) => number;
  /** Throttle that gives a force [N] in a gear at a speed, within the range of the command. */
  readonly throttleAt: (gear: number, speed: number, force: number) => number;
}

/**
 * Compiles a vehicle to tables: drag every 0.5 m/s up to 100 m/s, and for each gear and speed the throttle at 33 forces
 * between the least and the greatest that the range of the command gives. Between corners both are (bi)linear, beyond
 * them the outer value holds. Where the drive's law steps the throttle of the step stands.
 *
 * @param low @param high range of the command
 */
export function vehicleModel(setup: ModelSetup, vehicle: Vehicle, low: number, high: number): VehicleModel {
  const { drive } = vehicle;
  const { surroundings } = setup;
  const mass = setup.mass ?? vehicle.mass;
  const derate = derateFactor(drive, surroundings.airDensity, surroundings.airTemperature);
  const drags = Float64Array.from({ length: SPEEDS }, (_, i) =>
    requiredForce({ ...vehicle, mass }, SPEED_STEP * i, surroundings),
  );
  const throttles = throttleTable(drive, derate, low, high);
  const moved = Float64Array.from(drive.gears, ({ inertia }) => mass + vehicle.rotatingMass + inertia);
  const last = SPEEDS - 1;

  const dragAt = (speed: number): number => {
    const x = speed * (1 / SPEED_STEP);
    const i = x > 0 ? (x < last ? x | 0 : last - 1) : 0;
    const share = x > 0 ? (x < last ? x - i : 1) : 0;
    return drags[i] + share * (drags[i + 1] - drags[i]);
  };
  const inRow = (row: number, force: number): number => {
    const x = (force - throttles[row]) * throttles[row + 1];
    const i = x > 0 ? (x < FORCES - 1 ? x | 0 : FORCES - 2) : 0;
    const share = x > 0 ? (x < FORCES - 1 ? x - i : 1) : 0;
    const near = throttles[row + 2 + i];
    return near + share * (throttles[row + 3 + i] - near);
  };
  const throttleAt = (gear: number, speed: number, force: number): number => {
    const x = speed * (1 / SPEED_STEP);
    const i = x > 0 ? (x < last ? x | 0 : last - 1) : 0;
    const share = x > 0 ? (x < last ? x - i : 1) : 0;
    const row = ROW * (SPEEDS * (gear < moved.length ? gear : moved.length - 1) + i);
    const slower = inRow(row, force);
    return slower + share * (inRow(row + ROW, force) - slower);
  };
  return {
    mass,
    movedMass: (gear) => moved[gear < moved.length ? gear : moved.length - 1],
    dragAt,
    throttleAt,
  };
}

// A study asks for the table of one drive hundreds of times.
const made = new WeakMap<Drive, Map<string, Float64Array>>();

function throttleTable(drive: Drive, derate: number, low: number, high: number): Float64Array {
  const key = `${derate} ${low} ${high}`;
  const known = made.get(drive) ?? new Map<string, Float64Array>();
  made.set(drive, known);
  const table = known.get(key) ?? compile(drive, derate, low, high);
  known.set(key, table);
  return table;
}

function compile(drive: Drive, derate: number, low: number, high: number): Float64Array {
  const table = new Float64Array(drive.gears.length * SPEEDS * ROW);
  for (let gear = 0; gear < drive.gears.length; gear++)
    for (let i = 0; i < SPEEDS; i++) {
      const row = ROW * (SPEEDS * gear + i);
      // At standstill a law in P / v has no force; what holds just above it stands there.
      const speed = SPEED_STEP * Math.max(i, 0.02);
      const least = wheelForce(drive, gear, speed, low, derate);
      const range = wheelForce(drive, gear, speed, high, derate) - least;
      table[row] = least;
      table[row + 1] = range > 0 ? (FORCES - 1) / range : 0;
      for (let k = 0; k < FORCES; k++) {
        const share = k / (FORCES - 1);
        const found = throttleFor(drive, gear, speed, least + share * range, derate);
        table[row + 2 + k] = Math.min(Math.max(found ?? low + share * (high - low), low), high);
      }
    }
  return table;
}
