// Vehicles that switch, as plain objects: nothing here is computed by the code under test.
import type { Drive } from '../../src/vehicle/drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Actuator, Vehicle } from '../../src/vehicle/vehicle.ts';
import { forceOf, laggedVehicle, roadOver, stations } from './scenes.ts';
import type { LawScene } from './switching-solver.ts';

// An invented engine: closed-throttle drag 6 + w/100 N m, 5 N m more with the fuel cut below 5 % of throttle, full
// throttle 60 N m at 300 rad/s less 0.1 N m for each rad/s beside it, part throttle 70 % of it at half travel.
const drag = (w: number): number => 6 + 0.01 * w;
export const CUT = 5;
export const engineLaw = (cut: number): LawScene => ({
  torque: (w, x, i, j) => {
    const opened = j < 2 ? 1.4 * x : 0.7 + 0.6 * (x - 0.5);
    const full = i === 0 ? 60 + 0.1 * (w - 300) : 60 - 0.1 * (w - 300);
    return -drag(w) + opened * full - (j === 0 ? cut : 0);
  },
  shaftEdges: [300],
  throttleEdges: [0.05, 0.5],
});

export function engine(cut: number, more: Partial<Drive> = {}): Drive {
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
    fuelCutBelow: cut > 0 ? 0.05 : 0,
    cells: Float64Array.from(cells),
    losses: new Float64Array(cells.length),
    gears,
    gear: 1,
    ...more,
  };
}

export const switching = (drive: Drive, actuator: Partial<Actuator> = {}): Vehicle => ({
  ...laggedVehicle,
  roadLoad: { ...laggedVehicle.roadLoad, yawGain: 0 },
  drive,
  actuator: { ...IDEAL_ACTUATOR, lag: 0.06, ...actuator },
  sensor: IDEAL_SENSOR,
});

/** Up by 4 % and down by 14 %, so that the throttle closes on every descent. */
export const hills = roadOver(stations(1200, 10), {
  grade: (s) => 0.09 * Math.sin(s / 90) - 0.05,
  headwind: (s) => 2 + Math.sin(s / 300),
});

export const clutch = { kind: 'clutch', open: 0.4, resume: 0.6 } as const;
export const belt = {
  least: 12,
  greatest: 34,
  throttle: Float64Array.of(0.1, 0.8),
  shaftSpeed: Float64Array.of(250, 420),
  lag: 0.3,
  inertia: 0.02,
  locked: 0,
};
