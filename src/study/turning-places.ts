import { cellOf } from '../numeric/interpolate.ts';
import { valueAt } from '../road/lookup.ts';
import type { Road } from '../road/road.ts';

import type { Stretch } from './findings.ts';

/**
 * Crests and valleys of a stretch of road: knots between which the road rises or falls by at least `height`, and from
 * which it does so on both sides within the stretch. Smaller undulations are passed over.
 *
 * @param height [m], > 0
 * @returns horizontal distances in order [m], crests and valleys in turn; empty where the stretch only goes one way
 */
export function turningPlaces(road: Road, { from, to }: Stretch, height: number): number[] {
  const places: number[] = [];
  const first = valueAt(road, 'elevation', from);
  let high = { at: from, z: first };
  let low = { at: from, z: first };
  // 1: going up since the last turning, -1: down, 0: not known yet.
  let way: -1 | 0 | 1 = 0;
  const pass = (at: number, z: number): void => {
    if (z > high.z) high = { at, z };
    if (z < low.z) low = { at, z };
    if (way >= 0 && high.z - z >= height) {
      if (way > 0) places.push(high.at);
      way = -1;
      low = { at, z };
    } else if (way <= 0 && z - low.z >= height) {
      if (way < 0) places.push(low.at);
      way = 1;
      high = { at, z };
    }
  };
  for (let i = cellOf(road.distance, from) + 1; i < road.size && road.distance[i] < to; i++)
    if (road.distance[i] > from) pass(road.distance[i], road.elevation[i]);
  pass(to, valueAt(road, 'elevation', to));
  return places;
}
