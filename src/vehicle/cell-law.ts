import type { Drive } from './drive.ts';

/** Numbers a cell holds: a0, a1, b0, b1, b2, b3. */
export const CELL_SIZE = 6;

/** Where a shaft speed or a throttle falls among inner edges: the number of edges at or below it. */
export function cellIndex(edges: Float64Array, x: number): number {
  let index = 0;
  while (index < edges.length && x >= edges[index]!) index++;
  return index;
}

/** Torque at throttle 0 of one cell and what a throttle of 1 adds in it, with their derivatives by shaft speed; derated. */
export interface CellLaw {
  readonly closed: number;
  readonly closedSlope: number;
  readonly gain: number;
  readonly gainSlope: number;
}

/** One of the two halves of the law, torque or loss, in the cell that begins at `at`. */
function lawOf(c: Float64Array, at: number, w: number): CellLaw {
  const b3 = c[at + 5]!;
  return {
    closed: c[at]! + c[at + 1]! * w,
    closedSlope: c[at + 1]!,
    gain: c[at + 2]! + w * (c[at + 3]! + w * c[at + 4]!) + (b3 === 0 ? 0 : b3 / w),
    gainSlope: c[at + 3]! + 2 * w * c[at + 4]! - (b3 === 0 ? 0 : b3 / (w * w)),
  };
}

/** The law at a shaft speed in a throttle cell, whatever the throttle: what comes before a step is seen from the cell below it. */
export function lawAt(drive: Drive, throttleCell: number, shaftSpeed: number, derate: number): CellLaw {
  const row = cellIndex(drive.speedEdges, shaftSpeed) * (drive.throttleEdges.length + 1);
  const at = CELL_SIZE * (row + throttleCell);
  const torque = lawOf(drive.cells, at, shaftSpeed);
  if (derate === 1) return torque;
  const loss = lawOf(drive.losses, at, shaftSpeed);
  const lost = 1 - derate;
  return {
    closed: torque.closed - lost * loss.closed,
    closedSlope: torque.closedSlope - lost * loss.closedSlope,
    gain: torque.gain - lost * loss.gain,
    gainSlope: torque.gainSlope - lost * loss.gainSlope,
  };
}

/** First and last throttle cell of the drive's range. */
export function cellsInRange(drive: Drive): { readonly first: number; readonly last: number } {
  const edges = drive.throttleEdges;
  const first = cellIndex(edges, drive.throttleMin);
  let last = cellIndex(edges, drive.throttleMax);
  if (last > first && edges[last - 1] === drive.throttleMax) last -= 1;
  return { first, last };
}
