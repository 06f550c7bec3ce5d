import { cellIndex } from '../vehicle/drive-law.ts';
import { bookTurning, loadRatio } from './engage-gear.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/**
 * Moves the ratio of a belt at the start of a sample towards where it comes to rest at the speed and throttle in hand,
 * by its first-order lag over the sample, over which it is then held: first order in the sample. What turns before the
 * belt is brought to its new speed by the vehicle: the speed changes so that the kinetic energy of both stays. Where the
 * clutch slips nothing turns along; as it locks the engine has the speed of the shaft, so that the vehicle's stays, and
 * the kinetic energy that joins or leaves is booked like that of a shift.
 */
export function moveBelt(machine: Machine): void {
  const { s, p, here } = machine;
  const belt = machine.belt!;
  const before = s[at.EFFECTIVE_MASS];
  const ratio = s[at.RATIO];
  const v = s[at.SPEED];
  const line = lineAt(belt.throttle, belt.shaftSpeed, s[at.THROTTLE]);
  const rest = line >= belt.greatest * v ? belt.greatest : line <= belt.least * v ? belt.least : line / v;
  const moved = rest + (ratio - rest) * p[at.P_BELT_KEPT];
  const turned = turnsAlong(machine);
  const turns = moved * v >= belt.locked;
  loadBelt(machine, moved, turns);
  if (turned === turns) s[at.SPEED] = v * Math.sqrt(before * here[at.H_PER_MASS]);
  else bookTurning(s, before);
  holdCell(machine);
}

/** The belt's line (see belt-law.ts) without an object for its answer: this is asked at every sample. */
function lineAt(throttle: Float64Array, shaftSpeed: Float64Array, x: number): number {
  const last = throttle.length - 1;
  if (x <= throttle[0]) return shaftSpeed[0];
  if (x >= throttle[last]) return shaftSpeed[last];
  let i = 0;
  while (x >= throttle[i + 1]) i++;
  const slope = (shaftSpeed[i + 1] - shaftSpeed[i]) / (throttle[i + 1] - throttle[i]);
  return shaftSpeed[i] + slope * (x - throttle[i]);
}

/** Puts a ratio of the belt in hand, and the effective mass that goes with it. */
export function loadBelt(machine: Machine, ratio: number, turns: boolean): void {
  loadRatio(machine, ratio, turns ? machine.belt!.inertia * ratio * ratio : 0);
}

/** What turns before the belt is in the effective mass in hand. */
export const turnsAlong = ({ s, p }: Machine): boolean => s[at.EFFECTIVE_MASS] > p[at.P_BASE_MASS];

/** The cell over speed in which the shaft turns: the one in hand, unless it has been left. */
function holdCell({ s, speedEdges }: Machine): void {
  const cell = s[at.SPEED_CELL];
  const w = s[at.RATIO] * s[at.SPEED];
  if ((cell > 0 && w < speedEdges[cell - 1]) || (cell < speedEdges.length && w > speedEdges[cell]))
    s[at.SPEED_CELL] = cellIndex(speedEdges, w);
}
