import { asin, atan, tan } from '../../numeric/elementary.ts';
import { STANDARD_GRAVITY } from '../../units/constants.ts';
import { atCharge } from '../../vehicle/at-charge.ts';
import { beltRatio } from '../../vehicle/belt-law.ts';
import { derateFactor } from '../../vehicle/derating.ts';
import { requiredForce, rollingForce } from '../../vehicle/resistance.ts';
import { stillAndLevel } from '../../vehicle/surroundings.ts';
import { gripForce } from '../../vehicle/traction.ts';
import { turningRange } from '../../vehicle/turning-range.ts';
import type { Vehicle } from '../../vehicle/vehicle.ts';
import { endForces } from './end-forces.ts';
import { airExtremes } from './force-lines.ts';
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
    /** Of a belt at full throttle. */
    readonly shaftSpeed: number;
    /** Full throttle in the route's thickest and thinnest air; the least force in the thickest. */
    readonly full: number;
    readonly thin: number;
    readonly least: number;
    /** Grades between which the gear keeps the speed steady in still, thickest air, the grip counted; null: beyond every grade. */
    readonly climb: number | null;
    readonly descent: number | null;
    /** It is the grip of the tyre that ends the climb. */
    readonly slips: boolean;
  } | null;
}

/** Every gear of the vehicle at a speed [m/s], first gear first; of a battery cold and at its charge at the start. */
export function gearAuthority({ result }: View, speed: number): readonly GearAuthority[] {
  const { road } = result;
  const vehicle = atCharge(result.vehicle);
  const { drive } = vehicle;
  const { belt } = drive;
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
        shaftSpeed: (belt === null ? ratio : beltRatio(belt, speed, drive.throttleMax)) * speed,
        full,
        thin: endForces(vehicle, gear, speed, factor(thin)).greatest,
        least,
        ...gradesHeld(vehicle, speed, { full, least }, level),
      },
    };
  });
}

/** Turns of the fixed point between the grade and its grip: each takes the error down by more than ten times. */
const TURNS = 12;

/** Steepest grades that two forces hold, as far as the tyre passes them on, which the grade itself decides. */
function gradesHeld(
  vehicle: Vehicle,
  speed: number,
  { full, least }: { readonly full: number; readonly least: number },
  level: number,
): { readonly climb: number | null; readonly descent: number | null; readonly slips: boolean } {
  let [climb, descent, slips]: [number | null, number | null, boolean] = [0, 0, false];
  for (let turn = 0; turn < TURNS; turn++) {
    const up = gripForce(vehicle, climb ?? 0);
    const most = up === null ? full : Math.min(full, up.greatest, up.lift);
    slips = most < full;
    climb = steadyGrade(vehicle, speed, most - level);
    const down = gripForce(vehicle, descent ?? 0);
    descent = steadyGrade(vehicle, speed, (down === null ? least : Math.max(least, down.least)) - level);
    if (up === null) break;
  }
  return { climb, descent, slips };
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
