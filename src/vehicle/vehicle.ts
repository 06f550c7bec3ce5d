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
 * The one drive law. In each cell of shaft speed w [rad/s, or m/s for a drive without gears] and throttle x
 *   T = a0 + a1 w + x (b0 + b1 w + b2 w^2 + b3 / w),
 * wheel force F = ratio T, w = ratio v. A drive is a compiler to these cells; the loop never calls it back.
 *
 * `cells` holds six numbers [a0, a1, b0, b1, b2, b3] a cell, row by row: cell (i, j) stands at
 * 6 (i nThrottle + j), i over shaft speed, j over throttle. Edges increase; outside of them the outer cell holds.
 * With altitude derating d, the force above the closed-throttle line is scaled: see `derate`.
 */
export interface Drive {
  readonly kind: 'force' | 'electric' | 'engine' | 'variator';
  /** Inner edges between shaft-speed cells, increasing; n cells have n - 1 edges. */
  readonly speedEdges: Float64Array;
  /** Inner edges between throttle cells, increasing. */
  readonly throttleEdges: Float64Array;
  readonly cells: Float64Array;
  readonly gears: readonly Gear[];
  /** Gear that is engaged, index into `gears`. */
  readonly gear: number;
  /** Range of the command: [0, 1], or down to -1 for a drive that regenerates. */
  readonly throttleMin: number;
  readonly throttleMax: number;
  /** First-order lag from throttle to force [s]. */
  readonly lag: number;
  /**
   * Altitude derating: with factor d <= 1 at this place, T = a + x (d (b + a) - a), a = a0 + a1 w, b = b0 + ... + b3 / w:
   * the full-throttle torque is d times its sea-level value and the closed-throttle torque is unchanged.
   */
  readonly derate: 'none' | 'naturally_aspirated';
  /** Wheel speed below which the gear cannot turn: the run ends `stalled` [m/s]; 0: never. */
  readonly stallSpeed: number;
  /** Battery or fuel side, for the energy account; null: wheel energy only. */
  readonly efficiency: { readonly drive: number; readonly regeneration: number } | null;
  /** For words and causes: full-throttle force below the power limit [N], power limit [W] or null, force at closed throttle [N, positive slows], strongest regeneration [N]. */
  readonly peakForce: number;
  readonly peakPower: number | null;
  readonly closedThrottleForce: number;
  readonly regenerationForce: number;
}

export interface Gear {
  /** w / v. */
  readonly ratio: number;
  /** Equivalent mass of what turns before the gear [kg]. */
  readonly inertia: number;
}

/** Command to throttle: first-order lag, rate limit. */
export interface Actuator {
  /** [s] */
  readonly lag: number;
  /** [1/s]; null: no limit. */
  readonly rateLimit: number | null;
}

/** True speed to measured speed: scale error, first-order filter, transport delay. */
export interface SpeedSensor {
  /** [s] */
  readonly filter: number;
  /** [s] */
  readonly delay: number;
  /** measured = (1 + scaleError) true. */
  readonly scaleError: number;
}
