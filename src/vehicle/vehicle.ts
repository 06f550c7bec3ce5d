import type { Drive } from './drive.ts';

/** A vehicle as the loop sees it: SI, defaults filled in, one drive law. */
export interface Vehicle {
  readonly name: string;
  /** Kerb, rider and payload together [kg]. */
  readonly mass: number;
  /** Of the mass, what a load lever may change: payload [kg]. */
  readonly payload: number;
  /** Equivalent mass of the turning wheels [kg]; m_e = mass + rotatingMass + gear inertia. */
  readonly rotatingMass: number;
  readonly roadLoad: RoadLoad;
  readonly drive: Drive;
  readonly actuator: Actuator;
  readonly sensor: SpeedSensor;
  /** Grip of the driven wheel; null: not known, not checked. */
  readonly traction: Traction | null;
}

/**
 * F_aero = 1/2 rho CdA(beta) va (v + w), CdA(beta) = cda (1 + yawGain min(|beta|, 0.44)^2) or the table;
 * F_roll = m g cos(theta) (c0 + c1 v + c2 v^2) sgn(v).
 */
export interface RoadLoad {
  /** [m2] */
  readonly cda: number;
  /** [1/rad2] */
  readonly yawGain: number;
  /** Piecewise linear in |beta|: angles [rad] from 0, increasing, and drag areas [m2]; null: the formula. */
  readonly yawTable: { readonly yaw: Float64Array; readonly cda: Float64Array } | null;
  /** Dimensionless, [s/m], [s2/m2]. */
  readonly c0: number;
  readonly c1: number;
  readonly c2: number;
}

/**
 * Command to throttle, in this order: dead time, steps of the resolution, end stops, first-order lag with a rate limit,
 * slack. The throttle behind the slack is what the drive gets.
 */
export interface Actuator {
  /** From command to the first movement [s]. */
  readonly deadTime: number;
  /** Step to whose multiples the command is rounded; 0: none. */
  readonly resolution: number;
  /** End stops of the throttle: within the drive's range. */
  readonly travel: { readonly least: number; readonly greatest: number } | null;
  /** [s] */
  readonly lag: number;
  /** [1/s]; null: no limit. */
  readonly rateLimit: number | null;
  /** Full width of the lost motion, in throttle: the play operator out = min(max(out, y - slack / 2), y + slack / 2); 0: none. */
  readonly slack: number;
  /**
   * What hold takes the throttle over from: `rider`, the actuator stands where the rider has it (throttle by wire); `rest`,
   * a servo beside the grip waits at its lower stop with all of the slack before it, and must wind in both while the rider
   * lets the grip go at once. Left out: `rider`.
   */
  readonly engagesFrom?: 'rider' | 'rest';
}

/** True speed to measured speed: pulses (or none), scale error, noise, first-order filter, transport delay. */
export interface SpeedSensor {
  /** Toothed wheel; null: the speed itself is seen. */
  readonly pulses: Pulses | null;
  /** measured = (1 + scaleError) true. */
  readonly scaleError: number;
  /** White noise on each sample; null: none. */
  readonly noise: { readonly sd: number; readonly seed: number } | null;
  /** [s] */
  readonly filter: number;
  /** [s] */
  readonly delay: number;
}

/** Pulses of a toothed wheel: counted in a window [s], or the last period timed by a clock of a resolution [s]. */
export interface Pulses {
  /** Way of the vehicle between two pulses [m]: circumference over pulses a turn. */
  readonly spacing: number;
  readonly reading:
    | { readonly kind: 'counted'; readonly window: number }
    | { readonly kind: 'timed'; readonly clock: number };
}

/**
 * Grip of the driven wheel with load transfer. With wheelbase p, distance b of the centre of mass from the contact of
 * the driven rear wheel and its height h, a force F at the wheel loads it by N = m g cos(theta) (p - b) / p + F h / p.
 */
export interface Traction {
  /** Greatest coefficient of friction, as the road is: dry or wet. */
  readonly friction: number;
  /** [m] */
  readonly wheelbase: number;
  readonly massCentreAhead: number;
  readonly massCentreHeight: number;
}
