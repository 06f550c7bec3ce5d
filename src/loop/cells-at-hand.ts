import { cellIndex } from '../vehicle/drive-law.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/** Copies a cell of the road to `here`, where a kernel reads it at fixed places; g sin, g cos by mass over effective mass. */
export function enterRoadCell(machine: Machine, row: number): void {
  const { rows, here } = machine;
  here[at.H_STATION] = rows[row + at.R_STATION];
  here[at.H_LENGTH] = rows[row + at.R_LENGTH];
  here[at.H_HEADWIND] = rows[row + at.R_HEADWIND];
  here[at.H_HEADWIND + 1] = rows[row + at.R_HEADWIND + 1];
  here[at.H_DERATE] = rows[row + at.R_DERATE];
  here[at.H_DERATE + 1] = rows[row + at.R_DERATE + 1];
  weighRoadCell(machine, row);
}

/** What changes of a road cell with the effective mass. */
export function weighRoadCell({ p, rows, here }: Machine, row: number): void {
  const inverse = here[at.H_PER_MASS];
  const share = p[at.P_MASS] * inverse;
  here[at.H_SIN] = share * rows[row + at.R_SIN];
  here[at.H_SIN + 1] = share * rows[row + at.R_SIN + 1];
  here[at.H_COS] = share * rows[row + at.R_COS];
  here[at.H_COS + 1] = share * rows[row + at.R_COS + 1];
  here[at.H_AIR] = inverse * rows[row + at.R_AIR];
  here[at.H_AIR + 1] = inverse * rows[row + at.R_AIR + 1];
}

/** Copies a cell of the drive and its edges to `here`, over vehicle speed, forces per unit of effective mass. */
export function enterDriveCell(machine: Machine, speedCell: number, throttleCell: number): void {
  const { s, p, cells, losses, speedEdges, throttleEdges, here } = machine;
  const throttleCells = throttleEdges.length + 1;
  const ratio = s[at.RATIO];
  const perRatio = here[at.H_PER_RATIO];
  here[at.H_FLOOR] = speedCell > 0 ? speedEdges[speedCell - 1] * perRatio : 0;
  here[at.H_CEILING] =
    speedCell < speedEdges.length ? speedEdges[speedCell] * perRatio : Number.POSITIVE_INFINITY;
  here[at.H_LOW] = throttleCell > 0 ? throttleEdges[throttleCell - 1] : Number.NEGATIVE_INFINITY;
  here[at.H_HIGH] =
    throttleCell < throttleEdges.length ? throttleEdges[throttleCell] : Number.POSITIVE_INFINITY;
  // F = r T(r v): the hyperbola b3 / w keeps its power whatever the ratio, but for an open clutch.
  const cell = 6 * (speedCell * throttleCells + throttleCell);
  const inverse = here[at.H_PER_MASS];
  const flat = ratio * inverse;
  const slanted = ratio * flat;
  const bent = ratio * slanted;
  const power = ratio > 0 ? inverse : 0;
  here[at.H_LAW] = flat * cells[cell];
  here[at.H_LAW + 1] = slanted * cells[cell + 1];
  here[at.H_LAW + 2] = flat * cells[cell + 2];
  here[at.H_LAW + 3] = slanted * cells[cell + 3];
  here[at.H_LAW + 4] = bent * cells[cell + 4];
  here[at.H_LAW + 5] = power * cells[cell + 5];
  if (p[at.P_DERATED] === 0) return;
  here[at.H_LOSS] = flat * losses[cell];
  here[at.H_LOSS + 1] = slanted * losses[cell + 1];
  here[at.H_LOSS + 2] = flat * losses[cell + 2];
  here[at.H_LOSS + 3] = slanted * losses[cell + 3];
  here[at.H_LOSS + 4] = bent * losses[cell + 4];
  here[at.H_LOSS + 5] = power * losses[cell + 5];
}

/** What the force, per unit of effective mass, jumps up by where a throttle passes the step of the law, underated. */
export function lawStep({ s, p, cells, speedEdges, throttleEdges }: Machine, v: number): number {
  const x = p[at.P_LAW_STEP];
  const w = s[at.RATIO] * v;
  const below = throttleEdges.indexOf(x);
  const cell = 6 * (cellIndex(speedEdges, w) * (throttleEdges.length + 1) + below);
  const torque = (c: number): number =>
    cells[c] + cells[c + 1] * w + x * (cells[c + 2] + w * (cells[c + 3] + w * cells[c + 4]));
  return below < 0 ? 0 : ((torque(cell + 6) - torque(cell)) * s[at.RATIO]) / s[at.EFFECTIVE_MASS];
}
