import type { CombustionCurves } from './combustion-curves.ts';
import type { CombustionSpec } from './engine-spec.ts';

/** Above idle, closed-throttle torque falls from 0 to the drag of the engine within this [rad/s], some 290 rpm. */
export const GOVERNOR_BAND = 30;

/** An engine at one shaft speed, idle governor, rev limiter and driveline in it, the fuel cut not [N m]. */
export interface CombustionRow {
  readonly torque: (throttle: number) => number;
  readonly loss: (throttle: number) => number;
  /** From closed to full throttle, without the driveline. */
  readonly span: number;
}

/** @param w shaft speed [rad/s] */
export function combustionRow(spec: CombustionSpec, curves: CombustionCurves, w: number): CombustionRow {
  const { idle, efficiency, limitBand } = spec;
  const limit = spec.revLimit ?? Number.POSITIVE_INFINITY;
  const within = Math.min(w, limit);
  const closed = governedTorque(curves, idle, w);
  const gain = curves.full(within) - governedTorque(curves, idle, within);
  const span = w <= limit ? gain : gain * Math.max(0, 1 - (w - limit) / limitBand);
  const full = Math.max(0, closed + span);
  const shareAt = curves.share(within);
  const byDriveline = (torque: number): number => (torque > 0 ? efficiency : 1 / efficiency);
  return {
    torque: (x) => {
      const torque = closed + span * shareAt(x);
      return byDriveline(torque) * torque;
    },
    loss: (x) => {
      const share = shareAt(x);
      return byDriveline(closed + span * share) * full * share;
    },
    span,
  };
}

/** Closed-throttle torque as the idle governor leaves it, at the crankshaft [N m]. */
export function governedTorque(curves: CombustionCurves, idle: number, shaftSpeed: number): number {
  if (shaftSpeed <= idle) return Math.max(0, curves.closed(shaftSpeed));
  const end = idle + GOVERNOR_BAND;
  if (shaftSpeed >= end) return curves.closed(shaftSpeed);
  const atIdle = Math.max(0, curves.closed(idle));
  return atIdle + ((curves.closed(end) - atIdle) * (shaftSpeed - idle)) / GOVERNOR_BAND;
}
