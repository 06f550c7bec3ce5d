import { wheelForce } from '../../vehicle/drive-law.ts';
import { throttleRange } from '../../vehicle/throttle-range.ts';
import type { Vehicle } from '../../vehicle/vehicle.ts';

/** Steady wheel forces at both end stops of the throttle [N], grip apart: what the drive has in one gear. */
export function endForces(
  vehicle: Pick<Vehicle, 'drive' | 'actuator'>,
  gear: number,
  speed: number,
  derate: number,
): { readonly least: number; readonly greatest: number } {
  const { least, greatest } = throttleRange(vehicle);
  return {
    least: wheelForce(vehicle.drive, gear, speed, least, derate),
    greatest: wheelForce(vehicle.drive, gear, speed, greatest, derate),
  };
}
