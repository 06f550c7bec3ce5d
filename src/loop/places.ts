import type { Road } from '../road/road.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';

/** Last index whose value is at or below x, in [0, size - 2], in a column that does not decrease. */
export function cellAt(column: Float64Array, x: number): number {
  let low = 0;
  let high = column.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (column[middle] <= x) low = middle;
    else high = middle;
  }
  return low;
}

function between(over: Float64Array, x: number, column: Float64Array): number {
  const i = cellAt(over, x);
  const width = over[i + 1] - over[i];
  const share = width > 0 ? Math.min(1, Math.max(0, (x - over[i]) / width)) : 0;
  return column[i] + share * (column[i + 1] - column[i]);
}

/** Station at a horizontal distance [m]; the ends beyond the road. */
export function stationAt(road: Road, distance: number): number {
  return between(road.distance, distance, road.station);
}

/** Horizontal distance [m] at a station. */
export function distanceAt(road: Road, station: number): number {
  return between(road.station, station, road.distance);
}

/** What a vehicle meets at a station. */
export function surroundingsAt(road: Road, station: number): Surroundings {
  const at = (column: Float64Array): number => between(road.station, station, column);
  return {
    grade: at(road.grade),
    headwind: at(road.headwind),
    crosswind: at(road.crosswind),
    airDensity: at(road.airDensity),
    airTemperature: at(road.airTemperature),
  };
}
