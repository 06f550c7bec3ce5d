// Roads, vehicles and plans of the loop's tests, as plain objects: nothing here is computed by the code under test.

import type { LoopPlan } from '../../src/loop/plan.ts';
import type { Road } from '../../src/road/road.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';

/** What a scene's road carries at a station. */
export interface Along {
  readonly grade?: (station: number) => number;
  readonly headwind?: (station: number) => number;
  readonly crosswind?: (station: number) => number;
  readonly airDensity?: (station: number) => number;
}

/** A road over given stations (slope distance, or time with `speed` for its nominal distance). */
export function roadOver(
  station: Float64Array,
  along: Along = {},
  timed: { speed: number } | null = null,
): Road {
  const size = station.length;
  const column = (f: ((s: number) => number) | undefined, otherwise: number): Float64Array =>
    Float64Array.from(station, (s) => (f === undefined ? otherwise : f(s)));
  const grade = column(along.grade, 0);
  const distance = new Float64Array(size);
  const elevation = new Float64Array(size);
  for (let i = 1; i < size; i++) {
    const mean = 0.5 * (grade[i]! + grade[i - 1]!);
    const ds =
      (station[i]! - station[i - 1]!) * (timed === null ? 1 / Math.sqrt(1 + mean * mean) : timed.speed);
    distance[i] = distance[i - 1]! + ds;
    elevation[i] = elevation[i - 1]! + mean * ds;
  }
  return {
    along: timed === null ? 'distance' : 'time',
    name: 'scene',
    size,
    station,
    distance,
    elevation,
    rawElevation: null,
    grade,
    gradeSd: new Float64Array(size),
    heading: null,
    curvature: null,
    headwind: column(along.headwind, 0),
    crosswind: column(along.crosswind, 0),
    airDensity: column(along.airDensity, 1.2),
    airTemperature: column(undefined, 288.15),
    latitudeDeg: null,
    longitudeDeg: null,
    grid: station[1]! - station[0]!,
    smoothing: null,
    masks: [],
    repairs: [],
    warnings: [],
    turnsAt: null,
    points: null,
  };
}

/** Stations from 0 to `length` at equal steps. */
export function stations(length: number, step: number): Float64Array {
  const cells = Math.round(length / step);
  return Float64Array.from({ length: cells + 1 }, (_, i) => (i * length) / cells);
}

interface DriveScene {
  readonly peakForce: number;
  readonly peakPower?: number;
  readonly closedThrottleForce?: number;
  readonly lag?: number;
}

/** F = -Fct + x (min(Fpeak, Ppeak / v) + Fct). */
export function forceOf({ peakForce, peakPower, closedThrottleForce = 0, lag = 0 }: DriveScene): Drive {
  const below = [-closedThrottleForce, 0, peakForce + closedThrottleForce, 0, 0, 0];
  const above = [-closedThrottleForce, 0, closedThrottleForce, 0, 0, peakPower ?? 0];
  const lossBelow = [0, 0, peakForce, 0, 0, 0];
  const lossAbove = [0, 0, 0, 0, 0, peakPower ?? 0];
  return {
    kind: 'force',
    speedEdges: Float64Array.from(peakPower === undefined ? [] : [peakPower / peakForce]),
    throttleEdges: new Float64Array(0),
    cells: Float64Array.from(peakPower === undefined ? below : [...below, ...above]),
    losses: Float64Array.from(peakPower === undefined ? lossBelow : [...lossBelow, ...lossAbove]),
    gears: [{ ratio: 1, inertia: 0 }],
    gear: 0,
    gearbox: { kind: 'fixed' },
    belt: null,
    throttleMin: 0,
    throttleMax: 1,
    lag,
    derate: 'none',
    stallSpeed: 0,
    idleSpeed: 0,
    source: null,
    withoutFuelCut: null,
    fuelCutBelow: 0,
    peakForce,
    peakPower: peakPower ?? null,
    closedThrottleForce,
    regenerationForce: 0,
  };
}

/** The motorcycle of the reference solutions: 260 kg, CdA 0.6 m2, Crr 0.015, 900 N, lag 0.25 s. */
export const referenceMotorcycle: Vehicle = {
  name: 'reference motorcycle',
  mass: 260,
  payload: 0,
  rotatingMass: 0,
  roadLoad: { cda: 0.6, yawGain: 0, yawTable: null, c0: 0.015, c1: 0, c2: 0 },
  drive: forceOf({ peakForce: 900, lag: 0.25 }),
  actuator: { ...IDEAL_ACTUATOR, lag: 0, rateLimit: null },
  sensor: { ...IDEAL_SENSOR, filter: 0, delay: 0, scaleError: 0 },
  traction: null,
};

/** A light motorcycle with every lag, a power limit and closed-throttle drag. Invented. */
export const laggedVehicle: Vehicle = {
  name: 'lagged',
  mass: 215,
  payload: 15,
  rotatingMass: 9,
  roadLoad: { cda: 0.58, yawGain: 1, yawTable: null, c0: 0.012, c1: 1e-5, c2: 1e-6 },
  drive: forceOf({ peakForce: 400, peakPower: 6500, closedThrottleForce: 40, lag: 0.15 }),
  actuator: { ...IDEAL_ACTUATOR, lag: 0.06, rateLimit: 2 },
  sensor: { ...IDEAL_SENSOR, filter: 0.05, delay: 0.02, scaleError: 0 },
  traction: null,
};

/** A plan around a road: PI at 50 Hz unless something else is said. */
export function planOver(road: Road, vehicle: Vehicle, more: Partial<LoopPlan> = {}): LoopPlan {
  return {
    road,
    vehicle,
    controller: {
      kind: 'pi',
      kp: 0.15,
      ki: 0.03,
      setpointWeight: 1,
      sample: 0.02,
      computingDelay: 0,
      integration: 'forward',
      antiWindup: { kind: 'back_calculation', trackingTime: 4 },
      ramp: null,
      design: null,
    },
    hold: { setSpeed: 17, setSpeedIs: 'true_speed', startSpeed: 17, changes: [] },
    rider: { brakesAbove: null, shifts: [] },
    scheme: 'exact',
    bands: [0.5],
    bin: 50,
    timeLimit: 20_000,
    lockedSample: 0.02,
    ...more,
  };
}

/** A coasting vehicle: throttle locked at 0. */
export const coasting = { kind: 'locked', throttle: 0 } as const;
