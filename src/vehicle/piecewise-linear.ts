import { cellOf } from '../numeric/interpolate.ts';

/**
 * A piecewise-linear function at one place; beyond its ends the end values hold on.
 *
 * @param x increasing, one or more
 * @param y as long as x
 */
export function piecewiseLinear(x: Float64Array, y: Float64Array, at: number): number {
  const last = x.length - 1;
  if (!(at > x[0]!)) return y[0]!;
  if (at >= x[last]!) return y[last]!;
  const i = cellOf(x, at);
  return y[i]! + ((y[i + 1]! - y[i]!) * (at - x[i]!)) / (x[i + 1]! - x[i]!);
}
