import type { Road } from '../road/road.ts';
import { STANDARD_GRAVITY } from '../units/constants.ts';
import { derateFactor } from '../vehicle/derating.ts';
import type { Drive } from '../vehicle/drive.ts';
import {
  R_AIR,
  R_COS,
  R_CROSSWIND,
  R_DERATE,
  R_HEADWIND,
  R_LENGTH,
  R_SIN,
  R_STATION,
  R_STRIDE,
} from './layout.ts';

/** A road as the kernels read it. */
export interface RoadTable {
  /** One row a cell between two knots (see layout.ts); cells of no length are steps. */
  readonly rows: Float64Array;
  readonly crosswind: boolean;
}

// Tables are pure functions of road and kind of derating; a study asks for the same one hundreds of times.
const made = new WeakMap<Road, Map<Drive['derate'], RoadTable>>();

/**
 * The disturbances between knots, linear in the station: g sin(theta), g cos(theta), wind, half the density, derating.
 * sin and cos come from the grade at the knots and are themselves linear between them.
 */
export function roadTable(road: Road, derate: Drive['derate']): RoadTable {
  const kinds = made.get(road) ?? new Map<Drive['derate'], RoadTable>();
  made.set(road, kinds);
  const table = kinds.get(derate) ?? compile(road, derate);
  kinds.set(derate, table);
  return table;
}

/** Integral of a column (R_SIN, R_HEADWIND) over the station, from the start of the road to q in the cell of a row. */
export function integralTo(rows: Float64Array, row: number, column: number, q: number): number {
  const from = q - rows[row + R_STATION];
  return rows[row + column + 2] + from * (rows[row + column] + 0.5 * from * rows[row + column + 1]);
}

/** Mean of a column between two stations q0 < q1, each in the cell of its row. */
export function meanBetween(
  rows: Float64Array,
  column: number,
  row0: number,
  q0: number,
  row1: number,
  q1: number,
): number {
  return (integralTo(rows, row1, column, q1) - integralTo(rows, row0, column, q0)) / (q1 - q0);
}

function compile(road: Road, derate: Drive['derate']): RoadTable {
  const cells = road.size - 1;
  const rows = new Float64Array(cells * R_STRIDE);
  const { station, grade } = road;
  const drive = { derate };
  let climb = 0;
  let windRun = 0;
  let crosswind = false;
  const put = (at: number, near: number, far: number, length: number): void => {
    rows[at] = near;
    rows[at + 1] = length > 0 ? (far - near) / length : 0;
  };
  const gravity = (i: number): number => STANDARD_GRAVITY / Math.sqrt(1 + grade[i] * grade[i]);
  const factor = (i: number): number => derateFactor(drive, road.airDensity[i], road.airTemperature[i]);
  for (let i = 0; i < cells; i++) {
    const j = i + 1;
    const at = i * R_STRIDE;
    const length = station[j] - station[i];
    const near = gravity(i);
    const far = gravity(j);
    rows[at + R_STATION] = station[i];
    rows[at + R_LENGTH] = length;
    put(at + R_SIN, near * grade[i], far * grade[j], length);
    put(at + R_COS, near, far, length);
    put(at + R_HEADWIND, road.headwind[i], road.headwind[j], length);
    put(at + R_CROSSWIND, road.crosswind[i], road.crosswind[j], length);
    put(at + R_AIR, 0.5 * road.airDensity[i], 0.5 * road.airDensity[j], length);
    put(at + R_DERATE, factor(i), factor(j), length);
    rows[at + R_SIN + 2] = climb;
    rows[at + R_HEADWIND + 2] = windRun;
    windRun += 0.5 * (road.headwind[i] + road.headwind[j]) * length;
    climb += 0.5 * (near * grade[i] + far * grade[j]) * length;
    if (road.crosswind[i] !== 0 || road.crosswind[j] !== 0) crosswind = true;
  }
  return { rows, crosswind };
}
