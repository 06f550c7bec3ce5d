import { bracketedRoot } from '../numeric/root.ts';
import { type CombustionCurves, combustionCurves } from './combustion-curves.ts';
import type { CombustionSpec, FuelCutSpec } from './engine-spec.ts';

/** Above idle, closed-throttle torque falls from 0 to the drag of the engine within this [rad/s], some 290 rpm. */
export const GOVERNOR_BAND = 30;
/** Into so many parts the throttles are divided over which the driveline turns from giving to taking. */
const TURNING_STEPS = 3;
/** Nodes no further apart are one [rad/s, or throttle]. */
const SAME = 1e-9;

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
 * Samples an engine at every corner of its curves, so that nothing is lost in between:
 *
 * - Idle governor: closed throttle gives its drag down to idle + 30 rad/s, rises in a straight line to 0 at idle, 0 below.
 * - Rev limiter: what the throttle adds to closed throttle falls from its value at `revLimit` to 0 over `limitBand`.
 * - Driveline: at the nodes, torque times efficiency where it drives, over efficiency where it holds back. Nodes stand
 *   close where it turns from one to the other; the parabola, linear in the throttle, is straight over that corner.
 * - Altitude: the loss at a node is f (T - c) / (f - c) with full and closed torque f and c there, by the driveline like
 *   T, so that full throttle is d f exactly (ISO 1585 corrects full-load torque) and closed throttle is unchanged.
 *
 * @param spec checked (`checkCombustion`)
 */
export function combustionTable(spec: CombustionSpec): CombustionTable {
  const curves = combustionCurves(spec.torque, spec.drag);
  const { efficiency, limitBand, fuelCut } = spec;
  const limit = spec.revLimit ?? Number.POSITIVE_INFINITY;
  const shaftSpeed = speedNodes(spec, curves);
  const throttle = merged([
    ...curves.throttle,
    ...(fuelCut === null ? [] : [fuelCut.throttle]),
    ...turningThrottles(spec, curves, shaftSpeed),
  ]);
  const columns = throttle.length;
  const torque = new Float64Array(shaftSpeed.length * columns);
  const loss = new Float64Array(torque.length);
  shaftSpeed.forEach((w, i) => {
    const within = Math.min(w, limit);
    const closed = governedTorque(curves, spec.idle, w);
    const gain = curves.full(within) - governedTorque(curves, spec.idle, within);
    const left = w <= limit ? gain : gain * Math.max(0, 1 - (w - limit) / limitBand);
    throttle.forEach((x, j) => {
      const share = curves.share(within, x);
      const at = closed + left * share;
      const byDriveline = at > 0 ? efficiency : 1 / efficiency;
      torque[i * columns + j] = byDriveline * at;
      loss[i * columns + j] = byDriveline * Math.max(0, closed + left) * share;
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

function speedNodes(spec: CombustionSpec, curves: CombustionCurves): Float64Array {
  const { idle, revLimit, limitBand, fuelCut } = spec;
  const drags = curves.corners.some((w) => curves.closed(w) < 0);
  return merged([
    0,
    ...curves.corners.filter((w) => w > 0),
    ...(drags ? [idle, idle + GOVERNOR_BAND] : []),
    ...(revLimit === null ? [] : [revLimit, revLimit + limitBand]),
    ...(fuelCut === null ? [] : [fuelCut.above, fuelCut.above + fuelCut.blend]),
  ]);
}

/**
 * Throttles at which torque turns from holding back to driving, and the driveline with it: a few between the least and
 * the greatest of all shaft speeds. The parabola is left linear in the throttle.
 */
function turningThrottles(
  { torque, idle, efficiency, revLimit }: CombustionSpec,
  curves: CombustionCurves,
  shaftSpeed: Float64Array,
): number[] {
  if (torque.kind === 'parabola' || efficiency === 1) return [];
  let [least, greatest] = [1, 0];
  for (const w of shaftSpeed) {
    const closed = governedTorque(curves, idle, w);
    const full = curves.full(w);
    if (closed >= 0 || full <= 0 || w > (revLimit ?? w)) continue;
    const turn = bracketedRoot((x) => closed + curves.share(w, x) * (full - closed), 0, 1, SAME).x;
    least = Math.min(least, turn);
    greatest = Math.max(greatest, turn);
  }
  if (least > greatest) return [];
  const steps = greatest - least > SAME ? TURNING_STEPS : 0;
  return Array.from({ length: steps + 1 }, (_, i) => least + ((greatest - least) * i) / Math.max(1, steps));
}

/** In rising order, what differs by rounding only taken once. */
function merged(places: readonly number[]): Float64Array {
  const sorted = [...places].sort((a, b) => a - b);
  return Float64Array.from(sorted.filter((x, i) => i === 0 || x - sorted[i - 1]! > SAME));
}

/** Closed-throttle torque as the idle governor leaves it, at the crankshaft [N m]. */
export function governedTorque(curves: CombustionCurves, idle: number, shaftSpeed: number): number {
  if (shaftSpeed <= idle) return Math.max(0, curves.closed(shaftSpeed));
  const end = idle + GOVERNOR_BAND;
  if (shaftSpeed >= end) return curves.closed(shaftSpeed);
  const atIdle = Math.max(0, curves.closed(idle));
  return atIdle + ((curves.closed(end) - atIdle) * (shaftSpeed - idle)) / GOVERNOR_BAND;
}

function cutAt(cut: FuelCutSpec, efficiency: number, shaftSpeed: Float64Array): Float64Array {
  return shaftSpeed.map(
    (w) => (cut.torque / efficiency) * Math.min(Math.max((w - cut.above) / cut.blend, 0), 1),
  );
}
