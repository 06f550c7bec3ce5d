// A plan run over its road and searched for limit cycles: what the tests of them start from.
import type { LoopPlan } from '../../src/loop/plan.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { demandOf } from '../../src/study/demand.ts';
import type { LimitCycle } from '../../src/study/findings.ts';
import { findLimitCycles } from '../../src/study/limit-cycles.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import type { EngineDriveSpec } from '../../src/vehicle/engine-spec.ts';
import { roadOf } from './road-of.ts';

/** A steady grade behind a short rise that sets the loop swinging. */
export const kicked = (length: number, grade = 0, rise = 20) =>
  roadOf([
    { length: 100, grade },
    { length: rise, grade: grade + 0.03 },
    { length: length - 100 - rise, grade },
  ]);

export function cyclesOf(plan: LoopPlan, leastAmplitude?: number): readonly LimitCycle[] {
  const { road, vehicle, hold, rider } = plan;
  return findLimitCycles({
    road,
    demand: demandOf(road, vehicle, hold, rider),
    replayed: [{ name: 'pi', plan, result: runLoop(plan) }],
    ...(leastAmplitude === undefined ? {} : { leastAmplitude }),
  });
}

/** A drive whose force steps down by `force` below a throttle. */
export function withFuelCut(drive: Drive, throttle: number, force: number): Drive {
  const [closed, ...rest] = drive.cells;
  return {
    ...drive,
    throttleEdges: Float64Array.of(throttle),
    cells: Float64Array.of(closed! - force, ...rest, closed!, ...rest),
    losses: Float64Array.of(...drive.losses, ...drive.losses),
    withoutFuelCut: drive,
    fuelCutBelow: throttle,
  };
}

const rpm = (...values: number[]): Float64Array => Float64Array.from(values, (n) => (n * Math.PI) / 30);
const row = (...values: number[]): Float64Array => Float64Array.from(values);

/**
 * A small engine with three high gears, invented, that at 60 km/h turns at 6370, 5310 and 4510 rpm. `fuelCut`: a step of
 * so many N m at closed throttle. `automatic`: the top gear needs three quarters of the throttle where the gear below does
 * with half, and the lines shift down above the one and up below the other: it hunts on a climb, though never at one throttle.
 */
export function engineOf({ fuelCut = 0, automatic = false }): EngineDriveSpec {
  return {
    torque: {
      kind: 'full_load',
      shaftSpeed: rpm(1500, 3000, 4500, 6500, 8500, 10_000),
      torque: row(7.8, 10.2, 11.4, 12, 10.8, 8.4),
      shape: 3,
      shapeSpeed: null,
    },
    drag: { shaftSpeed: rpm(1500, 5000, 10_000), torque: row(1.6, 2.6, 5) },
    fuelCut: fuelCut > 0 ? { above: 210, blend: 30, throttle: 0.02, torque: fuelCut } : null,
    idle: 136,
    stall: 84,
    revLimit: 1047,
    limitBand: 30,
    inertia: 0.008,
    efficiency: 0.92,
    lag: 0.15,
    derate: 'none',
    fuel: null,
    ratios: [12, 10, 8.5],
    gear: 2,
    wheelRadius: 0.3,
    gearbox: automatic
      ? {
          kind: 'automatic',
          throttle: row(0.2, 0.65, 0.8),
          upSpeed: rpm(5000, 5200, 7500),
          downSpeed: rpm(3000, 3500, 4900),
          gap: 0.3,
          dwell: 1.5,
        }
      : { kind: 'fixed' },
  };
}
