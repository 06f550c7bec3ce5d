import { cellIndex } from '../vehicle/drive-law.ts';
import { enterDriveCell, weighRoadCell } from './cells-at-hand.ts';
import { bookTurning, loadRatio } from './engage-gear.ts';
import * as fit from './fittings.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/**
 * Moves the ratio of a belt at the start of a sample towards where it comes to rest at the speed and throttle in hand,
 * by its first-order lag over the sample, over which it is then held: first order in the sample. What turns before the
 * belt is brought to its new speed by the vehicle: the speed changes so that the kinetic energy of both stays. Where the
 * clutch slips nothing turns along; as it locks the engine has the speed of the shaft, so that the vehicle's stays, and
 * the kinetic energy that joins or leaves is booked like that of a shift. The cells of road and drive at hand follow.
 *
 * @param row of the road table, and cell over throttle, in which the vehicle is
 */
export function moveBelt(machine: Machine, row: number, throttleCell: number): void {
  const { s, p, here, fittings } = machine;
  // Relative change of the mass below which the series of its root ends in the last digit.
  const SERIES = 1e-4;

  const f = fittings.belt;
  const before = s[at.EFFECTIVE_MASS];
  const perBefore = here[at.H_PER_MASS];
  const ratio = s[at.RATIO];
  const v = s[at.SPEED];
  const x = s[at.THROTTLE];
  // The belt's line (see belt-law.ts).
  if (!(x >= f[fit.F_STRETCH] && x < f[fit.F_STRETCH + 1])) enterStretch(f, x);
  const shaftSpeed = f[fit.F_STRETCH + 2] + f[fit.F_STRETCH + 3] * (x - f[fit.F_STRETCH + 4]);
  let rest = shaftSpeed / v;
  if (shaftSpeed >= f[fit.F_GREATEST] * v) rest = f[fit.F_GREATEST];
  else if (shaftSpeed <= f[fit.F_LEAST_RATIO] * v) rest = f[fit.F_LEAST_RATIO];
  const moved = rest + (ratio - rest) * p[at.P_BELT_KEPT];
  const turned = turnsAlong(machine);
  const turns = moved * v >= f[fit.F_LOCKED];
  loadRatio(machine, moved, turns ? f[fit.F_INERTIA] * moved * moved : 0);
  if (turned === turns) {
    // Root of the mass before over that after it: where they differ little, by its series, which is right to the last
    // digit and does not wait for a division and a root.
    const d = (s[at.EFFECTIVE_MASS] - before) * perBefore;
    if (d < SERIES && d > -SERIES) s[at.SPEED] = v - v * d * (0.5 - d * (0.375 - d * 0.3125));
    else s[at.SPEED] = v * Math.sqrt(before * here[at.H_PER_MASS]);
  } else bookTurning(s, before);
  holdCell(machine);
  weighRoadCell(machine, row);
  enterDriveCell(machine, s[at.SPEED_CELL] | 0, throttleCell);
}

/** Puts the stretch of the line in which a throttle lies in hand; the ends of the line hold on. */
function enterStretch(f: Float64Array, x: number): void {
  const corners = f[fit.F_BELT_CORNERS] | 0;
  let i = 0;
  while (i < corners && x >= f[fit.F_BELT_LINE + i]) i++;
  const corner = fit.F_BELT_LINE + Math.max(0, i - 1);
  f[fit.F_STRETCH] = i > 0 ? f[corner] : Number.NEGATIVE_INFINITY;
  f[fit.F_STRETCH + 1] = i < corners ? f[fit.F_BELT_LINE + i] : Number.POSITIVE_INFINITY;
  f[fit.F_STRETCH + 2] = f[corner + corners];
  f[fit.F_STRETCH + 3] = i > 0 && i < corners ? f[corner + 2 * corners] : 0;
  f[fit.F_STRETCH + 4] = f[corner];
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
