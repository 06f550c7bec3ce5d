import { cellIndex } from '../vehicle/drive-law.ts';
import { bookTurning, loadRatio } from './engage-gear.ts';
import * as fit from './fittings.ts';
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
  const { s, p, here, fittings } = machine;
  const f = fittings.belt;
  const before = s[at.EFFECTIVE_MASS];
  const ratio = s[at.RATIO];
  const v = s[at.SPEED];
  const x = s[at.THROTTLE];
  // The belt's line (see belt-law.ts), its ends hold on.
  const corners = f[fit.F_BELT_CORNERS] | 0;
  const line = fit.F_BELT_LINE + corners;
  let shaftSpeed = f[line + corners - 1];
  if (x <= f[fit.F_BELT_LINE]) shaftSpeed = f[line];
  else if (x < f[line - 1]) {
    let i = fit.F_BELT_LINE;
    while (x >= f[i + 1]) i++;
    shaftSpeed = f[i + corners] + f[i + 2 * corners] * (x - f[i]);
  }
  let rest = shaftSpeed / v;
  if (shaftSpeed >= f[fit.F_GREATEST] * v) rest = f[fit.F_GREATEST];
  else if (shaftSpeed <= f[fit.F_LEAST_RATIO] * v) rest = f[fit.F_LEAST_RATIO];
  const moved = rest + (ratio - rest) * p[at.P_BELT_KEPT];
  const turned = turnsAlong(machine);
  const turns = moved * v >= f[fit.F_LOCKED];
  loadRatio(machine, moved, turns ? f[fit.F_INERTIA] * moved * moved : 0);
  if (turned === turns) s[at.SPEED] = v * Math.sqrt(before * here[at.H_PER_MASS]);
  else bookTurning(s, before);
  holdCell(machine);
}

/** Puts a ratio of the belt in hand, and the effective mass that goes with it. */
export function loadBelt(machine: Machine, ratio: number, turns: boolean): void {
  loadRatio(machine, ratio, turns ? machine.belt!.inertia * ratio * ratio : 0);
}

/** What turns before the belt is in the effective mass in hand. */
export const turnsAlong = ({ s, p }: Machine): boolean => s[at.EFFECTIVE_MASS] > p[at.P_BASE_MASS];

/** The cell over speed in which the shaft turns: the one in hand, unless it has been left. */
function holdCell({ s, speedEdges }: Machine): void {
  const cell = s[at.SPEED_CELL] | 0;
  const w = s[at.RATIO] * s[at.SPEED];
  if ((cell > 0 && w < speedEdges[cell - 1]) || (cell < speedEdges.length && w > speedEdges[cell]))
    s[at.SPEED_CELL] = cellIndex(speedEdges, w);
}
