import { asin, atan, tan } from '../../numeric/elementary.ts';
import { STANDARD_GRAVITY } from '../../units/constants.ts';
import { derateFactor } from '../../vehicle/derating.ts';
import { requiredForce, rollingForce } from '../../vehicle/resistance.ts';
import { stillAndLevel } from '../../vehicle/surroundings.ts';
import type { Vehicle } from '../../vehicle/vehicle.ts';
import { endForces } from './end-forces.ts';
import { airExtremes } from './force-lines.ts';
import { turningRange } from './turning-range.ts';
import type { View } from './view.ts';

/** What a gear has at one speed. SI. */
export interface GearAuthority {
  readonly gear: number;
  readonly engaged: boolean;
  /** Speeds between standing still at the lowest shaft speed and the rev limit; the latter may be infinite. */
  readonly from: number;
  readonly to: number;
  /** Null: the gear cannot turn at that speed. */
  readonly at: {
    readonly shaftSpeed: number;
    /** Full throttle in the route's thickest and thinnest air; the least force in the thickest. */
    readonly full: number;
    readonly thin: number;
    readonly least: number;
    /** Grades between which the gear keeps the speed steady in still, thickest air; null: beyond every grade. */
    readonly climb: number | null;
    readonly descent: number | null;
  } | null;
}

/** Every gear of the vehicle at a speed [m/s], first gear first. */
export function gearAuthority({ result: { vehicle, road } }: View, speed: number): readonly GearAuthority[] {
  const { drive } = vehicle;
  const [thick, thin] = airExtremes(road);
  const factor = (knot: number) => derateFactor(drive, road.airDensity[knot]!, road.airTemperature[knot]!);
  const still = stillAndLevel(road.airDensity[thick]!, road.airTemperature[thick]!);
  const level = requiredForce(vehicle, speed, still);
  return drive.gears.map(({ ratio }, gear) => {
    const { least: from, greatest: to } = turningRange(drive, gear);
    const engaged = gear === drive.gear;
    if (speed < from || speed > to) return { gear, engaged, from, to, at: null };
    const { greatest: full, least } = endForces(vehicle, gear, speed, factor(thick));
    return {
      gear,
      engaged,
      from,
      to,
      at: {
        shaftSpeed: ratio * speed,
        full,
        thin: endForces(vehicle, gear, speed, factor(thin)).greatest,
        least,
        climb: steadyGrade(vehicle, speed, full - level),
        descent: steadyGrade(vehicle, speed, least - level),
      },
    };
  });
}

/**
 * Grade on which a force beyond that of the level is steady: sin(theta) + c cos(theta) = c + F / (m g), with the rolling
 * coefficient c, so that theta = asin((c + F / (m g)) / sqrt(1 + c^2)) - atan(c). Null where no grade takes so much.
 */
function steadyGrade(vehicle: Vehicle, speed: number, surplus: number): number | null {
  const weight = vehicle.mass * STANDARD_GRAVITY;
  const rolling = rollingForce(vehicle, speed, 0) / weight;
  const sine = (rolling + surplus / weight) / Math.sqrt(1 + rolling * rolling);
  if (Math.abs(sine) >= 1) return null;
  const angle = asin(sine) - atan(rolling);
  return Math.abs(angle) < Math.PI / 2 ? tan(angle) : null;
}
