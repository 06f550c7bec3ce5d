// Vehicles and plans for tests, in SI, with what a test does not name left ideal.

import type { PiSetup } from '../../src/control/setup.ts';
import type { HoldPlan, LoopPlan } from '../../src/loop/plan.ts';
import type { Road } from '../../src/road/road.ts';
import { type ForceDriveSpec, forceDrive } from '../../src/vehicle/force-drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Actuator, Vehicle } from '../../src/vehicle/vehicle.ts';

export interface VehicleOptions {
  readonly mass?: number;
  readonly payload?: number;
  readonly rotatingMass?: number;
  readonly cda?: number;
  readonly c0?: number;
  readonly drive?: Partial<ForceDriveSpec>;
  readonly actuator?: Partial<Actuator>;
}

export function vehicleOf(options: VehicleOptions = {}): Vehicle {
  const { mass = 215, payload = 15, rotatingMass = 5, cda = 0.58, c0 = 0.014 } = options;
  return {
    name: 'test vehicle',
    mass,
    payload,
    rotatingMass,
    roadLoad: { cda, yawGain: 0, yawTable: null, c0, c1: 0, c2: 0 },
    drive: forceDrive({
      peakForce: 260,
      peakPower: null,
      closedThrottleForce: 40,
      lag: 0.1,
      derate: 'none',
      ...options.drive,
    }),
    actuator: { ...IDEAL_ACTUATOR, lag: 0.06, rateLimit: null, ...options.actuator },
    sensor: { ...IDEAL_SENSOR, filter: 0.05, delay: 0.02, scaleError: 0 },
    traction: null,
  };
}

export const HOLD_60: HoldPlan = {
  setSpeed: 60 / 3.6,
  setSpeedIs: 'true_speed',
  startSpeed: 60 / 3.6,
  changes: [],
};

export function piOf(options: Partial<PiSetup> = {}): PiSetup {
  return {
    kind: 'pi',
    kp: 0.3,
    ki: 0.05,
    setpointWeight: 0,
    sample: 0.02,
    computingDelay: 0,
    integration: 'forward',
    antiWindup: { kind: 'back_calculation', trackingTime: 2 },
    ramp: null,
    design: null,
    ...options,
  };
}

export function planOf(
  road: Road,
  vehicle: Vehicle,
  controller: LoopPlan['controller'],
  more: Partial<LoopPlan> = {},
): LoopPlan {
  return {
    road,
    vehicle,
    controller,
    hold: HOLD_60,
    rider: { brakesAbove: null, shifts: [] },
    scheme: 'exact',
    bands: [2 / 3.6],
    bin: 20,
    timeLimit: 36_000,
    lockedSample: 0.02,
    ...more,
  };
}
