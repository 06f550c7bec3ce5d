import type { Surroundings } from '../vehicle/surroundings.ts';

/** A candidate: a name and what drives the throttle. SI; gains per m/s. */
export interface Candidate {
  readonly name: string;
  readonly controller: ControllerSetup;
}

export type ControllerSetup = LockedSetup | PiSetup | PidSetup | IntegerSetup;

/** The rider's alternative: a throttle locked in place. */
export interface LockedSetup {
  readonly kind: 'locked';
  /** Throttle, or `level`: what holds the set speed on the level in still air, locked again at each change of the set speed. */
  readonly throttle: number | 'level';
}

/**
 * u = kp (setpointWeight r - y) + I, limited to the drive's range; the integral is kept in units of throttle.
 * `forward`: u first, then I += ki Ts e; `backward`: I += ki Ts e first.
 */
export interface PiSetup {
  readonly kind: 'pi';
  /** [1/(m/s)] */
  readonly kp: number;
  /** [1/(m/s)/s] */
  readonly ki: number;
  readonly setpointWeight: number;
  /** Sample time [s]. */
  readonly sample: number;
  /** From sample to command [s]: the command acts on a speed, and on a set speed, that are that much older. */
  readonly computingDelay: number;
  readonly integration: 'forward' | 'backward';
  readonly antiWindup: AntiWindup;
  /** Greatest rate of the reference after a change of set speed [m/s2]; null: it steps. */
  readonly ramp: number | null;
  /** Where the gains come from; null: typed. */
  readonly design: DesignRecord | null;
}

export type AntiWindup =
  | { readonly kind: 'none' }
  /** The integral stands still while the command is at a limit and the error pushes further. */
  | { readonly kind: 'conditional' }
  /** I += (Ts / trackingTime) (limited u - u). */
  | { readonly kind: 'back_calculation'; readonly trackingTime: number };

/**
 * The family around PI: with e = r - y behind the dead band, on the measurement D and a filter of first order,
 *
 *     u = kp (setpointWeight r - y) + I - kd dy/dt + feedforward + observer, limited to the range after all of it
 *
 * ki 0 is a P controller: the integral is then the throttle that it took over, and stands. Change of gains is bumpless.
 */
export interface PidSetup {
  readonly kind: 'pid';
  /** [1/(m/s)] */
  readonly kp: number;
  /** [1/(m/s)/s] */
  readonly ki: number;
  /** [1/(m/s2)] */
  readonly kd: number;
  /** Time constant of the derivative's filter [s]; 0: none. */
  readonly derivativeFilter: number;
  readonly setpointWeight: number;
  /** Sample time [s]. */
  readonly sample: number;
  /** From sample to command [s], as under PiSetup. */
  readonly computingDelay: number;
  readonly integration: 'forward' | 'backward';
  readonly form: ControllerForm;
  /** null: none. */
  readonly deadBand: DeadBand | null;
  /** Greatest rate of the command [1/s]; null: no limit. */
  readonly rateLimit: number | null;
  readonly schedule: GainSchedule | null;
  /** What feedforward and observer reckon with; null: neither is there. */
  readonly model: ModelSetup | null;
  readonly feedforward: FeedforwardSetup | null;
  /** Time constant of the observer's filter [s]; null: no observer. */
  readonly observerFilter: number | null;
  /** As under PiSetup. */
  readonly ramp: number | null;
  readonly design: DesignRecord | null;
}

/** Positional: the integral is remembered. Velocity: the limited command is, and no integral can wind up. */
export type ControllerForm =
  | { readonly kind: 'positional'; readonly antiWindup: IntegralRule }
  | { readonly kind: 'velocity' };

/** What is done about the integral. */
export type IntegralRule = AntiWindup | SignTest | Clamping | IntegralCap;

/**
 * As `conditional`, but it asks whether command and error have the same sign where it should ask which limit was
 * reached: a slip that shows where both limits have one sign.
 */
export interface SignTest {
  readonly kind: 'sign_test';
}
/** The integral is kept within what the other parts leave of the range. */
export interface Clamping {
  readonly kind: 'clamping';
}
/**
 * The integral is kept within -cap and cap. `throttle`: in its own unit. `summed_error`: the figure is set against the
 * sum of the error [m/s s], as happens by mistake where the sum is stored and ki multiplies it later.
 */
export interface IntegralCap {
  readonly kind: 'cap';
  readonly cap: number;
  readonly of: 'throttle' | 'summed_error';
}

/**
 * Errors up to the half-width count as none, greater ones by what they are beyond it. `integratesInside`: the integral
 * does not know of it and runs on, a slip.
 */
export interface DeadBand {
  /** [m/s] */
  readonly halfWidth: number;
  readonly integratesInside: boolean;
}

/** Factors on the gains, piecewise linear over the measured speed, ends hold on. */
export interface GainSchedule {
  /** Corners [m/s], increasing. */
  readonly speed: Float64Array;
  readonly rows: readonly ScheduleRow[];
}
export interface ScheduleRow {
  /** Index into the drive's gears; null: all gears without a row of their own. */
  readonly gear: number | null;
  /** At each corner: factor on kp and kd, and on ki. */
  readonly proportional: Float64Array;
  readonly integral: Float64Array;
}

/** What a controller takes for the vehicle and the air: the vehicle that it runs on, but with a mass of its own, which no load changes. */
export interface ModelSetup {
  /** [kg] */
  readonly mass: number;
  readonly surroundings: Surroundings;
}

export interface FeedforwardSetup {
  /** The throttle that air and rolling take at the reference is fed forward. */
  readonly drag: boolean;
  readonly grade: GradeSource | null;
}
export type GradeSource =
  /** a + g sin(theta) of an accelerometer that is mounted by a pitch error [rad] too steep, less the measured acceleration, both through a low-pass [s]. */
  | { readonly kind: 'accelerometer'; readonly filter: number; readonly pitchError: number }
  /** The grade of the road where the vehicle will be after the preview [s]. */
  | { readonly kind: 'known_road'; readonly preview: number };

/**
 * A PI controller in whole numbers, as small processors run it, bit for bit. With words of `wordBits`, products and sums
 * of `productBits`, q() the scaling down by a divisor, and counts of speed and throttle:
 *
 *     e = R - Y                                      R, Y: nearest counts of r and y
 *     increments: p = q(Kp e), I += q(Ki e), u = p + q(I, integralDivisor)
 *     errors:     p = q(Kp e), S += e,       u = p + q(Ki S)
 */
export interface IntegerSetup {
  readonly kind: 'integer';
  /** Gains that are asked for [1/(m/s)], [1/(m/s)/s]; their counts are rounded to nearest. */
  readonly kp: number;
  readonly ki: number;
  readonly sample: number;
  readonly computingDelay: number;
  readonly integration: 'forward' | 'backward';
  readonly wordBits: number;
  readonly productBits: number;
  /** Counts per m/s, and counts of full throttle. */
  readonly speedScale: number;
  readonly throttleScale: number;
  /** What gain counts are divided by; a power of two under `shift`. */
  readonly gainDivisor: number;
  readonly integralOf: 'increments' | 'errors';
  /** Fineness of the integral of increments: counts of I in one count of throttle. */
  readonly integralDivisor: number;
  /** `shift`: arithmetic, towards minus infinity; `division`: as C divides, towards 0. */
  readonly scaling: 'shift' | 'division';
  /** `nearest`: half of the divisor is added before, away from 0 under `division`. */
  readonly rounding: 'truncate' | 'nearest';
  readonly overflow: 'wrap' | 'saturate';
  readonly integralRule: Exclude<IntegralRule, { readonly kind: 'back_calculation' }>;
  readonly ramp: number | null;
}

/** What was asked of a design, at which operating point, and what the linear loop promises. */
export interface DesignRecord {
  readonly method: 'settling_overshoot' | 'droop' | 'simc' | 'lambda' | 'load_rejection';
  /** Set speed of the operating point [m/s]. */
  readonly speed: number;
  /**
   * Asked: settling time [s] and overshoot (ratio); droop [m/s], grade step (ratio) and damping ratio; time constant of
   * the closed loop [s]; or the greatest sensitivity.
   */
  readonly asked: Readonly<Record<string, number>>;
  /** Promised by the linear loop with all its lags, same keys and more, SI. */
  readonly promised: Readonly<Record<string, number>>;
  /** One sentence for the report. */
  readonly words: string;
}
