import { intervalOf } from '../numeric/interpolate.ts';
import type { Road } from './road.ts';

/** Columns that hold one number a knot on every road. */
export type RoadColumn =
  | 'station'
  | 'elevation'
  | 'grade'
  | 'gradeSd'
  | 'headwind'
  | 'crosswind'
  | 'airDensity'
  | 'airTemperature';

/** Last knot at or before a horizontal distance [m]; 0 before the start, the last knot at and past the end. */
export function indexAt(road: Road, distance: number): number {
  return intervalOf(road.distance, distance);
}

/** A column's value at a horizontal distance [m], linear between knots; after the step where two knots share a place; held at the ends. */
export function valueAt(road: Road, column: RoadColumn, distance: number): number {
  return between(road.distance, road[column], distance);
}

/** Horizontal distance [m] at a station ([m] along the slope, or [s] for a road along time). */
export function distanceAt(road: Road, station: number): number {
  return between(road.station, road.distance, station);
}

function between(x: Float64Array, y: Float64Array, place: number): number {
  const i = intervalOf(x, place);
  if (place <= x[i]! || i === x.length - 1) return y[i]!;
  return y[i]! + ((y[i + 1]! - y[i]!) * (place - x[i]!)) / (x[i + 1]! - x[i]!);
}
