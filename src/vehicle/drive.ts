import type { EnergySource } from './energy-source.ts';

/**
 * The one drive law. In each cell of shaft speed w [rad/s, or m/s for a drive without gears] and throttle x
 *
 *     T = a0 + a1 w + x (b0 + b1 w + b2 w^2 + b3 / w) - (1 - d) L(w, x),   F = r T,   w = r v
 *
 * with the ratio r of the engaged gear (or of the belt) and the factor d <= 1 of altitude, voltage and heat. The loss L
 * has the form of the first terms; where d is 1 it plays no part. A drive is a compiler to these cells; the loop never
 * calls it back. Driveline losses are in the cells: T is the wheel force over the ratio, not what a dynamometer reads.
 *
 * `cells` and `losses` hold six numbers [a0, a1, b0, b1, b2, b3] a cell, row by row: cell (i, j) stands at
 * 6 (i nThrottle + j), i over shaft speed, j over throttle. Edges increase; outside of them the outer cell holds. The
 * law may step at an edge (a fuel cut), but then only at an edge over throttle: over shaft speed it is continuous.
 */
export interface Drive {
  readonly kind: 'force' | 'electric' | 'engine' | 'variator';
  /** Inner edges between shaft-speed cells, increasing; n cells have n - 1 edges. */
  readonly speedEdges: Float64Array;
  /** Inner edges between throttle cells, increasing. */
  readonly throttleEdges: Float64Array;
  readonly cells: Float64Array;
  /** Torque lost for each unit of 1 - d, so that full throttle gives d times its torque and closed throttle what it did. */
  readonly losses: Float64Array;
  /** A belt has one gear, its greatest ratio. */
  readonly gears: readonly Gear[];
  /** Gear that is engaged at the start, index into `gears`. */
  readonly gear: number;
  readonly gearbox: Gearbox;
  /** The ratio is not that of a gear but kept by a belt; null: gears. */
  readonly belt: Belt | null;
  /** Range of the command: [0, 1], or down to -1 for a drive that regenerates. */
  readonly throttleMin: number;
  readonly throttleMax: number;
  /** First-order lag from throttle to force [s]. */
  readonly lag: number;
  /** Altitude takes torque away by the factor of `derateFactor`. */
  readonly derate: 'none' | 'naturally_aspirated';
  /** Shaft speed below which the gear cannot turn and the run ends `stalled`, in the unit of w; 0: never. */
  readonly stallSpeed: number;
  /** Engaged shaft speed of idling, for the energy account while the clutch is open, in the unit of w. */
  readonly idleSpeed: number;
  /** Fuel tank or battery; null: wheel energy only. */
  readonly source: EnergySource | null;
  /** The same drive without the step of its fuel cut; null: it has none. Counterfactuals take it. */
  readonly withoutFuelCut: Drive | null;
  /** Throttle below which the fuel is cut; 0: never. For words. */
  readonly fuelCutBelow: number;
  /** For words and causes, in the engaged gear at the wheel: full-throttle force below the power limit [N], power limit [W] or null, force at closed throttle [N, positive slows], strongest regeneration [N]. */
  readonly peakForce: number;
  readonly peakPower: number | null;
  readonly closedThrottleForce: number;
  readonly regenerationForce: number;
}

export interface Gear {
  /** w / v [1/m]; 1 for a drive without gears. */
  readonly ratio: number;
  /** Equivalent mass of what turns before the gear [kg]: inertia ratio^2. */
  readonly inertia: number;
}

/** How gears change. The rider's plan of shifts stands in the loop's plan. */
export type Gearbox =
  /** One gear for the whole run. */
  | { readonly kind: 'fixed' }
  /** The rider shifts: hold is cancelled, the clutch is open and the throttle closed for `open` [s]; `resume` [s] after it has closed the rider lets the hold resume. */
  | { readonly kind: 'clutch'; readonly open: number; readonly resume: number }
  /**
   * It shifts by itself and hold goes on: up a gear above a shaft speed, down below another, each a line over throttle
   * (piecewise linear, ends hold on; `throttle` increases). Without torque for `gap` [s]; none within `dwell` [s] of the last.
   */
  | {
      readonly kind: 'automatic';
      readonly throttle: Float64Array;
      readonly upSpeed: Float64Array;
      readonly downSpeed: Float64Array;
      readonly gap: number;
      readonly dwell: number;
    };

/**
 * A belt variator. It moves its ratio r = w / v, with a first-order lag, to where the engine turns at the speed of its
 * line over throttle, within its ratio limits: r -> clamp(line(x) / v, least, greatest). Below `greatest` times the
 * speed the clutch slips; that is in the cells.
 */
export interface Belt {
  /** [1/m] */
  readonly least: number;
  readonly greatest: number;
  /** The line: shaft speed [rad/s] over throttle, piecewise linear, ends hold on; `throttle` increases. */
  readonly throttle: Float64Array;
  readonly shaftSpeed: Float64Array;
  /** [s] */
  readonly lag: number;
  /** Of what turns before the belt [kg m2]. */
  readonly inertia: number;
  /** Shaft speed [rad/s] below which the clutch slips: the engine keeps its own speed there, and its inertia plays no part. 0: never. */
  readonly locked: number;
}
