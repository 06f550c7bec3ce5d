import type { Drive, Gearbox } from './drive.ts';

/** Steady torque of an engine at its crankshaft. Shaft speeds [rad/s], torques [N m]. */
export type TorqueSpec =
  /** T = x peak (1 - falloff (w / peakSpeed - 1)^2), not below 0: the textbook parabola, linear in the throttle. */
  | { readonly kind: 'parabola'; readonly peak: number; readonly peakSpeed: number; readonly falloff: number }
  /**
   * Full-load curve, piecewise linear, with a shape for part throttle: T = -drag(w) + s (full(w) + drag(w)),
   * s = (1 - e^(-k x)) / (1 - e^(-k)), k = shape shapeSpeed / w. A throttle plate meters air: at small opening the flow
   * hardly depends on w, so that T w is nearly constant and torque falls as the engine turns faster. `shape` 0 is linear,
   * 3 to 5 like a plate. `shapeSpeed` null: k = shape at every w, as of a throttle that asks for a share of torque.
   */
  | {
      readonly kind: 'full_load';
      readonly shaftSpeed: Float64Array;
      readonly torque: Float64Array;
      readonly shape: number;
      readonly shapeSpeed: number | null;
    }
  /** Map over shaft speed (rows) and throttle (columns, from 0 to 1), bilinear; its first column is the closed throttle. */
  | {
      readonly kind: 'map';
      readonly shaftSpeed: Float64Array;
      readonly throttle: Float64Array;
      readonly torque: Float64Array;
    };

/** Torque that holds the engine back at closed throttle, written positive, piecewise linear over shaft speed. */
export interface DragSpec {
  readonly shaftSpeed: Float64Array;
  readonly torque: Float64Array;
}

/** Fuel cut at closed throttle: below `throttle` and above a shaft speed the drag is greater by `torque`; it fades in over `blend` above that speed. */
export interface FuelCutSpec {
  readonly above: number;
  /** [rad/s], > 0 */
  readonly blend: number;
  readonly throttle: number;
  /** [N m], >= 0 */
  readonly torque: number;
}

/** What engines with gears and with a belt have in common. */
export interface CombustionSpec {
  readonly torque: TorqueSpec;
  /** Null for a map, whose first column it is. */
  readonly drag: DragSpec | null;
  readonly fuelCut: FuelCutSpec | null;
  /** Shaft speed that the idle governor keeps: there closed throttle gives no drag; below `stall` the engine dies [rad/s]. */
  readonly idle: number;
  readonly stall: number;
  /** Shaft speed at which full torque ends; it falls to closed-throttle torque over `limitBand` above it; null: no limiter [rad/s]. */
  readonly revLimit: number | null;
  readonly limitBand: number;
  /** Of crankshaft, clutch and what turns with them [kg m2]. */
  readonly inertia: number;
  /** Wheel power over engine power, in (0, 1]. */
  readonly efficiency: number;
  /** First-order lag from throttle to torque [s]. */
  readonly lag: number;
  readonly derate: Drive['derate'];
  readonly fuel: FuelSpec | null;
}

/** Fuel: engine power and shaft speed to fuel power. */
export interface FuelSpec {
  readonly use: /** Willans line: P_fuel = (T w + friction w) / slope, with the friction torque [N m] and the slope in (0, 1]. */
    | { readonly kind: 'willans'; readonly friction: number; readonly slope: number }
    /** Brake specific fuel consumption [kg/J] over shaft speed (rows) and brake torque (columns, > 0) with the idle consumption [W] below the first. */
    | {
        readonly kind: 'bsfc';
        readonly shaftSpeed: Float64Array;
        readonly torque: Float64Array;
        readonly consumption: Float64Array;
        readonly idlePower: number;
      };
  /** Lower heating value [J/kg], density [kg/m3]. */
  readonly heat: number;
  readonly density: number;
  /** Tank [m3]; null: no range. */
  readonly tank: number | null;
}

/** An engine with gears. */
export interface EngineDriveSpec extends CombustionSpec {
  /** Whole ratios from crankshaft to wheel, first gear first, decreasing. */
  readonly ratios: readonly number[];
  /** Engaged, index into `ratios`. */
  readonly gear: number;
  /** Rolling radius of the driven wheel [m]. */
  readonly wheelRadius: number;
  readonly gearbox: Gearbox;
}

/** An engine with a belt and a centrifugal clutch. */
export interface VariatorDriveSpec extends CombustionSpec {
  /** Whole ratios from crankshaft to wheel. */
  readonly leastRatio: number;
  readonly greatestRatio: number;
  readonly wheelRadius: number;
  /** Engine-speed line over throttle [rad/s]. */
  readonly line: { readonly throttle: Float64Array; readonly shaftSpeed: Float64Array };
  /** First-order lag of the ratio [s]. */
  readonly ratioLag: number;
  /** Shaft speeds at which the clutch begins to close, and is locked [rad/s]. */
  readonly clutch: { readonly begins: number; readonly locked: number };
}
