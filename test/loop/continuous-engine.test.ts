import { describe, test } from 'vitest';
import { solveContinuous } from '../../src/loop/continuous.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';
import { textbookEngine } from '../vehicle/engines.ts';
import { textbookCar } from '../vehicle/vehicles.ts';

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

// The reference solutions are good to about 1e-11 m/s and printed to 13 figures.
const SPEED = 1e-9;

describe('the textbook car on its hill, its engine and gears compiled', () => {
  for (const name of ['astrom_murray_hill4', 'astrom_murray_hill6_windup']) {
    const file = readReference<{ cases: CarCase[] }>(`loop/${name}.json`);
    test.each(file.cases)(`${name}, $case`, (c) => {
      const car = textbookCar();
      const steepest = (c.hill_deg * Math.PI) / 180;
      const solution = solveContinuous({
        vehicle: {
          ...car,
          mass: c.mass_kg,
          roadLoad: { ...car.roadLoad, c0: 0.01 },
          drive: engineDrive(textbookEngine),
        },
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
      expectClose(solution.speed, c.v_m_s ?? [c.metrics.final_v_m_s], SPEED, 'speed');
      expectClose(solution.command, c.u_command ?? [c.metrics.final_u_command], SPEED, 'command');
    });
  }
});
