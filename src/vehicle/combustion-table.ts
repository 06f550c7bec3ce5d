import { combustionCurves } from './combustion-curves.ts';
import { combustionNodes } from './combustion-nodes.ts';
import { combustionRow } from './combustion-row.ts';
import type { CombustionSpec, FuelCutSpec } from './engine-spec.ts';

/**
 * Steady torque of an engine at its nodes, the losses of the driveline in it: T is the wheel force over the ratio.
 * Between nodes it is bilinear, plus throttle times curvature (w - w_i) (w - w_{i+1}); beyond the last shaft speed it holds on.
 */
export interface CombustionTable {
  /** Nodes [rad/s], from 0, increasing. */
  readonly shaftSpeed: Float64Array;
  /** Nodes from 0 to 1, increasing. */
  readonly throttle: Float64Array;
  /** [N m], row by row, a row for each shaft speed. Without the fuel cut. */
  readonly torque: Float64Array;
  /** Torque lost for each unit of 1 - d [N m], laid out like the torque: full throttle loses itself, closed throttle nothing. */
  readonly loss: Float64Array;
  /** Second-order coefficient of full torque between each node and the next [N m s2], of the parabola; the last is 0. */
  readonly curvature: Float64Array;
  /** What the fuel cut takes at each shaft speed [N m], >= 0, below its throttle; null: none. */
  readonly fuelCut: { readonly throttle: number; readonly torque: Float64Array } | null;
}

/**
 * Samples an engine at every corner of its curves, so that nothing is lost in between, and where the shape of part
 * throttle changes with shaft speed or the driveline turns so densely that little is, 0.3 % of full torque:
 *
 * - Idle governor: closed throttle gives its drag down to idle + 30 rad/s, rises in a straight line to 0 at idle, 0 below.
 * - Rev limiter: what the throttle adds to closed throttle falls from its value at `revLimit` to 0 over `limitBand`.
 * - Driveline: at the nodes, torque times efficiency where it drives, over efficiency where it holds back. Nodes stand
 *   close where it turns from one to the other; a parabola with such a turn is sampled too, without its own term.
 * - Altitude: the loss at a node is f (T - c) / (f - c) with full and closed torque f and c there, by the driveline like
 *   T, so that full throttle is d f exactly (ISO 1585 corrects full-load torque) and closed throttle is unchanged.
 *
 * @param spec checked (`checkCombustion`)
 */
export function combustionTable(spec: CombustionSpec): CombustionTable {
  const curves = combustionCurves(spec);
  const { efficiency, fuelCut } = spec;
  const limit = spec.revLimit ?? Number.POSITIVE_INFINITY;
  const { shaftSpeed, throttle } = combustionNodes(spec, curves);
  const columns = throttle.length;
  const torque = new Float64Array(shaftSpeed.length * columns);
  const loss = new Float64Array(torque.length);
  shaftSpeed.forEach((w, i) => {
    const at = combustionRow(spec, curves, w);
    throttle.forEach((x, j) => {
      torque[i * columns + j] = at.torque(x);
      loss[i * columns + j] = at.loss(x);
    });
  });
  return {
    shaftSpeed,
    throttle,
    torque,
    loss,
    curvature: shaftSpeed.map((w, i) =>
      i + 1 < shaftSpeed.length && w < limit ? efficiency * curves.curvature(w, shaftSpeed[i + 1]!) : 0,
    ),
    fuelCut:
      fuelCut === null
        ? null
        : { throttle: fuelCut.throttle, torque: cutAt(fuelCut, efficiency, shaftSpeed) },
  };
}

function cutAt(cut: FuelCutSpec, efficiency: number, shaftSpeed: Float64Array): Float64Array {
  return shaftSpeed.map(
    (w) => (cut.torque / efficiency) * Math.min(Math.max((w - cut.above) / cut.blend, 0), 1),
  );
}
