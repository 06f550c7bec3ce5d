import { derateFactor } from '../vehicle/derating.ts';
import { throttleFor } from '../vehicle/drive-law.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { surroundingsAt } from './places.ts';
import type { LoopPlan } from './plan.ts';

/**
 * Throttle that gives an acceleration at the present speed and place, in the gear in hand and with the lags at rest,
 * within the range of the command.
 *
 * @param acceleration [m/s2]; 0 holds the speed
 */
export function throttleInHand({ s, p }: Machine, plan: LoopPlan, acceleration: number): number {
  const { vehicle } = plan;
  const { drive } = vehicle;
  const here = surroundingsAt(plan.road, s[at.STATION]);
  const derate = derateFactor(drive, here.airDensity, here.airTemperature);
  const needed = requiredForce(vehicle, s[at.SPEED], here) + acceleration * s[at.EFFECTIVE_MASS];
  const byFactor = (factor: number): number =>
    throttleFor(drive, s[at.GEAR], s[at.SPEED], needed, derate * factor) ?? 0;
  let throttle = byFactor(s[at.DRIVE_FACTOR]);
  if (throttle < 0) throttle = byFactor(s[at.REGENERATION_FACTOR]);
  return Math.min(Math.max(throttle, p[at.P_LEAST]), p[at.P_GREATEST]);
}

/** The throttle that a hand which lets go leaves: closed, without regeneration. */
export function closedThrottle(p: Float64Array): number {
  return Math.min(Math.max(0, p[at.P_LEAST]), p[at.P_GREATEST]);
}
