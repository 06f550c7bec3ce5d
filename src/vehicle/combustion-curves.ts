import { cellOf } from '../numeric/interpolate.ts';
import type { CombustionSpec, TorqueSpec } from './engine-spec.ts';
import { piecewiseLinear } from './piecewise-linear.ts';
import { shapeNodes, throttleShape } from './throttle-shape.ts';

/** Torque of an engine as its maker tells it, three ways of telling brought to one. Torques at the crankshaft [N m]. */
export interface CombustionCurves {
  /** Shaft speeds [rad/s] between which closed and full torque are straight, or the full torque a parabola; not sorted. */
  readonly corners: readonly number[];
  /** Throttles between which the share is straight, from 0 to 1; where it changes with shaft speed, the ends alone. */
  readonly throttle: Float64Array;
  /** Torque is straight between no nodes: the share changes with shaft speed, or a parabola is bent once more where the driveline turns. */
  readonly bends: boolean;
  /** Torque at closed throttle, negative where it holds back; at full throttle. */
  readonly closed: (shaftSpeed: number) => number;
  readonly full: (shaftSpeed: number) => number;
  /** Share of the way from closed to full torque over the throttle, at a shaft speed. */
  readonly share: (shaftSpeed: number) => (throttle: number) => number;
  /** Second-order coefficient of the full torque between two neighbouring corners [N m s2]. */
  readonly curvature: (from: number, to: number) => number;
}

/**
 * @param spec checked (`checkCombustion`). Without `drag` closed throttle gives no torque, or that of the map. Below idle
 * the shape of part throttle is that at idle: the closed form makes an on-off valve of it.
 */
export function combustionCurves({
  torque,
  drag,
  idle,
  efficiency,
}: Pick<CombustionSpec, 'torque' | 'drag' | 'idle' | 'efficiency'>): CombustionCurves {
  const closed = (w: number): number =>
    drag === null ? 0 : -piecewiseLinear(drag.shaftSpeed, drag.torque, w);
  const dragCorners = drag === null ? [] : [...drag.shaftSpeed];
  switch (torque.kind) {
    case 'parabola': {
      const { peak, peakSpeed, falloff } = torque;
      const reach = falloff === 0 ? Number.POSITIVE_INFINITY : 1 / Math.sqrt(falloff);
      // What holds back goes through the driveline the other way: that is no parabola any more, and nodes stand for it.
      const bends = efficiency < 1 && dragCorners.some((w) => closed(w) < 0);
      const zeros = [peakSpeed * (1 - reach), peakSpeed * (1 + reach)] as const;
      return {
        corners: [...dragCorners, ...zeros.filter((w) => w > 0 && Number.isFinite(w))],
        throttle: Float64Array.of(0, 1),
        bends,
        closed,
        full: (w) => {
          const away = w / peakSpeed - 1;
          return Math.max(0, peak * (1 - falloff * away * away));
        },
        share: () => (throttle) => throttle,
        curvature: (from, to) =>
          !bends && to > zeros[0] && from < zeros[1] ? (-peak * falloff) / (peakSpeed * peakSpeed) : 0,
      };
    }
    case 'full_load': {
      const { shape, shapeSpeed } = torque;
      const bends = shapeSpeed !== null && shape > 0;
      return {
        corners: [...dragCorners, ...torque.shaftSpeed, ...(bends ? [idle] : [])],
        throttle: bends ? Float64Array.of(0, 1) : shapeNodes(shape),
        bends,
        closed,
        full: (w) => piecewiseLinear(torque.shaftSpeed, torque.torque, w),
        share: (w) => throttleShape(bends ? (shape * shapeSpeed) / Math.max(w, idle) : shape),
        curvature: () => 0,
      };
    }
    case 'map':
      return mapCurves(torque);
  }
}

function mapCurves(map: Extract<TorqueSpec, { readonly kind: 'map' }>): CombustionCurves {
  const { shaftSpeed, throttle } = map;
  const last = throttle.length - 1;
  const columns = Array.from(throttle, (_, j) =>
    Float64Array.from(shaftSpeed, (_w, i) => map.torque[i * throttle.length + j]!),
  );
  const column = (j: number, w: number): number => piecewiseLinear(shaftSpeed, columns[j]!, w);
  return {
    corners: [...shaftSpeed],
    throttle,
    bends: false,
    closed: (w) => column(0, w),
    full: (w) => column(last, w),
    share: (w) => {
      const closed = column(0, w);
      const full = column(last, w);
      if (full <= closed) return (x) => x;
      return (x) => {
        const j = cellOf(throttle, x);
        const along = (x - throttle[j]!) / (throttle[j + 1]! - throttle[j]!);
        const low = column(j, w);
        return (low + along * (column(j + 1, w) - low) - closed) / (full - closed);
      };
    },
    curvature: () => 0,
  };
}
