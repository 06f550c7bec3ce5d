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
/** Least force and range of forces, then a throttle for each corner. */
const ROW = 2 + FORCES;

/** What a controller knows of the vehicle, as tables that a small processor can hold. */
export interface VehicleModel {
  /** Vehicle without what turns [kg]. */
  readonly mass: number;
  /** With the turning parts, in each gear [kg]. */
  readonly movedMass: Float64Array;
  /** Answer of the functions below: numbers that functions return are boxed. */
  readonly out: Float64Array;
  /** Force of air and rolling on the level at a speed [N]. */
  readonly drag: (speed: number) => void;
  /** Throttle that gives a force [N] in a gear at a speed, within the range of the command. */
  readonly throttle: (gear: number, speed: number, force: number) => void;
}

/**
 * Compiles a vehicle to tables: drag every 0.5 m/s up to 100 m/s, and for each gear and speed the throttle at 33 forces
 * between the least and the greatest that the range of the command gives. Between corners all are linear over the speed,
 * throttles also over the force, taken by its share of the range there; beyond them the outer value holds. Where the
 * drive's law steps the throttle of the step stands.
 *
 * @param low @param high range of the command
 */
export function vehicleModel(setup: ModelSetup, vehicle: Vehicle, low: number, high: number): VehicleModel {
  const { drive } = vehicle;
  const { surroundings, mass } = setup;
  const derate = derateFactor(drive, surroundings.airDensity, surroundings.airTemperature);
  const drags = Float64Array.from({ length: SPEEDS }, (_, i) =>
    requiredForce({ ...vehicle, mass }, SPEED_STEP * i, surroundings),
  );
  const table = throttleTable(drive, derate, low, high);
  const movedMass = Float64Array.from(drive.gears, ({ inertia }) => mass + vehicle.rotatingMass + inertia);
  const out = new Float64Array(1);

  const drag = (speed: number): void => {
    const x = speed * (1 / SPEED_STEP);
    const i = x > 0 ? (x < SPEEDS - 1 ? x | 0 : SPEEDS - 2) : 0;
    const share = x > 0 ? (x < SPEEDS - 1 ? x - i : 1) : 0;
    out[0] = drags[i] + share * (drags[i + 1] - drags[i]);
  };
  const throttle = (gear: number, speed: number, force: number): void => {
    const x = speed * (1 / SPEED_STEP);
    const i = x > 0 ? (x < SPEEDS - 1 ? x | 0 : SPEEDS - 2) : 0;
    const share = x > 0 ? (x < SPEEDS - 1 ? x - i : 1) : 0;
    const slower = ROW * (SPEEDS * (gear | 0) + i);
    const faster = slower + ROW;
    const least = table[slower] + share * (table[faster] - table[slower]);
    const range = table[slower + 1] + share * (table[faster + 1] - table[slower + 1]);
    const y = range > 0 ? ((force - least) * (FORCES - 1)) / range : 0;
    const k = y > 0 ? (y < FORCES - 1 ? y | 0 : FORCES - 2) : 0;
    const along = y > 0 ? (y < FORCES - 1 ? y - k : 1) : 0;
    const near = slower + 2 + k;
    const far = faster + 2 + k;
    const below = table[near] + along * (table[near + 1] - table[near]);
    const above = table[far] + along * (table[far + 1] - table[far]);
    out[0] = below + share * (above - below);
  };
  return { mass, movedMass, out, drag, throttle };
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
      table[row + 1] = Math.max(range, 0);
      for (let k = 0; k < FORCES; k++) {
        const share = k / (FORCES - 1);
        const found = throttleFor(drive, gear, speed, least + share * range, derate);
        table[row + 2 + k] = Math.min(Math.max(found ?? low + share * (high - low), low), high);
      }
    }
  return table;
}
