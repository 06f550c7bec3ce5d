import { bracketedRoot } from '../numeric/root.ts';
import { staysIn } from '../vehicle/authority.ts';
import { derateFactor } from '../vehicle/derating.ts';
import { wheelForce } from '../vehicle/drive-law.ts';
import { SPEED_CEILING, settledSpeed } from '../vehicle/equilibrium.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import { gripForce } from '../vehicle/traction.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { keptInGear } from './gear-course.ts';

/** In the place of standstill [m/s]. */
const SLOWEST = 1e-9;
const TOLERANCE = 1e-10;

/**
 * Speed to which full throttle, or what of it the grip of the driven wheel passes on, sinks from a speed that it cannot
 * hold, and holds for ever.
 *
 * @param vehicle in a gear; where the gearbox chooses, the best of all gears counts
 * @param from [m/s], > 0
 * @returns [m/s]; `from` where it is held; 0 where the vehicle stops or its gear can turn no longer
 */
export function sustainedFrom(vehicle: Vehicle, at: Surroundings, from: number): number {
  const { greatest } = throttleRange(vehicle);
  return overGears(vehicle, (kept) => {
    const speed = settle(kept, at, greatest, from, -1);
    return staysIn(vehicle.drive, kept.drive.gear, speed, greatest) ? speed : 0;
  });
}

/** Speed to which the vehicle runs away from `from` with the least throttle, as far as the grip passes its force on; `from` where that holds it [m/s]. */
export function runawayFrom(vehicle: Vehicle, at: Surroundings, from: number): number {
  const { least } = throttleRange(vehicle);
  return overGears(
    vehicle,
    (kept) => {
      const speed = settle(kept, at, least, from, 1);
      return staysIn(vehicle.drive, kept.drive.gear, speed, least) ? speed : Number.POSITIVE_INFINITY;
    },
    Math.min,
  );
}

/** Best over the gears of a gearbox that shifts by itself; the highest always stays. */
function overGears(
  vehicle: Vehicle,
  of: (kept: Vehicle) => number,
  better: (a: number, b: number) => number = Math.max,
): number {
  const { drive } = vehicle;
  if (drive.gearbox.kind !== 'automatic') return of(vehicle);
  return drive.gears.map((_, gear) => of(keptInGear(vehicle, gear))).reduce((a, b) => better(a, b));
}

function settle(vehicle: Vehicle, at: Surroundings, throttle: number, from: number, way: 1 | -1): number {
  const { drive } = vehicle;
  const ratio = drive.belt === null ? drive.gears[drive.gear].ratio : drive.belt.greatest;
  const derate = derateFactor(drive, at.airDensity, at.airTemperature);
  const gripped = whereGripDoes(vehicle, at, from, way);
  const surplus =
    gripped > 0
      ? wheelForce(drive, drive.gear, gripped, throttle, derate) - requiredForce(vehicle, gripped, at)
      : 0;
  const speed = way * surplus > 0 ? settledSpeed(vehicle, at, throttle, gripped) : gripped;
  return way < 0 && ratio * speed < drive.stallSpeed ? 0 : speed;
}

/** The nearest speed, downwards or upwards, at which the grip can pass on the force that the road asks. */
function whereGripDoes(vehicle: Vehicle, at: Surroundings, from: number, way: 1 | -1): number {
  const grip = gripForce(vehicle, at.grade);
  if (grip === null) return from;
  const limit = way < 0 ? Math.min(grip.greatest, grip.lift) : grip.least;
  const short = (speed: number): number => requiredForce(vehicle, speed, at) - limit;
  if (way < 0 ? short(from) <= 0 : short(from) >= 0) return from;
  const end = way < 0 ? SLOWEST : SPEED_CEILING;
  if (way < 0 ? short(end) > 0 : short(end) < 0) return way < 0 ? 0 : SPEED_CEILING;
  return bracketedRoot(short, Math.min(from, end), Math.max(from, end), TOLERANCE).x;
}
