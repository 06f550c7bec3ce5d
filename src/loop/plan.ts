import type { ControllerSetup } from '../control/setup.ts';
import type { SupervisorSetup } from '../control/supervisor-setup.ts';
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
  /** Rules of the speed-hold unit; left out: hold ends only by the rider's hand. */
  readonly supervisor?: SupervisorSetup;
  /** What the speed sensor does wrong on the way, in order; left out: nothing. */
  readonly faults?: readonly SensorFault[];
  /** True: the record also has the columns of `BinRecord.detail`. */
  readonly detail?: boolean;
}

/** A place along the way: horizontal distance [m], or time from the start [s]. */
export type RoutePlace = { readonly distance: number } | { readonly time: number };

/** The speed sensor tells the controller something else for a while [s]. */
export interface SensorFault {
  readonly at: RoutePlace;
  /** No pulses (0), the last value, or twice the speed. */
  readonly shows: 'nothing' | 'last_value' | 'double';
  readonly for: number;
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
  /** `by_hand`: the rider rides at the start speed until hold is engaged; left out: hold is engaged. */
  readonly starts?: 'engaged' | 'by_hand';
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
  /** What the rider does with the unit and the grip, in order along the way, bends included; left out: nothing. */
  readonly acts?: readonly RiderAct[];
  /** Time after which the rider resumes a hold that a rule of the unit has ended [s]; left out or null: never by themselves. */
  readonly resumesAfter?: number | null;
}

/**
 * Something that the rider does. While hold is off the rider rides by hand: with full knowledge of the road they hold a
 * speed (that of the moment, or what they braked to) with throttle and brake, or let it coast.
 */
export interface RiderAct {
  readonly at: RoutePlace;
  readonly does: RiderDeed;
  /** `bend`: from the plan of bends, not written. */
  readonly reason: 'written' | 'bend';
}
export type RiderDeed =
  /** Hold takes over; the present speed becomes the set speed. */
  | { readonly kind: 'engage' }
  /** Hold takes over; the set speed is that before it ended. Planned changes passed meanwhile count. */
  | { readonly kind: 'resume' }
  /** So many taps, up or down, each `SupervisorSetup.tap`. */
  | { readonly kind: 'tap'; readonly taps: number }
  /** The grip is held this far open for so long [s]; hold comes back by itself. */
  | { readonly kind: 'override'; readonly throttle: number; readonly for: number }
  /** The switch ends hold. */
  | { readonly kind: 'cancel'; readonly then: 'holds_speed' | 'coasts' }
  /** The brake ends hold and takes the speed down to [m/s], true, at [m/s2]: whether the tyres carry that nobody asks. */
  | { readonly kind: 'brake'; readonly to: number; readonly deceleration: number }
  /** The switch ends hold; the rider goes on at [m/s], true, by hand, and gains speed at no more than [m/s2]. */
  | { readonly kind: 'ride'; readonly to: number; readonly acceleration: number }
  /** The clutch is pulled for so long [s], without a change of gear: hold ends. */
  | { readonly kind: 'clutch'; readonly for: number };

export type RunStatus = 'completed' | 'stalled' | 'stopped' | 'time_limit' | 'non_finite';

/** What held the actuator back: bits, so that a bin can carry several. */
export const LIMIT_UPPER = 1;
export const LIMIT_LOWER = 2;
export const LIMIT_RATE = 4;
export const LIMIT_BRAKE = 8;
/** The clutch is open, or the throttle in the rider's hand, for a shift. */
export const LIMIT_SHIFT = 16;
/** Hold is off: the rider rides by hand. */
export const LIMIT_OFF = 32;
/** The rider's grip asks for more than the controller. */
export const LIMIT_OVERRIDE = 64;

/** True where hold can change hands, or its sensor fail, in a plan. */
export function asksOfHold({ supervisor, faults = [], hold, rider }: LoopPlan): boolean {
  return (
    supervisor !== undefined ||
    faults.length > 0 ||
    hold.starts === 'by_hand' ||
    (rider.acts?.length ?? 0) > 0
  );
}
