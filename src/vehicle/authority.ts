import { derateFactor } from './derating.ts';
import type { Drive } from './drive.ts';
import { wheelForce } from './drive-law.ts';
import { piecewiseLinear } from './piecewise-linear.ts';
import type { Surroundings } from './surroundings.ts';
import { throttleRange } from './throttle-range.ts';
import { type GripForce, gripForce } from './traction.ts';
import type { Vehicle } from './vehicle.ts';

/** Range of the wheel force that a vehicle can hold at a speed and place [N]. */
export interface Authority {
  readonly least: number;
  readonly greatest: number;
  /** Gear that gives the greatest force, and the one that gives the least: indices into the drive's gears. */
  readonly gear: number;
  readonly leastGear: number;
  /** What the driven wheel can carry, already in the range; null: not known. */
  readonly grip: GripForce | null;
}

/**
 * Steady wheel forces at both end stops of the throttle, as far as the driven wheel passes them on with the front wheel
 * on the road. An automatic gearbox gives the best of its gears for each end: of those that can turn at the speed and
 * that its up line at this throttle does not leave at once. Where none can turn the lowest gear counts.
 *
 * @param vehicle the actuator's travel and the traction count
 * @param gear index into the drive's gears; without meaning for an automatic gearbox
 * @param speed [m/s], >= 0
 * @param at grade and air at the place
 * @param derate factor of the full-throttle torque; by default that of the air
 */
export function authority(
  vehicle: Vehicle,
  gear: number,
  speed: number,
  at: Surroundings,
  derate: number = derateFactor(vehicle.drive, at.airDensity, at.airTemperature),
): Authority {
  const { drive } = vehicle;
  const { least: low, greatest: high } = throttleRange(vehicle);
  const force = (throttle: number) => (g: number) => wheelForce(drive, g, speed, throttle, derate);
  const least = best(gearsFor(drive, gear, speed, low), force(low), (a, b) => a < b);
  const greatest = best(gearsFor(drive, gear, speed, high), force(high), (a, b) => a > b);
  const grip = gripForce(vehicle, at.grade);
  return {
    least: grip === null ? least.force : Math.max(least.force, grip.least),
    greatest: grip === null ? greatest.force : Math.min(greatest.force, grip.greatest, grip.lift),
    gear: greatest.gear,
    leastGear: least.gear,
    grip,
  };
}

/** Gears in which the drive can be at a speed and throttle. */
function gearsFor(drive: Drive, gear: number, speed: number, throttle: number): number[] {
  if (drive.gearbox.kind !== 'automatic') return [gear];
  const able = drive.gears.flatMap(({ ratio }, g) =>
    ratio * speed >= drive.stallSpeed && staysIn(drive, g, speed, throttle) ? [g] : [],
  );
  return able.length === 0 ? [0] : able;
}

/** A gearbox that shifts by itself does not leave the gear upwards at this throttle; true for any other gearbox. */
export function staysIn({ gearbox, gears }: Drive, gear: number, speed: number, throttle: number): boolean {
  if (gearbox.kind !== 'automatic' || gear === gears.length - 1) return true;
  return gears[gear]!.ratio * speed <= piecewiseLinear(gearbox.throttle, gearbox.upSpeed, throttle);
}

function best(
  gears: readonly number[],
  force: (gear: number) => number,
  better: (a: number, b: number) => boolean,
): { readonly gear: number; readonly force: number } {
  let found = { gear: gears[0]!, force: force(gears[0]!) };
  for (const gear of gears.slice(1)) {
    const value = force(gear);
    if (better(value, found.force)) found = { gear, force: value };
  }
  return found;
}
