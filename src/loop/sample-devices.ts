import { moveBelt } from './belt.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { senseSlope } from './sense-slope.ts';
import { senseSpeed } from './sense-speed.ts';
import { shiftDue } from './shift-due.ts';

/** The machine has something that works once a sample on the state as it stands: then a kernel writes it at every sample. */
export function hasSampleDevices(p: Float64Array): boolean {
  const drains = p[at.P_SOURCE] === at.DRAWN_BY_SAMPLE;
  return drains || p[at.P_AUTOMATIC] + p[at.P_BELT] + p[at.P_SENSED] + p[at.P_SLOPE] + p[at.P_HOLD] > 0;
}

/**
 * What devices do at the start of a sample: the belt moves, a sensor with pulses or noise measures, the slope is told. The state must
 * stand in s; speed, filtered speed, ratio, effective mass and the cell over speed may have changed behind it.
 *
 * @param row of the road table, and cell over throttle, in which the vehicle is
 * @returns false where hold changes hands or an automatic gearbox wants to shift first: nothing has been done
 */
export function beginSample(machine: Machine, row: number, throttleCell: number): boolean {
  const { s, p } = machine;
  if (s[at.HOLD_FOUND] !== 0) return false;
  if (p[at.P_AUTOMATIC] === 1 && shiftDue(machine)) return false;
  if (p[at.P_BELT] === 1) {
    moveBelt(machine, row, throttleCell);
    if (p[at.P_FILTER] === 0) s[at.FILTERED] = s[at.SPEED];
  }
  if (p[at.P_SENSED] === 1) senseSpeed(machine);
  if (p[at.P_SLOPE] > 0) senseSlope(machine);
  return true;
}
