import { cellOf } from '../numeric/interpolate.ts';
import type { DragSpec, TorqueSpec } from './engine-spec.ts';
import { piecewiseLinear } from './piecewise-linear.ts';
import { shapeNodes, throttleShape } from './throttle-shape.ts';

/** Torque of an engine as its maker tells it, three ways of telling brought to one. Torques at the crankshaft [N m]. */
export interface CombustionCurves {
  /** Shaft speeds [rad/s] between which closed and full torque are straight, or the full torque a parabola; not sorted. */
  readonly corners: readonly number[];
  /** Throttles between which the share is straight, from 0 to 1. */
  readonly throttle: Float64Array;
  /** Torque at closed throttle, negative where it holds back; at full throttle. */
  readonly closed: (shaftSpeed: number) => number;
  readonly full: (shaftSpeed: number) => number;
  /** Share of the way from closed to full torque at a throttle. */
  readonly share: (shaftSpeed: number, throttle: number) => number;
  /** Second-order coefficient of the full torque between two neighbouring corners [N m s2]. */
  readonly curvature: (from: number, to: number) => number;
}

/**
 * @param torque checked (`checkCombustion`)
 * @param drag null: closed throttle gives no torque, or that of the map
 */
export function combustionCurves(torque: TorqueSpec, drag: DragSpec | null): CombustionCurves {
  const closed = (w: number): number =>
    drag === null ? 0 : -piecewiseLinear(drag.shaftSpeed, drag.torque, w);
  const dragCorners = drag === null ? [] : [...drag.shaftSpeed];
  switch (torque.kind) {
    case 'parabola': {
      const { peak, peakSpeed, falloff } = torque;
      const reach = falloff === 0 ? Number.POSITIVE_INFINITY : 1 / Math.sqrt(falloff);
      const zeros = [peakSpeed * (1 - reach), peakSpeed * (1 + reach)] as const;
      return {
        corners: [...dragCorners, ...zeros.filter((w) => w > 0 && Number.isFinite(w))],
        throttle: Float64Array.of(0, 1),
        closed,
        full: (w) => {
          const away = w / peakSpeed - 1;
          return Math.max(0, peak * (1 - falloff * away * away));
        },
        share: (_, throttle) => throttle,
        curvature: (from, to) =>
          to > zeros[0] && from < zeros[1] ? (-peak * falloff) / (peakSpeed * peakSpeed) : 0,
      };
    }
    case 'full_load':
      return {
        corners: [...dragCorners, ...torque.shaftSpeed],
        throttle: shapeNodes(torque.shape),
        closed,
        full: (w) => piecewiseLinear(torque.shaftSpeed, torque.torque, w),
        share: (_, throttle) => throttleShape(torque.shape, throttle),
        curvature: () => 0,
      };
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
    closed: (w) => column(0, w),
    full: (w) => column(last, w),
    share: (w, x) => {
      const closed = column(0, w);
      const full = column(last, w);
      if (full <= closed) return x;
      const j = cellOf(throttle, x);
      const along = (x - throttle[j]!) / (throttle[j + 1]! - throttle[j]!);
      const low = column(j, w);
      return (low + along * (column(j + 1, w) - low) - closed) / (full - closed);
    },
    curvature: () => 0,
  };
}
