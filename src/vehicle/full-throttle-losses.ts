import { CELL_SIZE } from './drive-law.ts';

/**
 * Losses of a drive whose cells each reach from closed to full throttle, T = a + x b: full throttle, a + b, is what
 * derating takes from, in proportion to the throttle: L = x (a + b).
 */
export function fullThrottleLosses(cells: Float64Array): Float64Array {
  const losses = new Float64Array(cells.length);
  for (let at = 0; at < cells.length; at += CELL_SIZE) {
    losses[at + 2] = cells[at]! + cells[at + 2]!;
    losses[at + 3] = cells[at + 1]! + cells[at + 3]!;
    losses[at + 4] = cells[at + 4]!;
    losses[at + 5] = cells[at + 5]!;
  }
  return losses;
}
