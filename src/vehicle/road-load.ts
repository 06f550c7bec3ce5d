import { STANDARD_GRAVITY } from '../units/constants.ts';
import { checkSpec } from './check-spec.ts';
import type { RoadLoad } from './vehicle.ts';

/** Yaw angle [rad] beyond which the drag area of the formula grows no further. */
export const LARGEST_YAW = 0.44;

/** Drag area [m2] and rolling coefficients; what is left out is zero. */
export interface CoefficientSpec {
  readonly cda: number;
  /** [1/rad2] */
  readonly yawGain?: number;
  readonly yawTable?: RoadLoad['yawTable'];
  readonly c0: number;
  /** [s/m] */
  readonly c1?: number;
  /** [s2/m2] */
  readonly c2?: number;
}

/** Road load as regulations publish it, F = f0 + f1 v + f2 v^2 in still air on the level, in SI. */
export interface RegulationSpec {
  /** [N] */
  readonly f0: number;
  /** [N/(m/s)] */
  readonly f1: number;
  /** [N/(m/s)2] */
  readonly f2: number;
  /** Mass at which it was measured [kg]. */
  readonly testMass: number;
  /** Density of the air it is stated for [kg/m3]. */
  readonly airDensity: number;
  /** [1/rad2] */
  readonly yawGain?: number;
}

/**
 * Road load from a drag area and rolling coefficients.
 *
 * @throws InputError `out-of-range`
 */
export function roadLoadOfCoefficients(spec: CoefficientSpec): RoadLoad {
  const { cda, yawGain = 0, yawTable = null, c0, c1 = 0, c2 = 0 } = spec;
  checkSpec('road load', [
    { key: 'cda', value: cda, unit: 'm2', least: 0 },
    { key: 'yawGain', value: yawGain, unit: '1/rad2' },
    { key: 'c0', value: c0, unit: '', least: 0 },
    { key: 'c1', value: c1, unit: 's/m' },
    { key: 'c2', value: c2, unit: 's2/m2' },
  ]);
  return { cda, yawGain, yawTable, c0, c1, c2 };
}

/**
 * Road load from a published table: the quadratic term is the air, at its own density; constant and linear term are
 * the rolling part, which scales with the load from the mass of the test (40 CFR 86.529-98 and UN GTR No. 2 publish
 * F = a + b V^2 in this way).
 *
 * @throws InputError `out-of-range`
 */
export function roadLoadOfRegulation(spec: RegulationSpec): RoadLoad {
  const { f0, f1, f2, testMass, airDensity, yawGain = 0 } = spec;
  checkSpec('road load', [
    { key: 'f0', value: f0, unit: 'N', least: 0 },
    { key: 'f1', value: f1, unit: 'N/(m/s)' },
    { key: 'f2', value: f2, unit: 'N/(m/s)2', least: 0 },
    { key: 'testMass', value: testMass, unit: 'kg', least: 0, above: true },
    { key: 'airDensity', value: airDensity, unit: 'kg/m3', least: 0, above: true },
    { key: 'yawGain', value: yawGain, unit: '1/rad2' },
  ]);
  const weight = testMass * STANDARD_GRAVITY;
  return { cda: (2 * f2) / airDensity, yawGain, yawTable: null, c0: f0 / weight, c1: f1 / weight, c2: 0 };
}

/**
 * Drag area, wind axis, at a yaw angle: cda (1 + yawGain min(|yaw|, 0.44)^2), or the table, whose ends hold on.
 *
 * @param roadLoad of the vehicle
 * @param yaw angle between the air's way and the vehicle's [rad], either sign
 * @returns [m2]
 */
export function dragArea(roadLoad: RoadLoad, yaw: number): number {
  const size = Math.abs(yaw);
  if (roadLoad.yawTable === null) {
    const bounded = Math.min(size, LARGEST_YAW);
    return roadLoad.cda * (1 + roadLoad.yawGain * bounded * bounded);
  }
  const { yaw: angles, cda } = roadLoad.yawTable;
  const next = cellAbove(angles, size);
  if (next === 0 || next === angles.length) return cda[next === 0 ? 0 : next - 1]!;
  return cda[next - 1]! + dragAreaSlope(roadLoad, size) * (size - angles[next - 1]!);
}

/** Derivative of the drag area by |yaw| [m2/rad]; from the upper side at a corner. */
export function dragAreaSlope(roadLoad: RoadLoad, yaw: number): number {
  const size = Math.abs(yaw);
  if (roadLoad.yawTable === null) return size < LARGEST_YAW ? 2 * roadLoad.cda * roadLoad.yawGain * size : 0;
  const { yaw: angles, cda } = roadLoad.yawTable;
  const next = cellAbove(angles, size);
  if (next === 0 || next === angles.length) return 0;
  return (cda[next]! - cda[next - 1]!) / (angles[next]! - angles[next - 1]!);
}

function cellAbove(edges: Float64Array, x: number): number {
  let next = 0;
  while (next < edges.length && x >= edges[next]!) next++;
  return next;
}
