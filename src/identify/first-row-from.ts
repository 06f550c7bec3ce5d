import { intervalOf } from '../numeric/interpolate.ts';

/** The first row whose value is not below a level; the last row where there is none. `values` rise, not empty. */
export function firstRowFrom(values: Float64Array, level: number): number {
  const row = intervalOf(values, level);
  return values[row]! < level ? Math.min(row + 1, values.length - 1) : row;
}
