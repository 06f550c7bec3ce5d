import { describe, expect, test } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Actuator, Vehicle } from '../../src/vehicle/vehicle.ts';
import { forceOf, laggedVehicle, planOver, roadOver, stations } from './scenes.ts';
import { type LawScene, switchingSpeeds } from './switching-solver.ts';

// An invented engine: closed-throttle drag 6 + w/100 N m, 5 N m more with the fuel cut below 5 % of throttle, full
// throttle 60 N m at 300 rad/s less 0.1 N m for each rad/s beside it, part throttle 70 % of it at half travel.
const drag = (w: number): number => 6 + 0.01 * w;
const CUT = 5;
const engineLaw = (cut: number): LawScene => ({
  torque: (w, x, i, j) => {
    const opened = j < 2 ? 1.4 * x : 0.7 + 0.6 * (x - 0.5);
    const full = i === 0 ? 60 + 0.1 * (w - 300) : 60 - 0.1 * (w - 300);
    return -drag(w) + opened * full - (j === 0 ? cut : 0);
  },
  shaftEdges: [300],
  throttleEdges: [0.05, 0.5],
});

function engine(cut: number, more: Partial<Drive> = {}): Drive {
  const cells: number[] = [];
  for (const [g0, g1] of [
    [30, 0.1],
    [90, -0.1],
  ] as const)
    for (const [s0, s1, extra] of [
      [0, 1.4, cut],
      [0, 1.4, 0],
      [0.4, 0.6, 0],
    ] as const)
      cells.push(-6 - extra + s0 * g0, -0.01 + s0 * g1, s1 * g0, s1 * g1, 0, 0);
  const gears = [24, 18, 14].map((ratio) => ({ ratio, inertia: 0.02 * ratio * ratio }));
  return {
    ...forceOf({ peakForce: 1000, lag: 0.1 }),
    kind: 'engine',
    speedEdges: Float64Array.of(300),
    throttleEdges: Float64Array.of(0.05, 0.5),
    cells: Float64Array.from(cells),
    losses: new Float64Array(cells.length),
    gears,
    gear: 1,
    ...more,
  };
}

const vehicle = (drive: Drive, actuator: Partial<Actuator> = {}): Vehicle => ({
  ...laggedVehicle,
  roadLoad: { ...laggedVehicle.roadLoad, yawGain: 0 },
  drive,
  actuator: { ...IDEAL_ACTUATOR, lag: 0.06, ...actuator },
  sensor: IDEAL_SENSOR,
});

/** Up by 4 % and down by 14 %, so that the throttle closes on every descent. */
const hills = roadOver(stations(1200, 10), {
  grade: (s) => 0.09 * Math.sin(s / 90) - 0.05,
  headwind: (s) => 2 + Math.sin(s / 300),
});

const worst = (plan: LoopPlan, fine: readonly number[]): number => {
  const { series } = replay(plan, { settledAt: 0 }, plan.road.distance[plan.road.size - 1]!);
  expect(Math.abs(series.size - fine.length)).toBeLessThanOrEqual(1);
  let most = 0;
  for (let k = 0; k < Math.min(series.size, fine.length); k++)
    most = Math.max(most, Math.abs(series.speed[k]! - fine[k]!));
  return most;
};

const clutch = { kind: 'clutch', open: 0.4, resume: 0.6 } as const;
const belt = {
  least: 12,
  greatest: 34,
  throttle: Float64Array.of(0.1, 0.8),
  shaftSpeed: Float64Array.of(250, 420),
  lag: 0.3,
  inertia: 0.02,
};

// Where something steps, an error of 1e-6 m/s may move the step by a sample: the fast scheme then is off by the step.
describe('error of speed at 50 Hz against a solver that bisects every switch', () => {
  const scenes: readonly [string, Drive, Partial<Actuator>, number, number, Partial<LoopPlan>][] = [
    ['slack behind a lag', engine(0), { slack: 0.03 }, 2e-8, 2e-5, {}],
    ['slack behind a lag with a rate limit', engine(0), { slack: 0.03, rateLimit: 0.02 }, 2e-8, 2e-5, {}],
    ['slack without a lag', engine(0), { slack: 0.03, lag: 0 }, 2e-8, 2e-5, {}],
    ['a command in steps', engine(0), { resolution: 0.02 }, 2e-8, 5e-2, {}],
    [
      'steps, slack and end stops',
      engine(0),
      { resolution: 0.01, slack: 0.02, travel: { least: 0.02, greatest: 0.6 } },
      2e-8,
      2e-5,
      {},
    ],
    ['a fuel cut', engine(CUT), {}, 2e-8, 5e-2, {}],
    ['a fuel cut, slack and steps', engine(CUT), { slack: 0.02, resolution: 0.01 }, 2e-8, 5e-2, {}],
    ['a fuel cut without a lag of the drive', engine(CUT, { lag: 0 }), {}, 2e-8, 5e-2, {}],
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
      const plan = planOver(hills, vehicle(drive, actuator), more);
      const fine = switchingSpeeds(
        plan,
        engineLaw(drive.cells[0] === -6 ? 0 : CUT),
        actuator.rateLimit === undefined ? 5e-4 : 2e-4,
      );
      expect(worst(plan, fine)).toBeLessThan(exact);
      expect(worst({ ...plan, scheme: 'fast' }, fine)).toBeLessThan(fast);
    });
});
