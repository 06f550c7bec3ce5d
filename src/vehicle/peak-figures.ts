import { CELL_SIZE, cellIndex } from './cell-law.ts';
import type { Drive } from './drive.ts';

/** Greatest figures of a drive's full throttle over a range of shaft speeds, and its strongest drag at closed throttle. */
export interface PeakFigures {
  /** [N m] */
  readonly torque: number;
  /** [W] */
  readonly power: number;
  /** [N m], positive where it holds back. */
  readonly drag: number;
}

/**
 * Looks at both ends of every cell and at the turning points of torque and power within it, so that the peak is exact.
 *
 * @param law compiled cells
 * @param from least shaft speed [rad/s]
 * @param to greatest shaft speed [rad/s]; at infinity only corners of the law count
 */
export function peakFigures(
  law: Pick<Drive, 'speedEdges' | 'throttleEdges' | 'cells'>,
  from: number,
  to: number,
): PeakFigures {
  const { speedEdges: edges, throttleEdges, cells } = law;
  const columns = throttleEdges.length + 1;
  let [torque, power, drag] = [0, 0, 0];
  for (let i = cellIndex(edges, from); i <= edges.length && (i === 0 || edges[i - 1]! <= to); i++) {
    const low = Math.max(from, edges[i - 1] ?? 0);
    const high = Math.min(to, edges[i] ?? (Number.isFinite(to) ? to : low));
    const first = CELL_SIZE * i * columns;
    const at = first + CELL_SIZE * (columns - 1);
    const [c0, c1, c2] = [cells[at]! + cells[at + 2]!, cells[at + 1]! + cells[at + 3]!, cells[at + 4]!];
    for (const w of [low, high, ...turningPoints(c0, c1, c2).filter((x) => x > low && x < high)]) {
      const full = c0 + w * (c1 + w * c2);
      torque = Math.max(torque, full);
      power = Math.max(power, full * w);
      drag = Math.max(drag, -(cells[first]! + cells[first + 1]! * w));
    }
  }
  return { torque, power, drag };
}

/** Where c0 + c1 w + c2 w^2 turns, and where w times it does. */
function turningPoints(c0: number, c1: number, c2: number): readonly number[] {
  if (c2 === 0) return c1 === 0 ? [] : [-c0 / (2 * c1)];
  const root = Math.sqrt(Math.max(0, c1 * c1 - 3 * c0 * c2));
  return [-c1 / (2 * c2), (-c1 + root) / (3 * c2), (-c1 - root) / (3 * c2)];
}
