import type { Road } from '../road/road.ts';

/** Last knot at or before a horizontal distance; 0 before the start, the last but one knot at the end. */
export function knotBefore(road: Road, distance: number): number {
  let low = 0;
  let high = road.size - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (road.distance[middle] <= distance) low = middle;
    else high = middle;
  }
  return low;
}

/** Value of a column at a horizontal distance, linear between knots, held beyond the ends. */
export function valueAt(road: Road, column: Float64Array, distance: number): number {
  const i = knotBefore(road, distance);
  const width = road.distance[i + 1] - road.distance[i];
  const share = width > 0 ? Math.min(1, Math.max(0, (distance - road.distance[i]) / width)) : 1;
  return column[i] + share * (column[i + 1] - column[i]);
}

/** Mean of a column over [from, to] of horizontal distance: trapezoids between knots, exact for what is linear there. */
export function meanAlong(road: Road, column: Float64Array, from: number, to: number): number {
  if (!(to > from)) return valueAt(road, column, from);
  let sum = 0;
  for (let i = knotBefore(road, from); i + 1 < road.size && road.distance[i] < to; i++) {
    const width = road.distance[i + 1] - road.distance[i];
    const a = Math.max(from, road.distance[i]);
    const b = Math.min(to, road.distance[i + 1]);
    if (!(b > a)) continue;
    const slope = (column[i + 1] - column[i]) / width;
    sum += (b - a) * (column[i] + slope * ((a + b) / 2 - road.distance[i]));
  }
  return sum / (to - from);
}
