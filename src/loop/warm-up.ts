import type { ControllerSetup } from '../control/setup.ts';
import type { Road } from '../road/road.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { LoopPlan } from './plan.ts';
import { runLoop } from './run-loop.ts';

/**
 * Runs a given vehicle and controller over a short road by both schemes, with hills and winds that take the kernels
 * through their rare branches, so that a compiler that learns from what it has seen need not learn again in the middle
 * of a long run. Gives nothing back and changes no later result.
 *
 * @param vehicle as it will be run
 * @param controller as it will be run
 */
export function warmUp(vehicle: Vehicle, controller: ControllerSetup): void {
  for (const scheme of ['exact', 'fast'] as const)
    for (const crosswind of [0, 3]) {
      const plan: LoopPlan = {
        road: practiceRoad(crosswind),
        vehicle,
        controller,
        hold: {
          setSpeed: 15,
          setSpeedIs: 'true_speed',
          startSpeed: 15,
          changes: [{ at: { distance: 700 }, setSpeed: 16, ramp: 0.5 }],
        },
        rider: { brakesAbove: 1 },
        scheme,
        bands: [0.5],
        bin: 10,
        timeLimit: 300,
        lockedSample: 0.02,
      };
      runLoop(plan);
    }
}

const KNOTS = 201;
const SPACING = 10;

/** Level, a wall, a plunge, level again. */
function practiceRoad(crosswind: number): Road {
  const column = (value: (i: number) => number): Float64Array =>
    Float64Array.from({ length: KNOTS }, (_, i) => value(i));
  const zeros = column(() => 0);
  const place = column((i) => i * SPACING);
  return {
    along: 'distance',
    name: 'practice',
    size: KNOTS,
    station: place,
    distance: place,
    elevation: zeros,
    rawElevation: null,
    grade: column((i) => (i > 40 && i < 70 ? 0.1 : i > 100 && i < 150 ? -0.12 : 0)),
    gradeSd: zeros,
    heading: null,
    curvature: null,
    headwind: column((i) => (i % 7) - 2),
    crosswind: column(() => crosswind),
    airDensity: column(() => 1.2),
    airTemperature: column(() => 288.15),
    latitudeDeg: null,
    longitudeDeg: null,
    grid: SPACING,
    smoothing: null,
    masks: [],
    repairs: [],
    warnings: [],
    turnsAt: null,
    points: null,
  };
}
