// An invented engine of constant torque with four gears: forces and speeds can be worked out on paper.
// 30 N m at full throttle, 5 N m of drag, ratios over wheel radius 20, 14, 10, 8 1/m: 600, 420, 300, 240 N and 100, 70,
// 50, 40 N at the wheel; at 60 km/h it turns at 333, 233, 167, 133 rad/s, between idle at 100 and the limit at 500.
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import type { EngineDriveSpec } from '../../src/vehicle/engine-spec.ts';
import { variatorDrive } from '../../src/vehicle/variator-drive.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { type VehicleOptions, vehicleOf } from './vehicle-of.ts';

export const RATIOS = [20, 14, 10, 8];
export const INERTIA = 0.02;

export function gearedVehicle(
  engine: Partial<EngineDriveSpec> = {},
  options: Omit<VehicleOptions, 'drive'> & Partial<Pick<Vehicle, 'traction'>> = {},
): Vehicle {
  const drive = engineDrive({
    torque: {
      kind: 'full_load',
      shaftSpeed: Float64Array.of(60, 900),
      torque: Float64Array.of(30, 30),
      shape: 0,
      shapeSpeed: null,
    },
    drag: { shaftSpeed: Float64Array.of(60, 900), torque: Float64Array.of(5, 5) },
    fuelCut: null,
    idle: 100,
    stall: 60,
    revLimit: 500,
    limitBand: 25,
    inertia: INERTIA,
    efficiency: 1,
    lag: 0.1,
    derate: 'none',
    fuel: null,
    ratios: RATIOS,
    gear: 3,
    wheelRadius: 1,
    gearbox: { kind: 'fixed' },
    ...engine,
  });
  return { ...vehicleOf(options), traction: options.traction ?? null, drive };
}

/**
 * An invented scooter: 8 N m at every speed, 2 N m of drag, ratios 30 to 100 1/m, its belt holds the engine at 500 rad/s
 * (closed) to 800 rad/s (full throttle): 6.4 kW at full throttle from 8 to 26.7 m/s, 1 kW of drag.
 */
export function beltVehicle(): Vehicle {
  const drive = variatorDrive({
    torque: {
      kind: 'full_load',
      shaftSpeed: Float64Array.of(200, 900),
      torque: Float64Array.of(8, 8),
      shape: 0,
      shapeSpeed: null,
    },
    drag: { shaftSpeed: Float64Array.of(200, 900), torque: Float64Array.of(2, 2) },
    fuelCut: null,
    idle: 150,
    stall: 80,
    revLimit: null,
    limitBand: 1,
    inertia: 0.002,
    efficiency: 1,
    lag: 0.1,
    derate: 'none',
    fuel: null,
    leastRatio: 30,
    greatestRatio: 100,
    wheelRadius: 1,
    line: { throttle: Float64Array.of(0, 1), shaftSpeed: Float64Array.of(500, 800) },
    ratioLag: 0.4,
    clutch: { begins: 300, locked: 400 },
  });
  return { ...vehicleOf(), drive };
}
