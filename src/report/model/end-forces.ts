import { wheelForce } from '../../vehicle/drive-law.ts';
import type { Vehicle } from '../../vehicle/vehicle.ts';

/** Steady wheel forces at both end stops of the throttle [N], grip apart: what the drive has in one gear. */
export function endForces(
  { drive, actuator: { travel } }: Pick<Vehicle, 'drive' | 'actuator'>,
  gear: number,
  speed: number,
  derate: number,
): { readonly least: number; readonly greatest: number } {
  const low = Math.max(drive.throttleMin, travel?.least ?? drive.throttleMin);
  const high = Math.min(drive.throttleMax, travel?.greatest ?? drive.throttleMax);
  return {
    least: wheelForce(drive, gear, speed, low, derate),
    greatest: wheelForce(drive, gear, speed, high, derate),
  };
}
