import { beltRatio, beltRatioSlopes } from './belt-law.ts';
import { wheelForce, wheelForceSlopes } from './drive-law.ts';
import type { Vehicle } from './vehicle.ts';

/**
 * Small motions of a vehicle whose belt r = w / v follows with its lag, in deviations from an operating point:
 *
 *     dv/dt = a v + b x + c r + disturbance            dr/dt = (bySpeed v + byThrottle x - r) / lag
 *
 * with what the belt takes from the vehicle to turn the engine faster, J r v dr/dt, put into the coefficients.
 */
export interface BeltMotion {
  /** [1/s], [m/s2], [m2/s2] */
  readonly a: number;
  readonly b: number;
  readonly c: number;
  /** Ratio at rest by speed [1/m/(m/s)] and by throttle [1/m]. */
  readonly bySpeed: number;
  readonly byThrottle: number;
  /** [s] */
  readonly lag: number;
  /** Mass that is accelerated while the ratio stands, m + J r^2 [kg]. */
  readonly mass: number;
}

/**
 * Linear model of a belt between its limits at a speed and a throttle that are in balance.
 *
 * @param roadSlope of the resistance by speed [N/(m/s)]
 * @returns null without a belt, at a limit of its ratio, or where it has no lag: then the belt at rest is all there is
 */
export function beltMotion(
  vehicle: Vehicle,
  speed: number,
  throttle: number,
  derate: number,
  roadSlope: number,
): BeltMotion | null {
  const { drive } = vehicle;
  const { belt } = drive;
  if (belt === null || belt.lag === 0) return null;
  const ratio = beltRatio(belt, speed, throttle);
  if (ratio <= belt.least || ratio >= belt.greatest) return null;
  const { bySpeed, byThrottle } = beltRatioSlopes(belt, speed, throttle);
  const standing = {
    ...drive,
    belt: null,
    gears: [{ ratio, inertia: belt.inertia * ratio * ratio }],
    gear: 0,
  };
  const mass = vehicle.mass + vehicle.rotatingMass + belt.inertia * ratio * ratio;
  const slopes = wheelForceSlopes(standing, 0, speed, throttle, derate);
  // F = r T(r v): dF/dr = T + r v dT/dw.
  const byRatio = (wheelForce(standing, 0, speed, throttle, derate) + speed * slopes.bySpeed) / ratio;
  const spin = (belt.inertia * ratio * speed) / (mass * belt.lag);
  return {
    a: (slopes.bySpeed - roadSlope) / mass - spin * bySpeed,
    b: slopes.byThrottle / mass - spin * byThrottle,
    c: byRatio / mass + spin,
    bySpeed,
    byThrottle,
    lag: belt.lag,
    mass,
  };
}
