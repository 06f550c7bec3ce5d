import type { CombustionTable } from './combustion-table.ts';
import type { Drive } from './drive.ts';

/**
 * Compiles an engine's table to the cells of the drive law: between four nodes the torque is bilinear,
 * T = k00 + k10 w + x (k01 + k11 w), a parabola adds its term in x w^2, and below its throttle the fuel cut takes what it
 * takes at closed throttle, which leaves a step at that edge.
 *
 * @param table over shaft speed and throttle
 * @param fuelCut false: the same engine without its fuel cut
 * @returns the law's part of a `Drive`; a cell for each interval of nodes and one beyond the last shaft speed
 */
export function combustionCells(
  table: CombustionTable,
  fuelCut: boolean,
): Pick<Drive, 'speedEdges' | 'throttleEdges' | 'cells' | 'losses'> {
  const { shaftSpeed, throttle, torque, loss, curvature } = table;
  const cut = fuelCut ? table.fuelCut : null;
  const columns = throttle.length;
  const cells: number[] = [];
  const losses: number[] = [];
  for (let i = 0; i < shaftSpeed.length; i++) {
    const over = (values: Float64Array, stride: number, column: number): Line => {
      const value = values[i * stride + column]!;
      const next = i + 1 < shaftSpeed.length ? values[(i + 1) * stride + column]! : value;
      return lineThrough(shaftSpeed[i]!, value, shaftSpeed[i + 1] ?? Number.POSITIVE_INFINITY, next);
    };
    const bend = curvature[i]!;
    const between = bend === 0 ? 0 : shaftSpeed[i]! * shaftSpeed[i + 1]!;
    const sum = bend === 0 ? 0 : shaftSpeed[i]! + shaftSpeed[i + 1]!;
    for (let j = 0; j + 1 < columns; j++) {
      const [x, next] = [throttle[j]!, throttle[j + 1]!];
      const lost = cut !== null && next <= cut.throttle ? over(cut.torque, 1, 0) : NOTHING;
      for (const [out, values, less] of [
        [cells, torque, lost],
        [losses, loss, NOTHING],
      ] as const) {
        const low = over(values, columns, j);
        const high = over(values, columns, j + 1);
        const at0 = (high.at0 - low.at0) / (next - x);
        const slope = (high.slope - low.slope) / (next - x);
        out.push(low.at0 - x * at0 - less.at0, low.slope - x * slope - less.slope);
        out.push(at0 + bend * between, slope - bend * sum, bend, 0);
      }
    }
  }
  return {
    speedEdges: shaftSpeed.slice(1),
    throttleEdges: throttle.slice(1, -1),
    cells: Float64Array.from(cells),
    losses: Float64Array.from(losses),
  };
}

interface Line {
  readonly at0: number;
  readonly slope: number;
}

const NOTHING: Line = { at0: 0, slope: 0 };

function lineThrough(x: number, y: number, next: number, yNext: number): Line {
  const slope = y === yNext ? 0 : (yNext - y) / (next - x);
  return { at0: y - slope * x, slope };
}
