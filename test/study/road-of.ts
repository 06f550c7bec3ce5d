// A road for tests, written out by hand: pieces of constant grade on a uniform grid, still standard air.
import type { Road } from '../../src/road/road.ts';

export interface Piece {
  readonly length: number;
  readonly grade: number;
  readonly headwind?: number;
}
export interface RoadOptions {
  readonly grid?: number;
  readonly airDensity?: number;
  readonly airTemperature?: number;
  readonly gradeSd?: number;
  readonly baseElevation?: number;
}

/** Knots every `grid` metres; at the border of two pieces two knots of equal station mark the step. */
export function roadOf(pieces: readonly Piece[], options: RoadOptions = {}): Road {
  const { grid = 10, airDensity = 1.2, airTemperature = 288.15, gradeSd = 0, baseElevation = 0 } = options;
  const rows: number[][] = [];
  let x = 0;
  let s = 0;
  let z = baseElevation;
  for (const piece of pieces) {
    const cells = Math.max(1, Math.round(piece.length / grid));
    const dx = piece.length / cells;
    const slope = Math.sqrt(1 + piece.grade * piece.grade);
    for (let k = 0; k <= cells; k++)
      rows.push([s + k * dx * slope, x + k * dx, z + k * dx * piece.grade, piece.grade, piece.headwind ?? 0]);
    x += piece.length;
    s += piece.length * slope;
    z += piece.length * piece.grade;
  }
  const size = rows.length;
  const column = (k: number): Float64Array => Float64Array.from(rows, (row) => row[k]!);
  return {
    along: 'distance',
    name: 'written',
    size,
    station: column(0),
    distance: column(1),
    elevation: column(2),
    rawElevation: null,
    grade: column(3),
    gradeSd: new Float64Array(size).fill(gradeSd),
    heading: null,
    curvature: null,
    headwind: column(4),
    crosswind: new Float64Array(size),
    airDensity: new Float64Array(size).fill(airDensity),
    airTemperature: new Float64Array(size).fill(airTemperature),
    latitudeDeg: null,
    longitudeDeg: null,
    grid,
    smoothing: null,
    masks: [],
    repairs: [],
    warnings: [],
    turnsAt: null,
    points: null,
  };
}
