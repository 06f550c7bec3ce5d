// An electric drive for tests: 400 N up to 8 kW, drag 30 N, regeneration 200 N more, on a battery of 4 MJ.
import type { BatterySpec, HeatingSpec } from '../../src/vehicle/battery-spec.ts';
import { electricDrive } from '../../src/vehicle/electric-drive.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { vehicleOf } from './vehicle-of.ts';

interface ElectricOptions {
  readonly battery?: Partial<BatterySpec>;
  readonly heating?: HeatingSpec | null;
  readonly traction?: Vehicle['traction'];
}

export function electricOf({ battery = {}, heating = null, traction = null }: ElectricOptions = {}): Vehicle {
  return {
    ...vehicleOf(),
    traction,
    drive: electricDrive({
      peakForce: 400,
      peakPower: 8000,
      closedThrottleForce: 30,
      regenerationForce: 200,
      regenerationPower: null,
      fadeSpeed: 0,
      throttleMin: -1,
      lag: 0.1,
      efficiency: { drive: 0.8, regeneration: 0.6 },
      battery: { capacity: 4e6, charge: 0.6, reserve: 0.1, cells: null, acceptance: null, ...battery },
      heating,
    }),
  };
}

/** Takes nothing when it is full, all from 90 % down. */
export const FULL_FADE = { charge: Float64Array.of(0.9, 1), share: Float64Array.of(1, 0) };

/** 80 V empty and 100 V full over no resistance, 90 V nominal: all of the force from half of the charge up. */
export const SAGGING = {
  openVoltage: { charge: Float64Array.of(0, 1), voltage: Float64Array.of(80, 100) },
  resistance: 0,
  nominalVoltage: 90,
};
