import { linearise } from '../vehicle/linearise.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { NotHeld } from './operating-point.ts';

/**
 * Throttle that holds a speed, or why none does.
 *
 * @param vehicle kept in its gear
 * @param speed [m/s], > 0
 */
export function steadyThrottle(
  vehicle: Vehicle,
  speed: number,
  surroundings: Surroundings,
): number | NotHeld {
  const { belt, gears, gear, stallSpeed } = vehicle.drive;
  const ratio = belt === null ? gears[gear].ratio : belt.greatest;
  if (ratio * speed < stallSpeed) return 'gear_cannot_turn';
  const model = linearise(vehicle, { speed, surroundings });
  if (model === null) return 'no_effect';
  const { least, greatest } = throttleRange(vehicle);
  if (model.throttle > greatest) return 'too_much_asked';
  if (model.throttle < least) return 'less_than_least';
  return model.feasible ? model.throttle : 'no_effect';
}
