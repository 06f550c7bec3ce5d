// What is designed on the linear loop comes out of the replay: nonlinear vehicle, sampled controller, all lags.

import { describe, expect, test } from 'vitest';
import { designDroop } from '../../src/control/design-droop.ts';
import type { Designed, DesignPoint } from '../../src/control/design-point.ts';
import { designSettling } from '../../src/control/design-settling.ts';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { Road } from '../../src/road/road.ts';
import { electricDrive } from '../../src/vehicle/electric-drive.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import { variatorDrive } from '../../src/vehicle/variator-drive.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { single, singleWithGears } from '../vehicle/engines.ts';
import { referenceMotorcycle, still } from '../vehicle/vehicles.ts';

const motorcycle: Vehicle = referenceMotorcycle({
  rotatingMass: 9,
  drive: forceDrive({ peakForce: 900, peakPower: null, closedThrottleForce: 60, lag: 0.15, derate: 'none' }),
  actuator: { ...IDEAL_ACTUATOR, lag: 0.06, rateLimit: 8 },
  sensor: { ...IDEAL_SENSOR, filter: 0.05, delay: 0.02, scaleError: 0.015 },
});
// Above its corner speed of 9.4 m/s the drive's force falls with speed: part of the plant's own damping.
const scooter: Vehicle = referenceMotorcycle({
  mass: 190,
  drive: electricDrive({
    peakForce: 480,
    peakPower: 4500,
    closedThrottleForce: 10,
    regenerationForce: 200,
    regenerationPower: 2500,
    fadeSpeed: 2,
    throttleMin: -1,
    lag: 0.05,
    efficiency: null,
  }),
  actuator: { ...IDEAL_ACTUATOR, lag: 0, rateLimit: null },
  sensor: { ...IDEAL_SENSOR, filter: 0.1, delay: 0.137, scaleError: 0 },
});

// Dead time, and a wheel with so many pulses that a count is only late by half its window.
const late: Vehicle = {
  ...motorcycle,
  actuator: { ...motorcycle.actuator, deadTime: 0.07 },
  sensor: {
    ...motorcycle.sensor,
    pulses: { spacing: 1e-7, reading: { kind: 'counted', window: 0.15 } },
  },
};
// The last period of one pulse a metre: at 25 m/s it is 40 ms long, and the speed that it shows is that old in the mean.
const timing: Vehicle = {
  ...motorcycle,
  sensor: { ...motorcycle.sensor, pulses: { spacing: 1, reading: { kind: 'timed', clock: 1e-9 } } },
};
const engine: Vehicle = referenceMotorcycle({
  drive: engineDrive({ ...singleWithGears, gear: 3 }),
  actuator: { ...IDEAL_ACTUATOR, lag: 0.05, deadTime: 0.03, rateLimit: 8 },
  sensor: { ...IDEAL_SENSOR, filter: 0.05, delay: 0.02 },
});

// A belt between its limits, whose ratio takes 0.3 s.
const belted: Vehicle = referenceMotorcycle({
  mass: 200,
  drive: variatorDrive({
    ...single,
    torque: {
      kind: 'full_load',
      shaftSpeed: Float64Array.of(300, 600, 900),
      torque: Float64Array.of(18, 22, 20),
      shape: 2,
      shapeSpeed: null,
    },
    drag: { shaftSpeed: Float64Array.of(0, 900), torque: Float64Array.of(2, 4) },
    fuelCut: null,
    revLimit: null,
    inertia: 0.01,
    lag: 0.08,
    derate: 'none',
    leastRatio: 7.5,
    greatestRatio: 25,
    wheelRadius: 0.25,
    line: { throttle: Float64Array.of(0, 1), shaftSpeed: Float64Array.of(500, 850) },
    ratioLag: 0.3,
    clutch: { begins: 300, locked: 400 },
  }),
  actuator: { ...IDEAL_ACTUATOR, lag: 0.05 },
  sensor: { ...IDEAL_SENSOR, filter: 0.05, delay: 0.02 },
});

const point = (vehicle: Vehicle, at: number, change: Partial<DesignPoint> = {}): DesignPoint => ({
  vehicle,
  at,
  surroundings: still,
  sample: 0.02,
  computingDelay: 0.005,
  integration: 'forward',
  setpointWeight: 0,
  ...change,
});

/** A road along time, level until `start`, then on a grade. */
function steppedRoad(start: number, end: number, speed: number, grade: number): Road {
  const station = Float64Array.of(0, start, start, end);
  const fill = (value: number): Float64Array => new Float64Array(4).fill(value);
  return {
    along: 'time',
    name: 'step',
    size: 4,
    station,
    distance: station.map((t) => t * speed),
    elevation: fill(0),
    rawElevation: null,
    grade: Float64Array.of(0, 0, grade, grade),
    gradeSd: fill(0),
    heading: null,
    curvature: null,
    headwind: fill(0),
    crosswind: fill(0),
    airDensity: fill(still.airDensity),
    airTemperature: fill(still.airTemperature),
    latitudeDeg: null,
    longitudeDeg: null,
    grid: speed,
    smoothing: null,
    masks: [],
    repairs: [],
    warnings: [],
    turnsAt: null,
    points: null,
  };
}

/** Deviation of the true speed from the operating point, from the step on, one value a sample. */
function deviation(
  designed: Designed,
  at: DesignPoint,
  duration: number,
  setSpeedStep: number,
  gradeStep: number,
): number[] {
  const start = 10;
  // The set speed is what the sensor shows, so that the true speed starts at the operating point.
  const shown = 1 + at.vehicle.sensor.scaleError;
  const plan: LoopPlan = {
    road: steppedRoad(start, start + duration, at.at, gradeStep),
    vehicle: at.vehicle,
    controller: {
      kind: 'pi',
      kp: designed.kp,
      ki: designed.ki,
      setpointWeight: at.setpointWeight,
      sample: at.sample,
      computingDelay: at.computingDelay,
      integration: at.integration,
      antiWindup: { kind: 'conditional' },
      ramp: null,
      design: designed.record,
    },
    hold: {
      setSpeed: shown * at.at,
      setSpeedIs: 'indicated',
      startSpeed: shown * at.at,
      changes:
        setSpeedStep === 0
          ? []
          : [{ at: { time: start }, setSpeed: shown * (at.at + setSpeedStep), ramp: null }],
    },
    rider: { brakesAbove: null, shifts: [] },
    scheme: 'exact',
    bands: [],
    bin: 100,
    timeLimit: 1e5,
    lockedSample: at.sample,
  };
  const { status, series } = replay(plan, { settledAt: 0 }, Number.POSITIVE_INFINITY);
  expect(status).toBe('completed');
  const first = Math.round(start / at.sample);
  // Pulses, as fine as they are, are whole ones.
  const tolerance = at.vehicle.sensor.pulses === null ? 1e-9 : 1e-7;
  expectClose(series.speed[first]!, at.at, tolerance, 'speed before the step');
  return Array.from({ length: series.size - first }, (_, i) => series.speed[first + i]! - at.at);
}

const SMALL_STEP = 0.01;

describe.each([
  ['motorcycle', motorcycle, 25],
  ['motorcycle, slower', motorcycle, 15],
  ['scooter', scooter, 16],
  ['dead time and a counting window', late, 25],
  ['a timed period', timing, 25],
  ['an engine in its fourth gear', engine, 22],
  ['a belt', belted, 15],
] as const)('a small step of set speed in the replay: %s', (_, vehicle, at) => {
  test.each([
    [8, 0.05, {}],
    [5, 0.1, {}],
    [60, 0.01, {}],
    [20, 0.03, { sample: 0.1, integration: 'backward' }],
    [15, 0.05, { setpointWeight: 1 }],
    [14, 0.3, { setpointWeight: 0.4 }],
  ] as [number, number, Partial<DesignPoint>][])(
    'settles in %d s and overshoots by %d, %o',
    (settling, overshoot, change) => {
      const where = point(vehicle, at, change);
      const designed = designSettling({ ...where, settling, overshoot });
      const seen = deviation(designed, where, 4 * settling, SMALL_STEP, 0);
      expectClose(Math.max(...seen) / SMALL_STEP - 1, overshoot, 0.02 * overshoot + 2e-4, 'overshoot');
      const outside = seen.findLastIndex((x) => Math.abs(x / SMALL_STEP - 1) > 0.02);
      // To the first sample within the band.
      expectClose((outside + 1) * where.sample, settling, 0.02 * settling + where.sample, 'settling');
    },
  );
});

describe.each([
  ['motorcycle', motorcycle, 25],
  ['scooter', scooter, 14],
  ['dead time and a counting window', late, 25],
  ['an engine in its fourth gear', engine, 22],
  ['a belt', belted, 15],
] as const)('a small step of grade in the replay: %s', (_, vehicle, at) => {
  test.each([
    [2 / 3.6, 0.06, 0.8, {}],
    [1.5 / 3.6, 0.04, 0.4, {}],
    [4 / 3.6, 0.04, 1.5, { sample: 0.05, integration: 'backward' }],
  ] as [number, number, number, Partial<DesignPoint>][])(
    'costs its share of %d m/s on %d, damping %d',
    (droop, gradeStep, damping, change) => {
      const where = point(vehicle, at, change);
      const designed = designDroop({ ...where, droop, gradeStep, damping });
      const share = 0.1;
      const seen = deviation(designed, where, 60, 0, share * gradeStep);
      expectClose(-Math.min(...seen), share * droop, 0.02 * share * droop, 'droop');
      if (damping > 0.5) return;
      // Extremes that follow one another half a period apart shrink by exp(-pi zeta / sqrt(1 - zeta^2)).
      const extremes = seen.filter(
        (x, i) => i > 0 && i + 1 < seen.length && (x - seen[i - 1]!) * (seen[i + 1]! - x) < 0,
      );
      const shrink = Math.abs(extremes[2]! / extremes[1]!);
      const decrement = -Math.log(shrink);
      expectClose(decrement / Math.hypot(Math.PI, decrement), damping, 0.02 * damping, 'damping');
    },
  );
});

test('the whole step of grade costs what was asked, where the throttle stays within its range', () => {
  const where = point(motorcycle, 25);
  const droop = 2 / 3.6;
  const designed = designDroop({ ...where, droop, gradeStep: 0.06, damping: 0.8 });
  const seen = deviation(designed, where, 60, 0, 0.06);
  expectClose(-Math.min(...seen), droop, 0.02 * droop);
});
