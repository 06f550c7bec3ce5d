import { bracketedRoot } from '../numeric/root.ts';
import { beltRatio } from './belt-law.ts';
import { cellsInRange, lawAt } from './cell-law.ts';
import type { Belt, Drive } from './drive.ts';

/** Steps in which the search crosses a stretch without corners. */
const STEPS = 4;
const TOLERANCE = 1e-14;

/**
 * Throttle that gives a wheel force while a belt at rest moves its ratio with the throttle: F = r(x) T(r(x) v, x) is
 * searched between the corners of cells and line, in four steps each, for the lowest throttle at which it rises through
 * the force; refined by Brent's method.
 *
 * @param speed of the wheel [m/s], >= 0
 * @param force [N]
 * @returns as `throttleFor`
 */
export function throttleUnderBelt(
  drive: Drive,
  belt: Belt,
  speed: number,
  force: number,
  derate: number,
): number | null {
  const { first, last } = cellsInRange(drive);
  const { throttleMin, throttleMax, throttleEdges: edges } = drive;
  const forceInCell = (throttle: number, cell: number): number => {
    const ratio = beltRatio(belt, speed, throttle);
    const law = lawAt(drive, cell, ratio * speed, derate);
    return ratio * (law.closed + throttle * law.gain);
  };
  let below = forceInCell(throttleMin, first) <= force;
  for (let cell = first; cell <= last; cell++) {
    const missing = (throttle: number): number => forceInCell(throttle, cell) - force;
    const low = cell === first ? throttleMin : edges[cell - 1]!;
    const high = cell === last ? throttleMax : edges[cell]!;
    if (below && missing(low) > 0) return low;
    const places = [low, ...[...belt.throttle].filter((x) => x > low && x < high), high];
    for (let i = 1; i < places.length; i++) {
      for (let k = 0; k < STEPS; k++) {
        const from = places[i - 1]! + ((places[i]! - places[i - 1]!) * k) / STEPS;
        const to = places[i - 1]! + ((places[i]! - places[i - 1]!) * (k + 1)) / STEPS;
        if (missing(from) <= 0 && missing(to) >= 0) return bracketedRoot(missing, from, to, TOLERANCE).x;
      }
    }
    below = missing(high) <= 0;
  }
  // Out of reach: the line of the belt holds on beyond its ends, and with it the ratio.
  const end = below ? throttleMax : throttleMin;
  const ratio = beltRatio(belt, speed, end);
  const law = lawAt(drive, below ? last : first, ratio * speed, derate);
  return law.gain > 0 ? (force / ratio - law.closed) / law.gain : null;
}
