import type { Warning } from '../problems/warning.ts';
import type { Repair } from '../track/track.ts';

/** Why a stretch of elevation was left out of the smoothing: bridges and tunnels, where the source follows the valley or the hill. */
export interface MaskedStretch {
  /** Horizontal distance along the driven road [m]. */
  readonly from: number;
  readonly to: number;
  readonly reason: string;
}

/** What the smoothing did; null for a written road or survey data. */
export interface Smoothing {
  /** `barometric`, `gnss`, ... */
  readonly source: string;
  /** Wavelength at which the smoother's gain is one half [m]. */
  readonly wavelength: number;
  readonly lambda: number;
  /** S.d. of the elevation noise, as estimated from the residuals [m]. */
  readonly residualSd: number;
  /** S.d. of grade that belongs to the source and that no smoothing removes. */
  readonly sourceGradeSd: number;
  /** Shortest hill (foot to foot) whose height the smoother keeps to 90 % [m]. */
  readonly shortestHill: number;
}

/**
 * The disturbances along the way. Arrays of equal length `size`, one value a knot; between two knots the
 * disturbances are linear in the station. Equal neighbouring stations mark a step.
 *
 * `along: 'distance'`: the station is the distance travelled along the slope, s [m], ds = dx / cos(theta).
 * `along: 'time'`: the station is time [s], and `distance` is nominal: time times the set speed at the start.
 */
export interface Road {
  readonly along: 'distance' | 'time';
  readonly name: string;
  readonly size: number;
  /** Points of the track that the driven road is made from: without those left out or cut off at the ends; null for a written road. */
  readonly points: number | null;
  /** What the loop integrates over [m] or [s]; starts at 0, does not decrease. */
  readonly station: Float64Array;
  /** Horizontal distance from the driven start [m]; what every table and chart is over. Starts at 0, does not decrease. */
  readonly distance: Float64Array;
  /** Smoothed elevation [m]. */
  readonly elevation: Float64Array;
  /** As measured, brought to the knots, outliers included [m]; null for a written road. */
  readonly rawElevation: Float64Array | null;
  /** tan(theta), positive uphill. */
  readonly grade: Float64Array;
  /** One standard deviation of the grade; zeros for a written road. */
  readonly gradeSd: Float64Array;
  /** Clockwise from true north [rad], in [0, 2 pi); null where unknown. */
  readonly heading: Float64Array | null;
  /** Of the plan, positive to the right [1/m]; null where the heading is unknown. */
  readonly curvature: Float64Array | null;
  /** Positive against travel, at rider height [m/s]. */
  readonly headwind: Float64Array;
  /** Positive from the right, at rider height [m/s]. */
  readonly crosswind: Float64Array;
  /** [kg/m3] */
  readonly airDensity: Float64Array;
  /** [K] */
  readonly airTemperature: Float64Array;
  readonly latitudeDeg: Float64Array | null;
  readonly longitudeDeg: Float64Array | null;
  /** Spacing of the uniform grid [m] (nominal distance for a road along time). */
  readonly grid: number;
  readonly smoothing: Smoothing | null;
  readonly masks: readonly MaskedStretch[];
  /** Places are horizontal distances along the driven road [m]. */
  readonly repairs: readonly Repair[];
  readonly warnings: readonly Warning[];
  /** Where the way turns round (direction: both), horizontal distance [m]; null: it does not. */
  readonly turnsAt: number | null;
}
