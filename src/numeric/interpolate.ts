/**
 * Piecewise-linear interpolation at places in ascending order, by one cursor that moves forward: linear time.
 *
 * @param x ascending abscissae, at least one; equal neighbours mark a step, and at the step itself the later value counts
 * @param y as long as x
 * @param at ascending; outside of x the end values are held
 */
export function interpolateLinear(x: Float64Array, y: Float64Array, at: Float64Array): Float64Array {
  const out = new Float64Array(at.length);
  const last = x.length - 1;
  let i = 0;
  for (let k = 0; k < at.length; k++) {
    const place = at[k]!;
    while (i < last && x[i + 1]! <= place) i++;
    if (i === last || place <= x[0]!) out[k] = place < x[last]! ? y[0]! : y[last]!;
    else out[k] = y[i]! + ((y[i + 1]! - y[i]!) * (place - x[i]!)) / (x[i + 1]! - x[i]!);
  }
  return out;
}

/** Largest i with x[i] <= place, by halving; 0 below the first, the last index at and past the end. `x` ascending, not empty. */
export function intervalOf(x: Float64Array, place: number): number {
  let low = 0;
  let high = x.length - 1;
  while (low < high) {
    const mid = (low + high + 1) >> 1;
    if (x[mid]! <= place) low = mid;
    else high = mid - 1;
  }
  return low;
}

/** The cell that holds a place: largest i in [0, size - 2] with x[i] <= place; the last cell at and past the end. `x` ascending, two or more. */
export function cellOf(x: Float64Array, place: number): number {
  return Math.max(0, Math.min(intervalOf(x, place), x.length - 2));
}
