import { valueAt } from '../road/lookup.ts';
import type { Road } from '../road/road.ts';
import type { Stretch } from './findings.ts';

/** A hill here is a stretch at least this steep, one way, and at least this long [m]. */
const STEEP = 0.02;
const LONG = 200;
/** Its end is this share of it. */
const END = 0.3;
/** A grade that changes by no more is steady [1/m]: one point in 100 m. */
const STEADY = 1e-4;

/** The last 30 % of every stretch of 200 m or more that is 2 % or steeper, up or down, in order along the way. */
export function hillEnds({ size, distance, grade }: Road): Stretch[] {
  const ends: Stretch[] = [];
  let from = 0;
  const sideOf = (i: number): number => (Math.abs(grade[i]) >= STEEP ? Math.sign(grade[i]) : 0);
  for (let i = 1; i <= size; i++) {
    if (i < size && sideOf(i) === sideOf(from)) continue;
    const to = distance[i - 1];
    const length = to - distance[from];
    if (sideOf(from) !== 0 && length >= LONG) ends.push({ from: to - END * length, to });
    from = i;
  }
  return ends;
}

/** The grade changes little between two places [m]. */
export const isSteady = (road: Road, from: number, to: number): boolean =>
  Math.abs(valueAt(road, 'grade', to) - valueAt(road, 'grade', from)) <= STEADY * (to - from);
