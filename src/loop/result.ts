import type { Bite } from '../control/bites.ts';
import type { RunStatus } from './plan.ts';

/** A run over a road: how it ended, the record by bin, the account of energy. */
export interface LoopResult {
  readonly status: RunStatus;
  /** Where it ended: horizontal distance [m], time [s]. */
  readonly endDistance: number;
  readonly endTime: number;
  readonly bins: BinRecord;
  readonly ledger: Ledger;
  /** About one a kilometre of the road, the first at the start. */
  readonly checkpoints: readonly Checkpoint[];
  /** In order along the way. */
  readonly shifts: readonly ShiftEvent[];
  /** What is wrong in the controller itself and had a say. */
  readonly bites: readonly BiteRecord[];
  /** What became of hold, in order along the way; left out: nothing was asked of it. */
  readonly holdEvents?: readonly HoldEvent[];
}

/** Hold took over, ended, or was changed by the rider. */
export interface HoldEvent {
  /** [s], horizontal distance [m]. */
  readonly time: number;
  readonly distance: number;
  readonly kind: HoldEventKind;
  readonly cause: HoldEventCause;
  /** In force from here, in its own units [m/s]; of an `ended` the one that a resume goes back to. */
  readonly setSpeed: number;
  /** Measured speed [m/s] and command at the sample before. */
  readonly measured: number;
  readonly command: number;
}
export type HoldEventKind =
  | 'engaged'
  | 'resumed'
  | 'tapped'
  | 'override_began'
  /** The grip was let go; hold comes back at `reentered`. */
  | 'override_ended'
  | 'reentered'
  | 'ended'
  /** The rider asked for hold and a rule refused it. */
  | 'refused';
export type HoldEventCause =
  | 'rider'
  | 'bend'
  | 'brake'
  | 'clutch'
  | 'gear_change'
  | 'too_slow'
  | 'too_fast'
  | 'below_lowest_speed'
  | 'sensor_not_believed';

/** A slip in a controller that had a say. */
export interface BiteRecord {
  readonly bite: Bite;
  /** Samples in which it had, and where the bin of the first begins: horizontal distance [m]. */
  readonly samples: number;
  readonly distance: number;
}

/**
 * Per distance bin: bin i covers [edge[i], edge[i + 1]) of horizontal distance. A controller sample belongs to the
 * bin in which it starts. `size` bins were reached; `edge` has size + 1 entries. SI. A bin in which no sample starts
 * (bins shorter than the way of one sample) has time 0 and the values of the sample that passes over it.
 */
export interface BinRecord {
  readonly size: number;
  readonly edge: Float64Array;
  /** Time at its first sample, from the start of the run [s], and time spent [s]. */
  readonly timeAt: Float64Array;
  readonly time: Float64Array;
  /** Set speed at the first sample, as the true speed that it stands for [m/s]. */
  readonly setSpeed: Float64Array;
  /** Distance travelled over time; extremes over the samples [m/s]. */
  readonly speedMean: Float64Array;
  readonly speedMin: Float64Array;
  readonly speedMax: Float64Array;
  /**
   * Error e = true speed - set speed (in terms of `setSpeedIs`): time INTEGRALS of e [m/s s] and e^2 [m2/s2 s] over the
   * bin (divide by `time` for means), extremes [m/s].
   */
  readonly errorMean: Float64Array;
  readonly errorSquare: Float64Array;
  readonly errorMin: Float64Array;
  readonly errorMax: Float64Array;
  /** Actuator throttle: time mean, extremes. */
  readonly throttleMean: Float64Array;
  readonly throttleMin: Float64Array;
  readonly throttleMax: Float64Array;
  /** Sum of |change of command| over the samples. */
  readonly throttleTravel: Float64Array;
  /** Time with the command at the upper, at the lower limit (a shift apart), with the actuator at its rate limit, with the brake on [s]. */
  readonly timeUpper: Float64Array;
  readonly timeLower: Float64Array;
  readonly timeRate: Float64Array;
  readonly timeBrake: Float64Array;
  /** Time with |e| inside each band, band by band: size x bands.length, row by row [s]. */
  readonly timeInBand: Float64Array;
  /** Index into the drive's gears. */
  readonly gear: Uint8Array;
  /** Mean wheel force of the drive over the distance [N], mean wheel power [W], work in the bin: drive (positive part), regeneration (negative part), brake [J]. */
  readonly driveForce: Float64Array;
  readonly wheelPower: Float64Array;
  readonly driveWork: Float64Array;
  readonly regenerationWork: Float64Array;
  readonly brakeWork: Float64Array;
  /** Greatest and least wheel force of the drive over the samples [N]. */
  readonly driveForceMax: Float64Array;
  readonly driveForceMin: Float64Array;
  /** Time with the clutch open or the throttle in the rider's hand for a shift [s]. */
  readonly timeShift: Float64Array;
  /** Drawn from fuel or battery [J]; 0 without a source. */
  readonly drawn: Float64Array;
  /**
   * Greatest share of the full-throttle force, and of full regeneration, that voltage, heat and charge of a battery took
   * away: 0 for all that there is, 1 of the force for an empty battery. 0 without a battery.
   */
  readonly driveLost: Float64Array;
  readonly regenerationLost: Float64Array;
  /**
   * Time with hold off [s]. Sums, extremes and bands of the error, the times at limits (the brake's too) and the travel of
   * the command are taken over the time with hold on (an override counts as on): divide by `time - timeOff`. A bin without
   * such time has 0 in all of them, the extremes of the error too.
   */
  readonly timeOff: Float64Array;
  /** Only where the plan asks for it; null: it did not. */
  readonly detail: BinDetail | null;
}

/**
 * By bin, over the time with hold on: what figures of comfort and of the throttle need. SI. Accelerations are mean ones
 * over a sample, (v at its end - v at its start) / its time. What is the command's own (rate, reversals, distribution)
 * leaves out the shifts, in which it is not the controller's.
 */
export interface BinDetail {
  /** Time integral of |e| [m], and of |e| times the time since the start of the bin [m s]. */
  readonly errorAbsolute: Float64Array;
  readonly errorMoment: Float64Array;
  /** Time integrals of a^2 [m2/s3] and |a| [m/s]. */
  readonly accelerationSquare: Float64Array;
  readonly accelerationAbsolute: Float64Array;
  /** Work that went into a rising speed: the sum over the samples of what is above 0 of m_e (v_end^2 - v_start^2) / 2 [J]. */
  readonly inertialWork: Float64Array;
  /** Greatest |change of the limited command| from one sample to the next over the sample's time [1/s]. */
  readonly commandRate: Float64Array;
  /** Turns of the limited command, each told once it has come back from its extreme by more than 0.005. */
  readonly reversals: Uint32Array;
  /** Speed error in classes of 0.01 km/h, limited command of 0.001, acceleration of 0.01 m/s2, jerk of 0.005 m/s3. */
  readonly error: Distribution;
  readonly command: Distribution;
  readonly acceleration: Distribution;
  /**
   * Change of the mean acceleration from one window of 0.2 s (in whole samples, one at least) to the next, over the
   * window; told at the end of the second window, and not before two have passed.
   */
  readonly jerk: Distribution;
}

/**
 * Samples by class of a quantity, bin by bin: bin i has the entries [start[i], start[i + 1]), one a class that it met.
 * Class k covers [k width, (k + 1) width); values beyond the last class are in it.
 */
export interface Distribution {
  readonly width: number;
  /** Time of a sample [s]. */
  readonly sample: number;
  readonly start: Uint32Array;
  readonly index: Int16Array;
  /** Samples in the class: whole, but for the last sample of a run. */
  readonly samples: Float32Array;
}

/** A shift of gear that happened. Indices into the drive's gears. */
export interface ShiftEvent {
  /** [s], horizontal distance [m]. */
  readonly time: number;
  readonly distance: number;
  readonly from: number;
  readonly to: number;
  /** The rider shifted: hold is off from here to `resumedAt` [s], which a run may not live to see; null: the gearbox shifted by itself. */
  readonly resumedAt: number | null;
}

/** Energies over the whole run [J]. drive + regeneration = aero + rolling + climb + brake + kinetic + shifts, to the residual. */
export interface Ledger {
  /** Work of the drive while it pushes (>= 0) and while it holds back (<= 0). */
  readonly drive: number;
  readonly regeneration: number;
  readonly aero: number;
  readonly rolling: number;
  readonly climb: number;
  readonly brake: number;
  readonly kinetic: number;
  /** Kinetic energy that shifts took out of what turns before the gear (or put in, negative): the clutch's part. */
  readonly shifts: number;
  /** Drawn from fuel or battery, where the drive has a source; null where not. */
  readonly drawn: number | null;
  /** Charge of the battery at the end, 0 to 1; null: no battery, or its capacity is not known. */
  readonly chargeAtEnd: number | null;
  /** Sum of the terms over the sum of their magnitudes, taken stretch by stretch (at most a bin). */
  readonly residual: number;
}

/** All state of a run at a sample: a copy of its flat arrays. */
export interface Checkpoint {
  /** Horizontal distance [m], station, time [s]. */
  readonly distance: number;
  readonly station: number;
  readonly time: number;
  readonly state: Float64Array;
}

/** Every controller sample of a stretch. Equal lengths; SI; angles none. */
export interface FullSeries {
  readonly size: number;
  readonly time: Float64Array;
  readonly distance: Float64Array;
  readonly setSpeed: Float64Array;
  readonly reference: Float64Array;
  readonly speed: Float64Array;
  readonly measured: Float64Array;
  /** Command before it is limited, and throttle at the actuator. */
  readonly command: Float64Array;
  readonly actuator: Float64Array;
  readonly proportional: Float64Array;
  readonly integral: Float64Array;
  readonly feedforward: Float64Array;
  /** LIMIT_ bits. */
  readonly limit: Uint8Array;
  /** Index into the drive's gears. */
  readonly gear: Uint8Array;
  /** Speed of the drive's shaft, in the unit of its law: [rad/s], or [m/s] for a drive without gears; 0 with the clutch open. */
  readonly shaftSpeed: Float64Array;
  readonly driveForce: Float64Array;
  readonly brakeForce: Float64Array;
  readonly acceleration: Float64Array;
}
