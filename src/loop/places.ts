import { cellOf } from '../numeric/interpolate.ts';
import type { Road } from '../road/road.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';

function between(over: Float64Array, x: number, column: Float64Array): number {
  const i = cellOf(over, x);
  return column[i] + shareOf(over, i, x) * (column[i + 1] - column[i]);
}

/** How far x is on the way from knot i to the next, in [0, 1]. */
function shareOf(over: Float64Array, i: number, x: number): number {
  const width = over[i + 1] - over[i];
  return width > 0 ? Math.min(1, Math.max(0, (x - over[i]) / width)) : 0;
}

/** Station at a horizontal distance [m]; the ends beyond the road. */
export function stationAt(road: Road, distance: number): number {
  return between(road.distance, distance, road.station);
}

/** Horizontal distance [m] at a station. */
export function distanceAt(road: Road, station: number): number {
  return between(road.station, station, road.distance);
}

/** Horizontal distance [m] at a station in a known cell (the one that `cellOf` finds for it). */
export function distanceIn(road: Road, cell: number, station: number): number {
  const share = shareOf(road.station, cell, station);
  return road.distance[cell] + share * (road.distance[cell + 1] - road.distance[cell]);
}

/** What a vehicle meets a share of the way from knot i to the next. */
export function surroundingsBetween(road: Road, i: number, share: number): Surroundings {
  const between = (column: Float64Array): number =>
    share === 0 ? column[i] : column[i] + share * (column[i + 1] - column[i]);
  return {
    grade: between(road.grade),
    headwind: between(road.headwind),
    crosswind: between(road.crosswind),
    airDensity: between(road.airDensity),
    airTemperature: between(road.airTemperature),
  };
}

/** What a vehicle meets at a station. */
export function surroundingsAt(road: Road, station: number): Surroundings {
  const i = cellOf(road.station, station);
  return surroundingsBetween(road, i, shareOf(road.station, i, station));
}
