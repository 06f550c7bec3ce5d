import type { ControllerSetup } from '../control/setup.ts';
import type { Road } from '../road/road.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';

/** Everything one run depends on. */
export interface LoopPlan {
  readonly road: Road;
  readonly vehicle: Vehicle;
  readonly controller: ControllerSetup;
  readonly hold: HoldPlan;
  readonly rider: RiderPlan;
  /** `exact`: RK4 cut at every kink; `fast`: one evaluation a sample. */
  readonly scheme: 'exact' | 'fast';
  /** Half-widths of the bands whose time is counted [m/s], at most 4. */
  readonly bands: readonly number[];
  /** Width of the record's distance bins [m]; a whole multiple or fraction of nothing: bins start at 0. */
  readonly bin: number;
  /** Longest driving time [s]: past it the run ends with `time_limit`. */
  readonly timeLimit: number;
  /** Sample time of a locked throttle, which has none of its own [s]. */
  readonly lockedSample: number;
}

export interface HoldPlan {
  /** [m/s] */
  readonly setSpeed: number;
  /** What the set speed means: true speed, or what the sensor indicates. */
  readonly setSpeedIs: 'true_speed' | 'indicated';
  /** [m/s]; the run starts settled there at the first point, except under a given throttle. */
  readonly startSpeed: number;
  /** In order along the way. */
  readonly changes: readonly SetSpeedChange[];
}
export interface PlannedShift {
  /** Horizontal distance [m]. */
  readonly distance: number;
  /** Index into the drive's gears. */
  readonly gear: number;
}
export interface SetSpeedChange {
  /** Horizontal distance [m] or time [s]. */
  readonly at: { readonly distance: number } | { readonly time: number };
  /** [m/s] */
  readonly setSpeed: number;
  /** Rate of the reference [m/s2]; null: the controller's own ramp, or a step. */
  readonly ramp: number | null;
}
export interface RiderPlan {
  /** The rider brakes to hold this overspeed above the set speed [m/s]; null: no brake. */
  readonly brakesAbove: number | null;
  /** The rider's plan of gears, in order along the way; for a clutch gearbox only. */
  readonly shifts: readonly PlannedShift[];
}

export type RunStatus = 'completed' | 'stalled' | 'stopped' | 'time_limit' | 'non_finite';

/** What held the actuator back: bits, so that a bin can carry several. */
export const LIMIT_UPPER = 1;
export const LIMIT_LOWER = 2;
export const LIMIT_RATE = 4;
export const LIMIT_BRAKE = 8;
/** The clutch is open, or the throttle in the rider's hand, for a shift. */
export const LIMIT_SHIFT = 16;
