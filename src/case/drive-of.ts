import { fromKw } from '../units/convert.ts';
import type { Drive } from '../vehicle/drive.ts';
import { electricDrive } from '../vehicle/electric-drive.ts';
import { engineDrive } from '../vehicle/engine-drive.ts';
import { forceDrive } from '../vehicle/force-drive.ts';
import { variatorDrive } from '../vehicle/variator-drive.ts';
import { atFileKeys } from './at-file-keys.ts';
import { engineSpecOf, variatorSpecOf } from './combustion-of.ts';
import type { DriveFile } from './drive-schemas.ts';
import { electricSpecOf } from './electric-of.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import type { Path } from './yaml-source.ts';

/** A vehicle without a drive coasts. The drive law needs a force above 0: this one moves nothing [N]. */
const NO_FORCE = 0.001;

/** Where the keys of the compilers stand in a file, below its drive: each with all that follows on it. */
const KEYS: Readonly<Record<string, Path>> = {
  peakForce: ['peak_force_n'],
  peakPower: ['peak_power_kw'],
  closedThrottleForce: ['closed_throttle_force_n'],
  lag: ['lag_s'],
  torque: ['torque'],
  drag: ['closed_throttle_drag'],
  fuelCut: ['fuel_cut'],
  stall: ['stall_rpm'],
  idle: ['idle_rpm'],
  revLimit: ['rev_limit_rpm'],
  limitBand: ['rev_limit_band_rpm'],
  efficiency: ['driveline_efficiency_pct'],
  inertia: ['engine_inertia_kg_m2'],
  ratios: ['gear_ratios'],
  gear: ['gear'],
  gearbox: ['gearbox'],
  wheelRadius: ['wheel_radius_m'],
  line: ['belt', 'line'],
  clutch: ['clutch'],
};

/**
 * The drive of a vehicle file, compiled to the one drive law; one that moves nothing where the file has none.
 *
 * @param gear engaged, from 1, in the place of the file's own; null: that of the file
 * @throws InputError with the places of the file
 */
export function driveOf(document: VehicleDocument, gear: number | null): Drive {
  const { drive } = document.file;
  if (drive === undefined)
    return forceDrive({
      peakForce: NO_FORCE,
      peakPower: null,
      closedThrottleForce: 0,
      lag: 0,
      derate: 'none',
    });
  return atFileKeys(document, 'drive', KEYS, () => compile(drive, gear));
}

/** True where the file has no drive: such a vehicle can only coast. */
export const onlyCoasts = ({ drive }: { readonly drive: Drive }): boolean => drive.peakForce <= NO_FORCE;

function compile(file: DriveFile, gear: number | null): Drive {
  switch (file.kind) {
    case 'force':
      return forceDrive({
        peakForce: file.peak_force_n,
        peakPower: file.peak_power_kw === undefined ? null : fromKw(file.peak_power_kw),
        closedThrottleForce: file.closed_throttle_force_n,
        lag: file.lag_s,
        derate: file.altitude_derate,
      });
    case 'engine':
      return engineDrive(engineSpecOf(file, gear));
    case 'variator':
      return variatorDrive(variatorSpecOf(file));
    case 'electric':
      return electricDrive(electricSpecOf(file));
  }
}
