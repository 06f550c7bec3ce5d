import { describe, test } from 'vitest';
import { type ContinuousCommand, solveContinuous } from '../../src/loop/continuous.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';
import { feetOf, raisedCosines, type WrittenHill } from './raised-cosines.ts';
import { referenceMotorcycle } from './scenes.ts';

// The reference solutions are good to about 1e-11 m/s and printed to 13 figures.
const SPEED = 1e-9;

interface MotorcycleCase {
  readonly case: string;
  readonly v0_m_s: number;
  readonly kp: number | null;
  readonly ki: number | null;
  readonly kaw: number | null;
  readonly throttle_limits: number[] | null;
  readonly t_end_s: number;
  readonly metrics: { readonly final_v_m_s: number; readonly distance_m: number };
  readonly t_s?: number[];
  readonly s_m?: number[];
  readonly v_m_s?: number[];
  readonly F_N?: number[];
  readonly u_command?: number[];
  readonly elevation_m?: number[];
}

function commandOf(c: MotorcycleCase, reference: (time: number) => number): ContinuousCommand {
  if (c.kp === null) return { kind: 'locked' };
  return {
    kind: 'pi',
    kp: c.kp,
    ki: c.ki ?? 0,
    setpointWeight: 1,
    trackingRate: c.kaw ?? 0,
    limited: c.throttle_limits !== null,
    reference,
  };
}

function checkMotorcycle(
  c: MotorcycleCase,
  hills: readonly WrittenHill[],
  reference: (time: number) => number,
  corners: readonly number[],
): void {
  const grade = raisedCosines(hills);
  const solution = solveContinuous({
    vehicle: referenceMotorcycle,
    command: commandOf(c, reference),
    surroundings: (distance) => ({
      grade: grade(distance),
      headwind: 5,
      crosswind: 0,
      airDensity: 1.2,
      airTemperature: 288.15,
    }),
    corners: { distances: feetOf(hills), times: corners },
    startSpeed: c.v0_m_s,
    times: c.t_s ?? [c.t_end_s],
  });
  if (c.t_s === undefined) {
    expectClose(solution.speed, [c.metrics.final_v_m_s], SPEED, 'final speed');
    expectClose(solution.distance, [c.metrics.distance_m], 1e-7, 'distance');
    return;
  }
  expectClose(solution.speed, c.v_m_s!, SPEED, 'speed');
  expectClose(solution.distance, c.s_m!, 1e-8, 'distance');
  expectClose(solution.command, c.u_command!, 1e-9, 'command');
  expectClose(solution.driveForce, c.F_N!, 1e-6, 'force');
  expectClose(solution.elevation, c.elevation_m!, 1e-8, 'elevation');
}

describe('the continuous loop against solutions from outside', () => {
  const routes = ['motorcycle_route_a', 'motorcycle_route_b_saturation'];
  for (const name of routes) {
    const file = readReference<{ route: WrittenHill[]; cases: MotorcycleCase[] }>(`loop/${name}.json`);
    for (const c of file.cases)
      test(`${name}, ${c.case}`, () => checkMotorcycle(c, file.route, () => c.v0_m_s, []));
  }

  const step = readReference<{ cases: MotorcycleCase[] }>('loop/motorcycle_set_speed_step.json');
  for (const c of step.cases)
    test(`set speed 20 to 25 m/s at 5 s, ${c.case}`, () => {
      // The reference's row at 5 s is the one before the step.
      const rows = c.t_s?.map((t) => (t === 5 ? 5 - 1e-12 : t));
      checkMotorcycle(
        { ...c, ...(rows === undefined ? {} : { t_s: rows }) },
        [],
        (t) => (t < 5 ? 20 : 25),
        [5],
      );
    });
});

interface CarCase {
  readonly case: string;
  readonly hill_deg: number;
  readonly mass_kg: number;
  readonly throttle_limits: number[] | null;
  readonly kaw: number;
  readonly t_end_s: number;
  readonly metrics: { readonly final_v_m_s: number; readonly final_u_command: number };
  readonly t_s?: number[];
  readonly v_m_s?: number[];
  readonly u_command?: number[];
}

// T(w) = 190 (1 - 0.4 (w / 420 - 1)^2) N m in fourth gear, w = 12 v: the one drive law without its closed-throttle part.
const shape = 190 * 0.4;
const carDrive: Drive = {
  ...referenceMotorcycle.drive,
  kind: 'engine',
  cells: Float64Array.of(0, 0, 190 - shape, (2 * shape) / 420, -shape / (420 * 420), 0),
  gears: [{ ratio: 12, inertia: 0 }],
  lag: 0,
};
const car = (mass: number): Vehicle => ({
  ...referenceMotorcycle,
  mass,
  drive: carDrive,
  roadLoad: { cda: 0.32 * 2.4, yawGain: 0, yawTable: null, c0: 0.01, c1: 0, c2: 0 },
});

describe('the textbook car on its hill', () => {
  for (const name of ['astrom_murray_hill4', 'astrom_murray_hill6_windup']) {
    const file = readReference<{ cases: CarCase[] }>(`loop/${name}.json`);
    for (const c of file.cases)
      test(`${name}, ${c.case}`, () => {
        const steepest = (c.hill_deg * Math.PI) / 180;
        const solution = solveContinuous({
          vehicle: car(c.mass_kg),
          command: {
            kind: 'pi',
            kp: 0.5,
            ki: 0.1,
            setpointWeight: 1,
            trackingRate: c.kaw,
            limited: c.throttle_limits !== null,
            reference: () => 20,
          },
          surroundings: (_, time) => ({
            grade: Math.tan(steepest * Math.min(1, Math.max(0, time - 5))),
            headwind: 0,
            crosswind: 0,
            airDensity: 1.3,
            airTemperature: 288.15,
          }),
          corners: { distances: [], times: [5, 6] },
          startSpeed: 20,
          times: c.t_s ?? [c.t_end_s],
          gravity: 9.8,
          rollingWithoutSlope: true,
        });
        if (c.t_s === undefined) {
          expectClose(solution.speed, [c.metrics.final_v_m_s], SPEED, 'final speed');
          expectClose(solution.command, [c.metrics.final_u_command], SPEED, 'final command');
          return;
        }
        expectClose(solution.speed, c.v_m_s!, SPEED, 'speed');
        expectClose(solution.command, c.u_command!, SPEED, 'command');
      });
  }
});
