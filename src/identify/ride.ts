import type { Estimate } from './estimate.ts';

/** Rows of a ride without a break, with what the vehicle met at each. SI. */
export interface RideStretch {
  /** Rising [s]. */
  readonly time: Float64Array;
  /** Along the slope, > 0 [m/s]. */
  readonly speed: Float64Array;
  /** Horizontal distance from the start of the road or of the ride [m]. */
  readonly place: Float64Array;
  /** Height of the road [m]. */
  readonly elevation: Float64Array;
  /** tan(theta). */
  readonly grade: Float64Array;
  readonly headwind: Float64Array;
  readonly crosswind: Float64Array;
  readonly airDensity: Float64Array;
  /** Force at the wheel by the log, at the row and at a speed [N]. */
  readonly driveForce: (row: number, speed: number) => number;
  /** Rows at which the drive gave something: elsewhere a brake may have been on that nobody logged. */
  readonly driven: Uint8Array;
}

/** Numbers of a vehicle that a ride can tell. */
export const RIDE_UNKNOWNS = ['cda_m2', 'crr', 'mass_kg'] as const;
export type RideUnknown = (typeof RIDE_UNKNOWNS)[number];

/** The vehicle that the ride is held against. */
export interface RideVehicle {
  /** All that rolls [kg], and the equivalent mass of what turns, engine and wheels [kg]. */
  readonly mass: number;
  readonly rotatingMass: number;
  /** Drag area without yaw [m2], and how it grows: factor at a yaw angle [rad]. */
  readonly cda: number;
  readonly yawFactor: (yaw: number) => number;
  /** Rolling coefficient crr + c1 v + c2 v^2. */
  readonly crr: number;
  readonly c1: number;
  readonly c2: number;
}

/** A number that was fitted, beside what the vehicle had. */
export interface FittedUnknown {
  readonly name: RideUnknown;
  readonly was: number;
  readonly estimate: Estimate;
}

/** What the height of the road says, by itself. */
export interface ElevationClosure {
  readonly cda: Estimate;
  readonly crr: Estimate;
  /** Root mean square of the height that does not close [m]: with the vehicle as it was, and with these. */
  readonly before: number;
  readonly after: number;
}

/** A piece of the ride beside the vehicle as it was and as fitted. */
export interface RideSegment {
  /** Horizontal distance [m]. */
  readonly from: number;
  readonly to: number;
  readonly duration: number;
  readonly meanSpeed: number;
  readonly meanGrade: number;
  /** Work at the wheel by the log [J], and what the vehicle needed for the speeds that were ridden, as it was and as fitted. */
  readonly given: number;
  readonly needed: number;
  readonly neededAfter: number;
  /** Simulated with the logged drive from the logged speed at its start: simulated less logged speed at its end, and root mean square [m/s]. */
  readonly endSpeed: number;
  readonly rmsSpeed: number;
  /** The same with the fitted numbers. */
  readonly rmsSpeedAfter: number;
  /** Share of the time with the drive closed, when a brake may have been on. */
  readonly closed: number;
}

export interface RideFit {
  readonly unknowns: readonly FittedUnknown[];
  /** Of the errors of the first two; null: there is one. */
  readonly correlation: number | null;
  readonly degrees: number;
  /** Length of what was fitted, and of all [m]. */
  readonly fitted: number;
  readonly length: number;
  /** Root mean square of the mean force of a piece that the fit leaves [N], and that the vehicle as it was left. */
  readonly rmsForce: number;
  readonly rmsForceBefore: number;
  readonly closure: ElevationClosure | null;
  readonly segments: readonly RideSegment[];
}
