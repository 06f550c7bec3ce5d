import type { Drive } from './drive.ts';

/** Numbers a cell holds: a0, a1, b0, b1, b2, b3. */
export const CELL_SIZE = 6;

/** Where a shaft speed or a throttle falls among inner edges: the number of edges at or below it. */
export function cellIndex(edges: Float64Array, x: number): number {
  let index = 0;
  while (index < edges.length && x >= edges[index]!) index++;
  return index;
}

/** Closed-throttle torque and what full opening adds, with their derivatives by shaft speed, in one cell. */
interface CellLaw {
  readonly closed: number;
  readonly closedSlope: number;
  readonly gain: number;
  readonly gainSlope: number;
}

function lawAt(drive: Drive, throttleCell: number, shaftSpeed: number, derate: number): CellLaw {
  const row = cellIndex(drive.speedEdges, shaftSpeed) * (drive.throttleEdges.length + 1);
  const at = CELL_SIZE * (row + throttleCell);
  const c = drive.cells;
  const w = shaftSpeed;
  const b3 = c[at + 5]!;
  const closed = c[at]! + c[at + 1]! * w;
  const closedSlope = c[at + 1]!;
  const gain = c[at + 2]! + w * (c[at + 3]! + w * c[at + 4]!) + (b3 === 0 ? 0 : b3 / w);
  const gainSlope = c[at + 3]! + 2 * w * c[at + 4]! - (b3 === 0 ? 0 : b3 / (w * w));
  if (derate === 1) return { closed, closedSlope, gain, gainSlope };
  return {
    closed,
    closedSlope,
    gain: derate * (gain + closed) - closed,
    gainSlope: derate * (gainSlope + closedSlope) - closedSlope,
  };
}

/**
 * Steady wheel force of the one drive law (see `Drive`): lag, limits of the actuator and stall are not in it.
 *
 * @param drive compiled drive
 * @param gear index into `drive.gears`
 * @param speed of the wheel [m/s], >= 0
 * @param throttle any value; outside of the range the law goes on in a straight line
 * @param derate factor of the full-throttle torque, 1 for none (`derateFactor`)
 * @returns [N]
 */
export function wheelForce(
  drive: Drive,
  gear: number,
  speed: number,
  throttle: number,
  derate: number,
): number {
  const { ratio } = drive.gears[gear]!;
  const law = lawAt(drive, cellIndex(drive.throttleEdges, throttle), ratio * speed, derate);
  return ratio * (law.closed + throttle * law.gain);
}

/** Derivatives of the wheel force by speed [N/(m/s)] and by throttle [N]; from the upper side at an edge. */
export function wheelForceSlopes(
  drive: Drive,
  gear: number,
  speed: number,
  throttle: number,
  derate: number,
): { readonly bySpeed: number; readonly byThrottle: number } {
  const { ratio } = drive.gears[gear]!;
  const law = lawAt(drive, cellIndex(drive.throttleEdges, throttle), ratio * speed, derate);
  return {
    bySpeed: ratio * ratio * (law.closedSlope + throttle * law.gainSlope),
    byThrottle: ratio * law.gain,
  };
}

/** Force at the lower and the upper end of the throttle's range [N]. */
export function forceRange(
  drive: Drive,
  gear: number,
  speed: number,
  derate: number,
): { readonly least: number; readonly greatest: number } {
  return {
    least: wheelForce(drive, gear, speed, drive.throttleMin, derate),
    greatest: wheelForce(drive, gear, speed, drive.throttleMax, derate),
  };
}

/**
 * Throttle that gives a wheel force at a speed. Beyond the range of the drive its outer cells go on in a straight line,
 * so that the answer says how far out of reach the force is; compare it with `throttleMin` and `throttleMax`.
 *
 * @param force [N]
 * @returns the throttle; where the law steps over the force, the throttle of the step; null where no throttle gives it
 * (regeneration at standstill)
 */
export function throttleFor(
  drive: Drive,
  gear: number,
  speed: number,
  force: number,
  derate: number,
): number | null {
  const { ratio } = drive.gears[gear]!;
  const edges = drive.throttleEdges;
  const first = cellIndex(edges, drive.throttleMin);
  let last = cellIndex(edges, drive.throttleMax);
  if (last > first && edges[last - 1] === drive.throttleMax) last -= 1;
  let stepFrom = false;
  for (let cell = first; cell <= last; cell++) {
    const law = lawAt(drive, cell, ratio * speed, derate);
    if (law.gain === 0) {
      stepFrom = false;
      continue;
    }
    const throttle = (force / ratio - law.closed) / law.gain;
    const low = cell === first ? Number.NEGATIVE_INFINITY : edges[cell - 1]!;
    const high = cell === last ? Number.POSITIVE_INFINITY : edges[cell]!;
    if (throttle >= low && throttle <= high) return throttle;
    if (throttle < low && stepFrom) return low;
    stepFrom = throttle > high;
  }
  return null;
}
