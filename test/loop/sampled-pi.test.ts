import { describe, expect, test } from 'vitest';
import { replay } from '../../src/loop/replay.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
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

// The reference has the analytic grade; the loop has it straight between knots 0.5 m apart, which costs about 1e-6 m/s
// of speed over the raised cosines of route A, and more on route B, which is five times as steep.
const GRID = 0.5;
const TOLERANCE: Readonly<Record<string, number>> = { a: 1.5e-6, b: 8e-6 };

describe('a sampled PI on the motorcycle of the reference', () => {
  for (const sampled of reference.cases) {
    test(`${sampled.case}: speed, force and command at the samples`, () => {
      const route = sampled.case.startsWith('route_a') ? 'a' : 'b';
      const hills = route === 'a' ? reference.route_a : reference.route_b;
      const road = roadOver(stations(4000, GRID), {
        grade: raisedCosines(hills),
        headwind: () => 5,
      });
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
        hold: {
          setSpeed: sampled.v0_m_s,
          setSpeedIs: 'true_speed',
          startSpeed: sampled.v0_m_s,
          changes: [],
        },
        // The road has constant density 1.2 kg/m3, as the reference.
        timeLimit: sampled.t_end_s + sampled.Ts_s,
      });
      const { status, series } = replay(plan, runLoop(plan).checkpoints[0]!, 4000);
      expect(status).toBe('time_limit');
      const every = Math.round(0.5 / sampled.Ts_s);
      const rows = sampled.t_s.map((t, i) => {
        expectClose(series.time[i * every]!, t, 1e-9, 'time');
        return i * every;
      });
      const tolerance = TOLERANCE[route]!;
      const pick = (column: Float64Array): number[] => rows.map((row) => column[row]!);
      expectClose(pick(series.speed), sampled.v_m_s, tolerance, 'speed');
      expectClose(pick(series.command), sampled.u_command, tolerance, 'command');
      expectClose(pick(series.driveForce), sampled.F_N, 1000 * tolerance, 'force');
    });
  }
});
