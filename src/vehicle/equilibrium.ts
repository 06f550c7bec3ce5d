import { bracketedRoot } from '../numeric/root.ts';
import { derateFactor } from './derating.ts';
import type { Drive } from './drive.ts';
import { throttleFor, wheelForce } from './drive-law.ts';
import { piecewiseLinear } from './piecewise-linear.ts';
import { requiredForce } from './resistance.ts';
import { type Surroundings, stillAndLevel } from './surroundings.ts';
import type { Vehicle } from './vehicle.ts';

/** No speed above this is looked for [m/s]. */
export const SPEED_CEILING = 150;
const SCAN_STEP = 1;
/** In the place of standstill, where no gear turns. */
const SLOWEST = 1e-9;
const TOLERANCE = 1e-10;

/** A speed at which a locked throttle neither gains nor loses. */
export interface Equilibrium {
  /** [m/s] */
  readonly speed: number;
  /** A small disturbance dies out. */
  readonly stable: boolean;
}

/** Wheel force of a locked throttle less what the road asks, as a function of speed [N]. */
function surplusOf(vehicle: Vehicle, at: Surroundings, throttle: number): (speed: number) => number {
  const derate = derateFactor(vehicle.drive, at.airDensity, at.airTemperature);
  const { drive } = vehicle;
  return (speed) =>
    wheelForce(drive, drive.gear, speed, throttle, derate) - requiredForce(vehicle, speed, at);
}

/**
 * All speeds in (0, 150 m/s] at which a locked throttle is in balance, in rising order. The surplus of force is scanned
 * in steps of 1 m/s and at every corner of drive and wind, a peak or a dip between two steps is followed to its end so
 * that a close pair is not missed, and every change of sign is refined by Brent's method to 1e-10 m/s.
 *
 * @param vehicle in its engaged gear
 * @param at surroundings, the same for ever
 * @param throttle locked
 */
export function equilibriumSpeeds(
  vehicle: Vehicle,
  at: Surroundings,
  throttle: number,
): readonly Equilibrium[] {
  const surplus = surplusOf(vehicle, at, throttle);
  const speeds = scanSpeeds(vehicle, at, throttle);
  const values = speeds.map(surplus);
  for (let i = speeds.length - 2; i >= 1; i--) {
    const toward = Math.sign(values[i]!);
    const nearest =
      toward * values[i]! <= toward * values[i - 1]! && toward * values[i]! <= toward * values[i + 1]!;
    if (toward === 0 || !nearest) continue;
    const turn = turningPoint((speed) => toward * surplus(speed), speeds[i - 1]!, speeds[i + 1]!);
    const value = surplus(turn);
    if (toward * value > 0 || turn === speeds[i]) continue;
    const where = turn < speeds[i]! ? i : i + 1;
    speeds.splice(where, 0, turn);
    values.splice(where, 0, value);
  }
  const found: Equilibrium[] = [];
  for (let i = 1; i < speeds.length; i++) {
    const before = values[i - 1]!;
    const after = values[i]!;
    if (before > 0 === after > 0) continue;
    const root = bracketedRoot(surplus, speeds[i - 1]!, speeds[i]!, TOLERANCE);
    if (root.x > 0) found.push({ speed: root.x, stable: before > 0 });
  }
  return found;
}

/**
 * Speed at which a locked throttle settles when it starts from a given speed: the next stable balance in the direction
 * in which the force pushes, which is the next balance at all, since the force pushes towards it. Scanned as in
 * `equilibriumSpeeds`, but from the given speed and no further than it takes.
 *
 * @param from [m/s], > 0
 * @returns [m/s]; 0 where the vehicle comes to a stop, 150 where nothing holds it below that
 */
export function settledSpeed(vehicle: Vehicle, at: Surroundings, throttle: number, from: number): number {
  const surplus = surplusOf(vehicle, at, throttle);
  const push = surplus(from);
  if (push === 0) return from;
  const up = push > 0;
  const corners = cornerSpeeds(vehicle.drive, throttle);
  const left = (speed: number): number => (up ? surplus(speed) : -surplus(speed));
  const end = up ? SPEED_CEILING : SLOWEST;
  let [a, b, fa, fb] = [from, from, left(from), left(from)];
  while (up ? b < end : b > end) {
    const c = nextScanSpeed(corners, -at.headwind, b, up);
    const fc = left(c);
    // A dip between the steps would be a pair of balances, of which the nearer one stops the vehicle.
    if (fc > 0 && fb <= fa && fb <= fc && b !== from) {
      const turn = up ? turningPoint(left, a, c) : turningPoint(left, c, a);
      if (left(turn) <= 0) return bracketedRoot(surplus, a, turn, TOLERANCE).x;
    }
    if (fc <= 0) return bracketedRoot(surplus, b, c, TOLERANCE).x;
    [a, b, fa, fb] = [b, c, fb, fc];
  }
  return up ? SPEED_CEILING : 0;
}

/**
 * Throttle that holds a speed on the level in still air, limited to the range of the drive.
 *
 * @param speed [m/s], > 0
 * @param airDensity [kg/m3]
 * @param airTemperature [K]
 */
export function levelThrottle(
  vehicle: Vehicle,
  speed: number,
  airDensity: number,
  airTemperature: number,
): number {
  const { drive } = vehicle;
  const force = requiredForce(vehicle, speed, stillAndLevel(airDensity, airTemperature));
  const derate = derateFactor(drive, airDensity, airTemperature);
  const throttle = throttleFor(drive, drive.gear, speed, force, derate) ?? 0;
  return Math.min(Math.max(throttle, drive.throttleMin), drive.throttleMax);
}

/** Speeds at which the force of a locked throttle has a corner: where shaft speed meets the edge of a cell, or a belt its limits. */
function cornerSpeeds({ belt, gears, gear, speedEdges }: Drive, throttle: number): number[] {
  const { ratio } = gears[gear]!;
  if (belt === null) return Array.from(speedEdges, (edge) => edge / ratio);
  const line = piecewiseLinear(belt.throttle, belt.shaftSpeed, throttle);
  return [line, ...speedEdges].flatMap((edge) => [edge / belt.greatest, edge / belt.least]);
}

/** The next speed behind a given one at which a scan looks: a whole step, a corner of the drive, no wind any more, or the end. */
function nextScanSpeed(corners: readonly number[], calm: number, speed: number, up: boolean): number {
  const whole = up ? Math.floor(speed / SCAN_STEP) + 1 : Math.ceil(speed / SCAN_STEP) - 1;
  let next = Math.min(Math.max(whole * SCAN_STEP, SLOWEST), SPEED_CEILING);
  const nearer = (place: number): void => {
    if (up ? place > speed && place < next : place < speed && place > next) next = place;
  };
  nearer(calm);
  for (const corner of corners) nearer(corner);
  return next;
}

function scanSpeeds(vehicle: Vehicle, at: Surroundings, throttle: number): number[] {
  const corners = cornerSpeeds(vehicle.drive, throttle);
  const grid = Array.from({ length: SPEED_CEILING / SCAN_STEP }, (_, i) => (i + 1) * SCAN_STEP);
  const inside = [SLOWEST, -at.headwind, ...corners, ...grid].filter((v) => v > 0 && v <= SPEED_CEILING);
  return [...new Set(inside)].sort((a, b) => a - b);
}

/** Where a function with one dip between two ends is least (golden section), or the first point below zero on the way. */
function turningPoint(f: (x: number) => number, a: number, b: number): number {
  const share = (Math.sqrt(5) - 1) / 2;
  let x1 = b - share * (b - a);
  let x2 = a + share * (b - a);
  let f1 = f(x1);
  let f2 = f(x2);
  while (b - a > 1e-9) {
    if (f1 <= 0) return x1;
    if (f2 <= 0) return x2;
    if (f1 < f2) {
      b = x2;
      x2 = x1;
      f2 = f1;
      x1 = b - share * (b - a);
      f1 = f(x1);
    } else {
      a = x1;
      x1 = x2;
      f1 = f2;
      x2 = a + share * (b - a);
      f2 = f(x2);
    }
  }
  return f1 < f2 ? x1 : x2;
}
