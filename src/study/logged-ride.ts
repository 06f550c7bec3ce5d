/** A ride that was logged on the same road, laid along it: rows in order of the distance. SI. */
export interface LoggedRide {
  readonly name: string;
  readonly size: number;
  /** Horizontal distance along the driven road [m], strictly increasing. */
  readonly distance: Float64Array;
  /** Time under way from the first row that lies on the road [s]: pauses are left out. */
  readonly time: Float64Array;
  /** True speed over ground [m/s]. */
  readonly speed: Float64Array;
  /** As a ratio, NaN in rows where the log has none; null: the log has none at all. */
  readonly throttle: Float64Array | null;
  /** Where the log left the road or does not cover it: horizontal distances [m], and why. */
  readonly gaps: readonly { readonly from: number; readonly to: number; readonly reason: string }[];
  /** How the rows were laid on the road: by position (with the rms distance from the road [m]) or by distance. */
  readonly laidBy: 'position' | 'distance';
  readonly rmsOffset: number | null;
  /** Where the ride stood still, or turned back and came again: horizontal distance [m], and for how long [s]. */
  readonly pauses: readonly RidePause[];
  /** Length of the road between rows, without the gaps [m]. */
  readonly covered: number;
  /** Where the speed comes from: the log's own column, or the way over the time. */
  readonly speedFrom: 'log' | 'way';
  /** Fixes of the log that could not be used. */
  readonly leftOut: number;
}

export interface RidePause {
  readonly at: number;
  readonly duration: number;
  readonly reason: 'stood' | 'turned_back';
}
