/** What the readers found odd, and what they did about it. */
export type RepairKind =
  | 'doubled_point' // a point without movement, merged into the one before
  | 'missing_elevation' // filled by interpolation over distance
  | 'position_jump' // one position, or a few, far off the line, left out
  | 'reversal' // distance or time running backwards for a short way, points left out
  | 'gap' // a long stretch without points, bridged
  | 'segment_joined' // two segments of the file joined
  | 'elevation_spike' // found by the road's outlier filter
  | 'non_finite'; // NaN or Infinity in a column, left out

/** A repair with its place: `from` and `to` are horizontal distances along the file's own track [m]; equal for one point. */
export interface Repair {
  readonly kind: RepairKind;
  readonly from: number;
  readonly to: number;
  /** Points of the file that it touched (0 for a gap). */
  readonly points: number;
  /** Line in the file of the first of them, where the format has lines. */
  readonly line: number | null;
  /** A whole sentence with the figures. */
  readonly message: string;
}

/**
 * A track as the file gives it, after safe repairs: points in file order, arrays of equal length `size`.
 * Angles here are degrees exactly as written in the file. Columns that the file does not have are null.
 */
export interface Track {
  readonly name: string | null;
  readonly format: 'gpx' | 'csv' | 'geojson';
  readonly size: number;
  /** Horizontal distance from the first point [m], strictly increasing; on the WGS 84 ellipsoid where it comes from positions. */
  readonly distance: Float64Array;
  readonly latitudeDeg: Float64Array | null;
  readonly longitudeDeg: Float64Array | null;
  /** [m] */
  readonly elevation: Float64Array | null;
  /** Rise over horizontal run, where the file gives it; it beats elevation. */
  readonly grade: Float64Array | null;
  /** Clockwise from true north [rad], where the file gives it. */
  readonly heading: Float64Array | null;
  /** Positive against travel [m/s], where the file gives it. */
  readonly headwind: Float64Array | null;
  /** From the first point [s]. */
  readonly time: Float64Array | null;
  /** [m/s] */
  readonly speed: Float64Array | null;
  readonly repairs: readonly Repair[];
}

/**
 * A written road: pieces of constant grade, one after the other, either all by length or all by time.
 * A written road has no noise, no smoothing and no grade uncertainty.
 */
export interface Profile {
  readonly by: 'length' | 'time';
  readonly pieces: readonly ProfilePiece[];
  /** Length of the parabola laid over each change of grade [m]; 0: the grade steps. */
  readonly verticalCurve: number;
  /** Elevation of the first point [m]. */
  readonly startElevation: number;
}
export interface ProfilePiece {
  /** Horizontal length [m] or duration [s]. */
  readonly extent: number;
  /** Rise over horizontal run. */
  readonly grade: number;
  /** Clockwise from true north [rad]; null: unknown. */
  readonly heading: number | null;
  /** [m/s]; null: from the case's wind. */
  readonly headwind: number | null;
}
