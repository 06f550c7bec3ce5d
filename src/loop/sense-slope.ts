import { BUS_SLOPE } from '../control/bus.ts';
import type { ControllerSetup } from '../control/setup.ts';
import { exp } from '../numeric/elementary.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

// Kinds of what tells a controller the slope, p[P_SLOPE].
export const NO_SLOPE = 0;
export const ACCELEROMETER = 1;
export const KNOWN_ROAD = 2;

/** Writes what tells the slope to a run's parameters. @param late computing and dead time [s] */
export function writeSlope(p: Float64Array, controller: ControllerSetup, late: number): void {
  const grade = controller.kind === 'pid' ? (controller.feedforward?.grade ?? null) : null;
  if (grade === null) return;
  p[at.P_SLOPE] = grade.kind === 'accelerometer' ? ACCELEROMETER : KNOWN_ROAD;
  p[at.P_AHEAD] = grade.kind === 'accelerometer' ? 0 : grade.preview - late;
  p[at.P_SLOPE_KEPT] = grade.kind === 'accelerometer' && late > 0 ? exp(-p[at.P_SAMPLE] / late) : 0;
}

/**
 * Tells the controller the slope of the sample that starts now, at BUS_SLOPE: a + g sin(theta) as an ideal accelerometer
 * along the vehicle has it, or g sin(theta) of the road where the vehicle will be after the preview, at its speed now.
 *
 * A command is late by computing and dead time. The loop lets it act on a measurement that is older by them: the place
 * is so much nearer, and the accelerometer's reading goes through a lag of that length in place of a dead time.
 */
export function senseSlope(machine: Machine): void {
  const { s, p } = machine;
  const reading = readSlope(machine);
  s[BUS_SLOPE] = s[at.SLOPE_READING] = reading + p[at.P_SLOPE_KEPT] * (s[at.SLOPE_READING] - reading);
}

/** Puts the sensor of the slope at rest where the vehicle is. */
export function settleSlope(machine: Machine): void {
  const { s, p } = machine;
  if (p[at.P_SLOPE] === NO_SLOPE) return;
  s[at.SLOPE_ROW] = 0;
  s[BUS_SLOPE] = s[at.SLOPE_READING] = readSlope(machine);
}

function readSlope({ s, p, rows }: Machine): number {
  const ahead = p[at.P_TIMED] === 1 ? p[at.P_AHEAD] : p[at.P_AHEAD] * s[at.SPEED];
  const place = s[at.STATION] + ahead;
  const last = rows.length - at.R_STRIDE;
  let row = s[at.SLOPE_ROW] | 0;
  while (row > 0 && place < rows[row + at.R_STATION]) row -= at.R_STRIDE;
  while (row < last && place >= rows[row + at.R_STRIDE + at.R_STATION]) row += at.R_STRIDE;
  s[at.SLOPE_ROW] = row;
  const from = place - rows[row + at.R_STATION];
  const length = rows[row + at.R_LENGTH];
  const share = Math.min(Math.max(from, 0), length);
  const slope = rows[row + at.R_SIN] + share * rows[row + at.R_SIN + 1];
  return p[at.P_SLOPE] === ACCELEROMETER ? slope + s[at.ACCELERATION] : slope;
}
