import { authority, staysIn } from '../vehicle/authority.ts';
import { beltRatio } from '../vehicle/belt-law.ts';
import { throttleFor } from '../vehicle/drive-law.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { demandShare } from './demand-share.ts';

/** Demand in one gear at one place. */
export interface GearAt {
  readonly least: number;
  readonly greatest: number;
  readonly share: number;
  readonly shaftSpeed: number;
}

/**
 * Range of the force in a gear, and the share of it that the set speed needs. In a gear that cannot turn at that speed
 * there is no force at all.
 *
 * @param vehicle kept in its gear (a gearbox that shifts by itself would choose another)
 * @param required force that holds the speed [N]
 * @param derate factor of the full-throttle torque
 */
export function gearAt(
  vehicle: Vehicle,
  gear: number,
  speed: number,
  required: number,
  at: Surroundings,
  derate: number,
): GearAt {
  const { drive } = vehicle;
  const shaftSpeed = shaftSpeedAt(vehicle, gear, speed, required, derate);
  const turns = shaftSpeed >= drive.stallSpeed;
  const { least, greatest } = turns ? authority(vehicle, gear, speed, at, derate) : { least: 0, greatest: 0 };
  return { least, greatest, share: demandShare(required, least, greatest), shaftSpeed };
}

/** Speed of the drive's shaft at a speed; of a belt that at the throttle which holds it. */
function shaftSpeedAt(
  { drive }: Vehicle,
  gear: number,
  speed: number,
  required: number,
  derate: number,
): number {
  const { belt, gears, throttleMin, throttleMax } = drive;
  if (belt === null) return gears[gear].ratio * speed;
  const throttle = throttleFor(drive, gear, speed, required, derate) ?? throttleMax;
  return speed * beltRatio(belt, speed, Math.min(Math.max(throttle, throttleMin), throttleMax));
}

/**
 * Gear in force where a gearbox chooses: the highest in which the demand is in range, or the one that comes nearest, of
 * those that its up line does not leave at once, at full throttle or, where the demand is to hold back, at the least.
 */
export function chosenGear(vehicle: Vehicle, speed: number, shares: readonly number[]): number {
  const { least, greatest } = throttleRange(vehicle);
  let best = shares.length - 1;
  for (let g = shares.length - 1; g >= 0; g--) {
    if (!staysIn(vehicle.drive, g, speed, shares[g] < 0 ? least : greatest)) continue;
    if (Math.abs(shares[g]) <= 1) return g;
    if (Math.abs(shares[g]) < Math.abs(shares[best])) best = g;
  }
  return best;
}
