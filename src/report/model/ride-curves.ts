import type { BinRecord } from '../../loop/result.ts';
import type { RideResult } from '../../study/ride-figures.ts';
import { type Curve, plainCurve } from './columns.ts';

/** The lanes that a log can fill. */
export type RideLane = 'speed' | 'error' | 'throttle';

/** A logged ride in a lane, SI: a curve for each stretch between its gaps; none where the log does not have it. */
export function rideCurves(ride: RideResult, lane: RideLane): readonly Curve[] {
  const { distance, speed, setSpeed, throttle } = ride;
  if (lane === 'throttle' && throttle === null) return [];
  const values =
    lane === 'error' ? speed.map((v, i) => v - setSpeed[i]!) : lane === 'speed' ? speed : throttle!;
  return rideStretches(ride).map(([from, to]) =>
    plainCurve(distance.subarray(from, to), values.subarray(from, to)),
  );
}

/** Rows of a ride from a gap to the next: first, and one past the last. */
export function rideStretches({ distance, size, gaps }: RideResult): readonly (readonly [number, number])[] {
  const starts = new Set(gaps.map(({ from }) => from));
  const stretches: [number, number][] = [];
  let from = 0;
  for (let i = 0; i < size; i++) {
    if (i + 1 < size && !starts.has(distance[i]!)) continue;
    stretches.push([from, i + 1]);
    from = i + 1;
  }
  return stretches;
}

/** True speed of a candidate by distance [m/s]. */
export function speedCurve({ size, edge, speedMean, speedMin, speedMax }: BinRecord): Curve {
  const at = new Float64Array(size);
  for (let i = 0; i < size; i++) at[i] = (edge[i]! + edge[i + 1]!) / 2;
  return { size, at, low: speedMin, mean: speedMean, high: speedMax };
}
