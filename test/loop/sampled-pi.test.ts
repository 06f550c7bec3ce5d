import { describe, expect, test } from 'vitest';
import { replay } from '../../src/loop/replay.ts';
import type { FullSeries } from '../../src/loop/result.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';
import { raisedCosines, type WrittenHill } from './raised-cosines.ts';
import { planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

interface SampledCase {
  readonly case: string;
  readonly Ts_s: number;
  readonly integrator_rule: 'forward' | 'backward';
  readonly anti_windup: 'none' | 'back_calculation';
  readonly kp: number;
  readonly ki: number;
  readonly kaw: number;
  readonly t_end_s: number;
  readonly v0_m_s: number;
  readonly t_s: number[];
  readonly s_m: number[];
  readonly v_m_s: number[];
  readonly F_N: number[];
  readonly u_command: number[];
}
const reference = readReference<{ route_a: WrittenHill[]; route_b: WrittenHill[]; cases: SampledCase[] }>(
  'loop/motorcycle_sampled_pi.json',
);

// The reference has the analytic grade; the loop has it straight between knots. On a grid of 0.5 m that costs 1e-6 m/s on
// route A and 3e-5 m/s on route B, which is five times as steep. The error falls with the square of the grid, so that
// two grids extrapolate to the analytic road, and there nothing but the loop itself is left.
const GRID = 0.5;
const ON_GRID: Readonly<Record<string, number>> = { a: 1e-6, b: 3e-5 };
const EXTRAPOLATED: Readonly<Record<string, number>> = { a: 1e-9, b: 2e-8 };

function solve(sampled: SampledCase, hills: readonly WrittenHill[], grid: number): FullSeries {
  const road = roadOver(stations(4000, grid), { grade: raisedCosines(hills), headwind: () => 5 });
  const plan = planOver(road, referenceMotorcycle, {
    controller: {
      kind: 'pi',
      kp: sampled.kp,
      ki: sampled.ki,
      setpointWeight: 1,
      sample: sampled.Ts_s,
      computingDelay: 0,
      integration: sampled.integrator_rule,
      antiWindup:
        sampled.anti_windup === 'none'
          ? { kind: 'none' }
          : { kind: 'back_calculation', trackingTime: 1 / sampled.kaw },
      ramp: null,
      design: null,
    },
    hold: { setSpeed: sampled.v0_m_s, setSpeedIs: 'true_speed', startSpeed: sampled.v0_m_s, changes: [] },
    timeLimit: sampled.t_end_s + sampled.Ts_s,
  });
  const { status, series } = replay(plan, { settledAt: 0 }, 4000);
  expect(status).toBe('time_limit');
  return series;
}

describe('a sampled PI on the motorcycle of the reference', () => {
  for (const sampled of reference.cases) {
    test(`${sampled.case}: speed, force and command at the samples`, () => {
      const route = sampled.case.startsWith('route_a') ? 'a' : 'b';
      const hills = route === 'a' ? reference.route_a : reference.route_b;
      const coarse = solve(sampled, hills, GRID);
      const fine = solve(sampled, hills, GRID / 2);
      const every = Math.round(0.5 / sampled.Ts_s);
      const at = (column: Float64Array): number[] => sampled.t_s.map((_, i) => column[i * every]!);
      const both = (name: 'speed' | 'command' | 'driveForce'): number[] => {
        const rough = at(coarse[name]);
        return at(fine[name]).map((value, i) => value + (value - rough[i]!) / 3);
      };
      expectClose(at(coarse.time), sampled.t_s, 1e-9, 'time');
      expectClose(at(coarse.speed), sampled.v_m_s, ON_GRID[route]!, 'speed');
      const tolerance = EXTRAPOLATED[route]!;
      expectClose(both('speed'), sampled.v_m_s, tolerance, 'speed, extrapolated');
      expectClose(both('command'), sampled.u_command, tolerance, 'command, extrapolated');
      expectClose(both('driveForce'), sampled.F_N, 1000 * tolerance, 'force, extrapolated');
    });
  }
});
