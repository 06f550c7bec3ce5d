import { cellOf } from '../numeric/interpolate.ts';
import type { Road } from '../road/road.ts';

/** Mean of a column over [from, to] of horizontal distance: trapezoids between knots, exact for what is linear there; `to` > `from`. */
export function meanAlong(road: Road, column: Float64Array, from: number, to: number): number {
  let sum = 0;
  for (let i = cellOf(road.distance, from); i + 1 < road.size && road.distance[i] < to; i++) {
    const width = road.distance[i + 1] - road.distance[i];
    const a = Math.max(from, road.distance[i]);
    const b = Math.min(to, road.distance[i + 1]);
    if (!(b > a)) continue;
    const slope = (column[i + 1] - column[i]) / width;
    sum += (b - a) * (column[i] + slope * ((a + b) / 2 - road.distance[i]));
  }
  return sum / (to - from);
}
