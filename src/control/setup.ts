/** A candidate: a name and what drives the throttle. SI; gains per m/s. */
export interface Candidate {
  readonly name: string;
  readonly controller: ControllerSetup;
}

export type ControllerSetup = LockedSetup | PiSetup;

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

/** What was asked of a design, at which operating point, and what the linear loop promises. */
export interface DesignRecord {
  readonly method: 'settling_overshoot' | 'droop';
  /** Set speed of the operating point [m/s]. */
  readonly speed: number;
  /** Asked: settling time [s] and overshoot (ratio), or droop [m/s], grade step (ratio) and damping ratio. */
  readonly asked: Readonly<Record<string, number>>;
  /** Promised by the linear loop with all its lags, same keys and more, SI. */
  readonly promised: Readonly<Record<string, number>>;
  /** One sentence for the report. */
  readonly words: string;
}
