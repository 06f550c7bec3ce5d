import { describe, expect, test } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import type { Actuator } from '../../src/vehicle/vehicle.ts';
import { planOver } from './scenes.ts';
import { belt, CUT, clutch, engine, engineLaw, hills, switching } from './switching-scenes.ts';
import { switchingSpeeds } from './switching-solver.ts';

const worst = (plan: LoopPlan, fine: readonly number[]): number => {
  const { series } = replay(plan, { settledAt: 0 }, plan.road.distance[plan.road.size - 1]!);
  expect(Math.abs(series.size - fine.length)).toBeLessThanOrEqual(1);
  let most = 0;
  for (let k = 0; k < Math.min(series.size, fine.length); k++)
    most = Math.max(most, Math.abs(series.speed[k]! - fine[k]!));
  return most;
};

// Where something steps, an error of 1e-6 m/s may move the step by a sample: the fast scheme then is off by the step.
// A rate limit as slow as the one here makes the loop swing, and what is off with it.
describe('error of speed at 50 Hz against a solver that bisects every switch', () => {
  const scenes: readonly [string, Drive, Partial<Actuator>, number, number, Partial<LoopPlan>][] = [
    ['slack behind a lag', engine(0), { slack: 0.03 }, 2e-8, 2e-5, {}],
    ['slack behind a lag with a rate limit', engine(0), { slack: 0.03, rateLimit: 0.02 }, 2e-8, 5e-4, {}],
    ['slack without a lag', engine(0), { slack: 0.03, lag: 0 }, 2e-8, 2e-5, {}],
    ['a command in steps', engine(0), { resolution: 0.02 }, 2e-8, 2e-2, {}],
    [
      'steps, slack and end stops',
      engine(0),
      { resolution: 0.01, slack: 0.02, travel: { least: 0.02, greatest: 0.6 } },
      2e-8,
      2e-5,
      {},
    ],
    ['a fuel cut', engine(CUT), {}, 2e-8, 2e-2, {}],
    ['a fuel cut, slack and steps', engine(CUT), { slack: 0.02, resolution: 0.01 }, 2e-8, 2e-2, {}],
    ['a fuel cut without a lag of the drive', engine(CUT, { lag: 0 }), {}, 2e-8, 2e-2, {}],
    [
      'two planned shifts',
      engine(0, { gearbox: clutch }),
      {},
      2e-8,
      2e-5,
      {
        rider: {
          brakesAbove: null,
          shifts: [
            { distance: 300, gear: 0 },
            { distance: 700, gear: 2 },
          ],
        },
      },
    ],
    [
      'a belt',
      engine(0, { gears: [{ ratio: 34, inertia: 0.02 * 34 * 34 }], gear: 0, belt }),
      {},
      2e-8,
      2e-5,
      {},
    ],
  ];
  for (const [name, drive, actuator, exact, fast, more] of scenes)
    test(name, () => {
      const plan = planOver(hills, switching(drive, actuator), more);
      const fine = switchingSpeeds(plan, engineLaw(drive.cells[0] === -6 ? 0 : CUT), 5e-4);
      expect(worst(plan, fine)).toBeLessThan(exact);
      expect(worst({ ...plan, scheme: 'fast' }, fine)).toBeLessThan(fast);
    });
});
