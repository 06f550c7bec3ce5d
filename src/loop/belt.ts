import { beltRatio } from '../vehicle/belt-law.ts';
import { cellIndex } from '../vehicle/drive-law.ts';
import { decay } from './lags.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/**
 * Moves the ratio of a belt at the start of a sample towards where it comes to rest at the speed and throttle in hand,
 * by its first-order lag over the sample, over which it is then held: first order in the sample. What turns before the
 * belt is brought to its new speed by the vehicle: the speed changes so that the kinetic energy of both stays.
 */
export function moveBelt(machine: Machine): void {
  const { s, p } = machine;
  const belt = machine.belt!;
  const before = s[at.EFFECTIVE_MASS];
  const ratio = s[at.RATIO];
  const rest = beltRatio(belt, s[at.SPEED], s[at.THROTTLE]);
  loadRatio(machine, rest + (ratio - rest) * decay(belt.lag, p[at.P_SAMPLE]));
  s[at.SPEED] *= Math.sqrt(before / s[at.EFFECTIVE_MASS]);
  holdCell(machine);
}

/** Puts a ratio of the belt in hand, and the effective mass that goes with it. */
export function loadRatio({ s, p, belt }: Machine, ratio: number): void {
  s[at.RATIO] = ratio;
  s[at.EFFECTIVE_MASS] = p[at.P_BASE_MASS] + belt!.inertia * ratio * ratio;
}

/** The cell over speed in which the shaft turns: the one in hand, unless it has been left. */
function holdCell({ s, speedEdges }: Machine): void {
  const cell = s[at.SPEED_CELL];
  const w = s[at.RATIO] * s[at.SPEED];
  if ((cell > 0 && w < speedEdges[cell - 1]) || (cell < speedEdges.length && w > speedEdges[cell]))
    s[at.SPEED_CELL] = cellIndex(speedEdges, w);
}
