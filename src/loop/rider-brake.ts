import { exp } from '../numeric/elementary.ts';

/** Time constant with which the rider's brake takes overspeed away [s]. */
const TIME = 0.5;
/** Deceleration that a rider who only watches the speed does not go beyond [m/s2]; one who brakes for a place has their own. */
export const WATCHFUL_BRAKE = 3;

/** Closer to the speed that the rider holds than this, a stage asks for the brake [m/s]: TIME times any acceleration of a vehicle. */
export const BRAKE_WATCH = 5;

/**
 * Deceleration by the rider's brake: it lets the vehicle gain no more than dv/dt = -over / TIME, and brakes by no more than
 * its strongest. Continuous in speed and acceleration, so that both schemes meet the same solution.
 *
 * @param acceleration without the brake [m/s2]
 * @param over speed less the speed that the rider holds [m/s]; before it negative
 * @param strongest [m/s2], > 0; Infinity: as hard as it takes
 * @returns [m/s2], >= 0
 */
export function riderBrake(acceleration: number, over: number, strongest: number): number {
  const wanted = acceleration + over / TIME;
  return wanted > 0 ? Math.min(wanted, strongest) : 0;
}

/**
 * Speed to hold over a sample so that the brake takes `drop` off in it: dv/dt = -(v - held) / TIME, held constant.
 *
 * @param speed at the start of the sample [m/s]
 * @param drop [m/s], >= 0
 * @param sample [s]
 */
export function heldForDrop(speed: number, drop: number, sample: number): number {
  return speed - drop / (1 - exp(-sample / TIME));
}
