import { interpolateLinear } from '../numeric/interpolate.ts';
import type { Repair } from '../track/track.ts';
import { toKm } from '../units/convert.ts';
import type { SmoothElevation } from './elevation-smoothing.ts';

/**
 * The points that the robust smoothing shut out, as repairs with their places and their height off the smoothed road;
 * neighbours make one.
 *
 * @param distance of the measured points [m]
 * @param uniform knots of the smoothed elevation [m]
 */
export function spikesOf(
  { outliers, elevation: smooth }: SmoothElevation,
  distance: Float64Array,
  elevation: Float64Array,
  uniform: Float64Array,
): Repair[] {
  const line = interpolateLinear(uniform, smooth, distance);
  const repairs: Repair[] = [];
  for (let k = 0; k < outliers.length; ) {
    let end = k;
    while (end + 1 < outliers.length && outliers[end + 1] === outliers[end]! + 1) end++;
    const points = end - k + 1;
    const from = distance[outliers[k]!]!;
    const to = distance[outliers[end]!]!;
    let most = 0;
    for (const i of outliers.slice(k, end + 1)) most = Math.max(most, Math.abs(elevation[i]! - line[i]!));
    const [km, kmTo] = [toKm(from).toFixed(3), toKm(to).toFixed(3)];
    const place = from === to ? `At km ${km}` : `From km ${km} to km ${kmTo}`;
    const what = points === 1 ? '1 point' : `${points} points`;
    repairs.push({
      kind: 'elevation_spike',
      from,
      to,
      points,
      line: null,
      message: `${place}: elevation of ${what} stands ${most.toFixed(1)} m off the road around it; left out of the smoothing.`,
    });
    k = end + 1;
  }
  return repairs;
}
