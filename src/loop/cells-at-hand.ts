import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/** Copies a cell of the road to `here`, where a kernel reads it at fixed places; g sin, g cos by mass over effective mass. */
export function enterRoadCell({ p, rows, here }: Machine, row: number): void {
  const share = p[at.P_MASS] / p[at.P_EFFECTIVE_MASS];
  here[at.H_STATION] = rows[row + at.R_STATION];
  here[at.H_LENGTH] = rows[row + at.R_LENGTH];
  here[at.H_SIN] = share * rows[row + at.R_SIN];
  here[at.H_SIN + 1] = share * rows[row + at.R_SIN + 1];
  here[at.H_COS] = share * rows[row + at.R_COS];
  here[at.H_COS + 1] = share * rows[row + at.R_COS + 1];
  here[at.H_HEADWIND] = rows[row + at.R_HEADWIND];
  here[at.H_HEADWIND + 1] = rows[row + at.R_HEADWIND + 1];
  here[at.H_DERATE] = rows[row + at.R_DERATE];
  here[at.H_DERATE + 1] = rows[row + at.R_DERATE + 1];
  here[at.H_AIR] = rows[row + at.R_AIR] / p[at.P_EFFECTIVE_MASS];
  here[at.H_AIR + 1] = rows[row + at.R_AIR + 1] / p[at.P_EFFECTIVE_MASS];
}

/** Copies a cell of the drive and its edges to `here`, forces per unit of effective mass. */
export function enterDriveCell(machine: Machine, speedCell: number, throttleCell: number): void {
  const { p, cells, speedEdges, throttleEdges, here } = machine;
  const throttleCells = throttleEdges.length + 1;
  here[at.H_FLOOR] = speedCell > 0 ? speedEdges[speedCell - 1] : 0;
  here[at.H_CEILING] = speedCell < speedEdges.length ? speedEdges[speedCell] : Number.POSITIVE_INFINITY;
  here[at.H_LOW] = throttleCell > 0 ? throttleEdges[throttleCell - 1] : Number.NEGATIVE_INFINITY;
  here[at.H_HIGH] =
    throttleCell < throttleEdges.length ? throttleEdges[throttleCell] : Number.POSITIVE_INFINITY;
  const cell = 6 * (speedCell * throttleCells + throttleCell);
  const inverse = 1 / p[at.P_EFFECTIVE_MASS];
  here[at.H_CLOSED] = inverse * cells[cell];
  here[at.H_CLOSED + 1] = inverse * cells[cell + 1];
  here[at.H_FULL] = inverse * (cells[cell] + cells[cell + 2]);
  here[at.H_FULL + 1] = inverse * (cells[cell + 1] + cells[cell + 3]);
  here[at.H_FULL + 2] = inverse * cells[cell + 4];
  here[at.H_FULL + 3] = inverse * cells[cell + 5];
}
