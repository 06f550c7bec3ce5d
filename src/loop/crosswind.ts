import { atan2 } from '../numeric/elementary.ts';
import { dragArea, dragAreaSlope } from '../vehicle/road-load.ts';
import type { RoadLoad } from '../vehicle/vehicle.ts';

/** Tangent of the drag over a step with crosswind: F_aero = (v + w) (near + slope (v + w)). */
export interface DragTangent {
  /** Writes [near, slope] for the air speed ahead v + w and the crosswind [m/s], half the density [kg/m3]. */
  readonly at: (ahead: number, crosswind: number, halfDensity: number) => void;
  readonly out: Float64Array;
}

/**
 * CdA(beta) va as a function of the air speed ahead, linearised once a step: with |beta| = atan2(|c|, v + w),
 * d va / d(v + w) = (v + w) / va and d|beta| / d(v + w) = -|c| / va^2. The factor (v + w) stays exact.
 */
export function dragTangent(roadLoad: RoadLoad): DragTangent {
  const out = new Float64Array(2);
  const at = (ahead: number, crosswind: number, halfDensity: number): void => {
    const side = Math.abs(crosswind);
    const airSpeed = Math.sqrt(ahead * ahead + side * side);
    if (!(airSpeed > 0)) {
      out[0] = 0;
      out[1] = 0;
      return;
    }
    const yaw = atan2(side, ahead);
    const area = dragArea(roadLoad, yaw);
    const slope = (halfDensity * (area * ahead - dragAreaSlope(roadLoad, yaw) * side)) / airSpeed;
    out[0] = halfDensity * area * airSpeed - slope * ahead;
    out[1] = slope;
  };
  return { at, out };
}
