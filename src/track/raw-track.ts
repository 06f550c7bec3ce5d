/**
 * The points of one track as its file gives them, before any repair. Columns have equal length `size`, or are
 * null where the format or the file does not have them.
 *
 * A cell holds a number, or NaN where the file says nothing (an empty cell, an absent element), or Infinity
 * where the file says something that is no finite number (`NaN`, `inf`). Latitude, longitude and distance are
 * never NaN: a place that is absent was refused by the reader.
 */
export interface RawTrack {
  readonly file: string;
  readonly name: string | null;
  readonly format: 'gpx' | 'csv' | 'geojson';
  readonly size: number;
  /** Line in the file of each point; null where the format has no lines. */
  readonly line: Int32Array | null;
  /** Number of the segment that each point belongs to, not decreasing. */
  readonly segment: Int32Array;
  /** As the file gives it [m]; null where it comes from positions. */
  readonly distance: Float64Array | null;
  readonly latitudeDeg: Float64Array | null;
  readonly longitudeDeg: Float64Array | null;
  /** [m] */
  readonly elevation: Float64Array | null;
  /** Rise over run. */
  readonly grade: Float64Array | null;
  /** [rad] */
  readonly heading: Float64Array | null;
  /** [m/s] */
  readonly headwind: Float64Array | null;
  /** On any clock [s]. */
  readonly time: Float64Array | null;
  /** [m/s] */
  readonly speed: Float64Array | null;
  /** As a ratio: 1 is full, below 0 regenerates. */
  readonly throttle: Float64Array | null;
}
