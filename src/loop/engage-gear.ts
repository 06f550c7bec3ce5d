import { BUS_GEAR } from '../control/bus.ts';
import { cellIndex } from '../vehicle/drive-law.ts';
import { loadSteps } from './lags.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/**
 * Engages a gear at the speed in hand, or opens the clutch. What turns before the gear is brought to its new speed by
 * the clutch, not by the vehicle: the speed stays, and the kinetic energy that the change of effective mass takes away
 * is booked as the work of shifts.
 *
 * @param gear index into the drive's gears; -1: clutch open, no force, nothing turns before the gear
 */
export function engageGear(machine: Machine, gear: number): void {
  const { s } = machine;
  const before = s[at.EFFECTIVE_MASS];
  loadGear(machine, gear);
  bookTurning(s, before);
}

/** Books the kinetic energy that a change of effective mass at one speed has taken away. */
export function bookTurning(s: Float64Array, before: number): void {
  const lost = 0.5 * (before - s[at.EFFECTIVE_MASS]) * s[at.SPEED] * s[at.SPEED];
  s[at.SHIFT_WORK] += lost;
  s[at.WORK_MAGNITUDE] += Math.abs(lost);
}

/** Puts a gear in hand without an account: ratio, effective mass, steps a sample, cell over speed. */
export function loadGear(machine: Machine, gear: number): void {
  const { s, p, lags, gears, stepsInGear, speedEdges } = machine;
  const ratio = gear < 0 ? 0 : gears[2 * gear];
  s[at.GEAR] = gear;
  s[BUS_GEAR] = gearInHand(s);
  loadRatio(machine, ratio, gear < 0 ? 0 : gears[2 * gear + 1]);
  loadSteps(p, lags, stepsInGear[1 + gear]);
  s[at.SPEED_CELL] = ratio > 0 ? cellIndex(speedEdges, ratio * s[at.SPEED]) : 0;
}

/** Puts a ratio in hand [1/m], and the effective mass with what turns before it [kg]. */
export function loadRatio({ s, p, here }: Machine, ratio: number, turning: number): void {
  const mass = p[at.P_BASE_MASS] + turning;
  s[at.RATIO] = ratio;
  s[at.EFFECTIVE_MASS] = mass;
  here[at.H_PER_MASS] = 1 / mass;
  here[at.H_PER_RATIO] = 1 / ratio;
}

/** Speed below which the drive stalls as it is engaged [m/s]; 0 with the clutch open. */
export function stallSpeed({ s, p }: Machine): number {
  return s[at.RATIO] > 0 ? p[at.P_STALL_SPEED] / s[at.RATIO] : 0;
}

/** Gear in hand, index into the drive's gears; with the clutch open the one that comes next. */
export function gearInHand(s: Float64Array): number {
  return s[at.GEAR] < 0 ? s[at.NEXT_GEAR] : s[at.GEAR];
}
