import { STANDARD_GRAVITY } from '../units/constants.ts';
import type { Vehicle } from './vehicle.ts';

/** What the contact of the driven rear wheel can carry [N], forces at the wheel, positive forward. */
export interface GripForce {
  /** It spins above this; infinite where the load that the force itself brings onto the wheel always suffices. */
  readonly greatest: number;
  /** It locks or slides below this (motor brake, regeneration); negative. */
  readonly least: number;
  /** The front wheel leaves the road above this. Below `greatest` where friction times height is more than `massCentreAhead`. */
  readonly lift: number;
}

/**
 * Grip of the driven rear wheel with load transfer. The wheel carries N = m g cos(theta) (p - b) / p + F h / p: air,
 * slope and inertia all act at the height of the mass centre. |F| = mu N gives
 *
 *     greatest = mu m g cos(theta) (p - b) / (p - mu h),   least = -mu m g cos(theta) (p - b) / (p + mu h)
 *
 * and the front wheel carries nothing at lift = m g cos(theta) b / h (V. Cossalter, Motorcycle Dynamics, from memory).
 * Where mu h reaches the wheelbase p the wheel never spins. Side forces in bends take their share of grip: not here.
 *
 * @param vehicle mass and traction
 * @param grade tan(theta)
 * @returns null where the vehicle's traction is not known
 */
export function gripForce(vehicle: Pick<Vehicle, 'mass' | 'traction'>, grade: number): GripForce | null {
  if (vehicle.traction === null) return null;
  const { friction, wheelbase, massCentreAhead, massCentreHeight } = vehicle.traction;
  const weight = (vehicle.mass * STANDARD_GRAVITY) / Math.sqrt(1 + grade * grade);
  const held = friction * weight * (wheelbase - massCentreAhead);
  const arm = friction * massCentreHeight;
  return {
    greatest: arm < wheelbase ? held / (wheelbase - arm) : Number.POSITIVE_INFINITY,
    least: -held / (wheelbase + arm),
    lift: massCentreHeight > 0 ? (weight * massCentreAhead) / massCentreHeight : Number.POSITIVE_INFINITY,
  };
}
