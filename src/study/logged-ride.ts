/** A ride that was logged on the same road, laid along it: rows in order of the distance. SI. */
export interface LoggedRide {
  readonly name: string;
  readonly size: number;
  /** Horizontal distance along the driven road [m], strictly increasing. */
  readonly distance: Float64Array;
  /** From the first row that lies on the road [s]. */
  readonly time: Float64Array;
  /** True speed over ground [m/s]. */
  readonly speed: Float64Array;
  /** 0 to 1; null: the log has none. */
  readonly throttle: Float64Array | null;
  /** Where the log left the road or does not cover it: horizontal distances [m], and why. */
  readonly gaps: readonly { readonly from: number; readonly to: number; readonly reason: string }[];
  /** How the rows were laid on the road: by position (with the rms distance from the road [m]) or by distance. */
  readonly laidBy: 'position' | 'distance';
  readonly rmsOffset: number | null;
}
