// Vehicles of the tests. Numbers here are written out, not taken from src/.

import type { Drive } from '../../src/vehicle/drive.ts';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Surroundings } from '../../src/vehicle/surroundings.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';

export const still: Surroundings = {
  grade: 0,
  headwind: 0,
  crosswind: 0,
  airDensity: 1.2,
  airTemperature: 293.15,
};

/** The motorcycle of the reference data: 260 kg, CdA 0.6 m2, rolling 0.015, 900 N at full throttle. */
export function referenceMotorcycle(change: Partial<Vehicle> = {}): Vehicle {
  return {
    name: 'reference motorcycle',
    mass: 260,
    payload: 0,
    rotatingMass: 0,
    roadLoad: { cda: 0.6, yawGain: 0, yawTable: null, c0: 0.015, c1: 0, c2: 0 },
    drive: forceDrive({ peakForce: 900, peakPower: null, closedThrottleForce: 0, lag: 0, derate: 'none' }),
    actuator: { ...IDEAL_ACTUATOR, lag: 0, rateLimit: null },
    sensor: { ...IDEAL_SENSOR, filter: 0, delay: 0, scaleError: 0 },
    traction: null,
    ...change,
  };
}

/** The car of Astrom and Murray, Feedback Systems, section 4.1, in gear 4; g there is 9.8. */
export function textbookCar(): Vehicle {
  const peak = 190;
  const best = 420;
  const shape = 0.4;
  const drive: Drive = {
    kind: 'engine',
    speedEdges: new Float64Array(0),
    throttleEdges: new Float64Array(0),
    // T = u Tm (1 - beta (w / wm - 1)^2)
    cells: Float64Array.of(
      0,
      0,
      peak * (1 - shape),
      (2 * peak * shape) / best,
      (-peak * shape) / best ** 2,
      0,
    ),
    gears: [40, 25, 16, 12, 10].map((ratio) => ({ ratio, inertia: 0 })),
    gear: 3,
    gearbox: { kind: 'fixed' },
    belt: null,
    losses: new Float64Array(6),
    throttleMin: 0,
    throttleMax: 1,
    lag: 0,
    derate: 'none',
    stallSpeed: 0,
    idleSpeed: 0,
    source: null,
    withoutFuelCut: null,
    fuelCutBelow: 0,
    peakForce: 12 * peak,
    peakPower: null,
    closedThrottleForce: 0,
    regenerationForce: 0,
  };
  return referenceMotorcycle({
    name: 'textbook car',
    mass: 1600,
    roadLoad: { cda: 0.32 * 2.4, yawGain: 0, yawTable: null, c0: (0.01 * 9.8) / 9.80665, c1: 0, c2: 0 },
    drive,
  });
}
