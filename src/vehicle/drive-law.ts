import { beltRatio, beltRatioSlopes } from './belt-law.ts';
import { throttleUnderBelt } from './belt-throttle.ts';
import { cellIndex, cellsInRange, lawAt } from './cell-law.ts';
import type { Drive } from './drive.ts';

export { CELL_SIZE, cellIndex } from './cell-law.ts';

/**
 * Shaft speed over wheel speed [1/m]: of the gear, or that at which the belt comes to rest.
 *
 * @param speed of the wheel [m/s], >= 0; without a belt it does not count, nor does the throttle
 */
function shaftRatio(drive: Drive, gear: number, speed: number, throttle: number): number {
  return drive.belt === null ? drive.gears[gear]!.ratio : beltRatio(drive.belt, speed, throttle);
}

/**
 * Steady wheel force of the one drive law (see `Drive`), a belt at rest: lag, limits of the actuator and stall are not
 * in it.
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
  const ratio = shaftRatio(drive, gear, speed, throttle);
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
  const ratio = shaftRatio(drive, gear, speed, throttle);
  const law = lawAt(drive, cellIndex(drive.throttleEdges, throttle), ratio * speed, derate);
  const torqueSlope = law.closedSlope + throttle * law.gainSlope;
  const bySpeed = ratio * ratio * torqueSlope;
  const byThrottle = ratio * law.gain;
  if (drive.belt === null) return { bySpeed, byThrottle };
  // F = r T(r v, x): dF/dr = T + r v dT/dw.
  const byRatio = law.closed + throttle * law.gain + ratio * speed * torqueSlope;
  const slopes = beltRatioSlopes(drive.belt, speed, throttle);
  return {
    bySpeed: bySpeed + byRatio * slopes.bySpeed,
    byThrottle: byThrottle + byRatio * slopes.byThrottle,
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
 * so that the answer says how far out of reach the force is; compare it with `throttleMin` and `throttleMax`. Under a
 * belt, whose ratio moves with the throttle, it is searched for, and the lowest is taken at which the force rises.
 *
 * @param force [N]
 * @returns the throttle; where the law steps over the force, the throttle of the step; null where no throttle gives it
 * (regeneration at standstill, an engine beyond its limiter)
 */
export function throttleFor(
  drive: Drive,
  gear: number,
  speed: number,
  force: number,
  derate: number,
): number | null {
  if (drive.belt !== null) return throttleUnderBelt(drive, drive.belt, speed, force, derate);
  const { ratio } = drive.gears[gear]!;
  const edges = drive.throttleEdges;
  const { first, last } = cellsInRange(drive);
  let stepFrom = false;
  for (let cell = first; cell <= last; cell++) {
    const law = lawAt(drive, cell, ratio * speed, derate);
    const missing = force / ratio - law.closed;
    if (law.gain === 0) {
      stepFrom = missing >= 0;
      continue;
    }
    const throttle = missing / law.gain;
    const low = cell === first ? Number.NEGATIVE_INFINITY : edges[cell - 1]!;
    const high = cell === last ? Number.POSITIVE_INFINITY : edges[cell]!;
    if (throttle >= low && throttle <= high) return throttle;
    if (throttle < low && stepFrom) return low;
    stepFrom = throttle > high;
  }
  return null;
}
