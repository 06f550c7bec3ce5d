import { heatShare } from '../vehicle/heat-share.ts';
import * as fit from './fittings.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/** Share of its capacity to which an empty battery must be charged before it drives again. */
const RESTORED = 0.005;

/**
 * What a sample takes from tank or battery. The power of the source's map at the shaft's speed and torque at the start
 * of the sample is drawn all through it (with the clutch open: of idling). Then, for a battery, over a sample of length h:
 *
 *   charge  <- charge - power h, between empty and full: what would overfill it is lost
 *   heat    <- r + (heat - r) e^(-h / time), r = (wheel power / continuous power)^2
 *   factor of force = sag(charge) heatShare, of regeneration = acceptance(charge) heatShare
 *
 * A battery that has no more than the last sample took is empty: it gives nothing until RESTORED of its capacity has
 * been charged again. Where the power jumps in its last sample, what is asked for beyond the charge is not drawn.
 *
 * Strictly sample by sample, so that it is the same whatever the chunks are.
 *
 * @param row place of the sample's row in the log, a multiple of L_STRIDE
 */
export function drawPower({ s, log, chunk, fittings }: Machine, row: number): void {
  const f = fittings.source;
  const speed = log[row + at.L_SPEED];
  const force = log[row + at.L_FORCE];
  lookAtShaft(s, log, row, f);
  askPower(f);
  let energy = f[fit.F_LENGTH] * f[fit.F_POWER_ASKED];
  if (f[fit.F_BATTERY] === 1) {
    f[fit.F_ENERGY_ASKED] = energy;
    const capacity = f[fit.F_CAPACITY];
    if (capacity > 0) {
      const charge = s[at.CHARGE];
      let left = charge - energy;
      if (left < 0) left = 0;
      else if (left > capacity) left = capacity;
      energy = charge - left;
      s[at.CHARGE] = left;
    }
    const perPower = f[fit.F_PER_POWER];
    if (perPower > 0) {
      const load = force * speed * perPower;
      const square = load * load;
      s[at.HEAT] = square + (s[at.HEAT] - square) * f[fit.F_COOLED];
    }
    writeFactors(s, f);
  }
  s[at.DRAWN] += energy;
  chunk[at.C_DRAWN] += energy;
}

/** The same for a last sample that is cut short. @param elapsed its length [s] */
export function drawLast(machine: Machine, row: number, elapsed: number): void {
  machine.fittings.source[fit.F_LENGTH] = elapsed;
  drawPower(machine, row);
}

/**
 * Draws for all samples of a chunk at once, where nothing that is drawn from comes back into the motion: a tank.
 *
 * @param elapsed length of the last sample [s]
 */
export function drawOverChunk({ s, log, chunk, fittings }: Machine, ticks: number, elapsed: number): void {
  const f = fittings.source;
  const length = f[fit.F_LENGTH];
  const last = ((ticks - 1) * at.L_STRIDE) | 0;
  let drawn = s[at.DRAWN];
  let sum = chunk[at.C_DRAWN];
  for (let row = 0; row <= last; row += at.L_STRIDE) {
    lookAtShaft(s, log, row, f);
    askPower(f);
    const energy = (row < last ? length : elapsed) * f[fit.F_POWER_ASKED];
    drawn += energy;
    sum += energy;
  }
  s[at.DRAWN] = drawn;
  chunk[at.C_DRAWN] = sum;
}

/** Puts charge and heat at their start: cold, charged as the plan says, factors to match. */
export function settleSource({ s, fittings }: Machine): void {
  const f = fittings.source;
  s[at.HEAT] = 0;
  s[at.DRAWN] = 0;
  s[at.DRIVE_FACTOR] = 1;
  s[at.REGENERATION_FACTOR] = 1;
  if (f.length === 0 || f[fit.F_BATTERY] !== 1) return;
  s[at.CHARGE] = f[fit.F_CHARGE] * f[fit.F_CAPACITY];
  f[fit.F_ENERGY_ASKED] = 0;
  writeFactors(s, f);
}

// What follows reads and writes the arrays: numbers given to a function and taken from it are boxed at every sample,
// where an engine does not put the function in the place of its call. Places are held as numbers among numbers: each is
// made an integer once, where it is read. The cell in which the last sample was stands at fixed places with its edges,
// since the next is mostly in the same one.

function writeFactors(s: Float64Array, f: Float64Array): void {
  const known = f[fit.F_CAPACITY] > 0;
  const charge = known ? s[at.CHARGE] * f[fit.F_PER_CAPACITY] : f[fit.F_CHARGE];
  f[fit.F_CHARGE_SHARE] = charge;
  const cool = f[fit.F_PER_POWER] > 0 ? heatShare(s[at.HEAT], f[fit.F_ONSET], f[fit.F_LEAST_SHARE]) : 1;
  const share = cool * shareAt(f, f[fit.F_SAG] | 0);
  const empty =
    known &&
    (s[at.DRIVE_FACTOR] === 0 ? charge < RESTORED : s[at.CHARGE] <= Math.max(0, f[fit.F_ENERGY_ASKED]));
  s[at.DRIVE_FACTOR] = empty ? 0 : share;
  s[at.REGENERATION_FACTOR] = cool * shareAt(f, f[fit.F_ACCEPTANCE] | 0);
}

/** A line at the charge in hand; its ends hold on; 1 without a line. */
function shareAt(f: Float64Array, line: number): number {
  const charge = f[fit.F_CHARGE_SHARE];
  if (!(charge >= f[line + fit.LINE_LOW] && charge < f[line + fit.LINE_HIGH])) enterStretch(f, line);
  return f[line + fit.LINE_SHARE] + f[line + fit.LINE_SLOPE] * (charge - f[line + fit.LINE_CORNER]);
}

function enterStretch(f: Float64Array, line: number): void {
  const charge = f[fit.F_CHARGE_SHARE];
  const count = f[line + fit.LINE_COUNT] | 0;
  const corners = line + fit.LINE_CORNERS;
  const shares = corners + count;
  const slopes = shares + count;
  let i = 0;
  while (i < count && charge >= f[corners + i]) i++;
  // Before the first corner and behind the last one the share of that corner holds on.
  const corner = Math.max(0, i - 1);
  f[line + fit.LINE_LOW] = i > 0 ? f[corners + i - 1] : Number.NEGATIVE_INFINITY;
  f[line + fit.LINE_HIGH] = i < count ? f[corners + i] : Number.POSITIVE_INFINITY;
  f[line + fit.LINE_CORNER] = f[corners + corner];
  f[line + fit.LINE_SHARE] = f[shares + corner];
  f[line + fit.LINE_SLOPE] = i > 0 && i < count ? f[slopes + corner] : 0;
}

/** Shaft speed and torque of a sample. */
function lookAtShaft(s: Float64Array, log: Float64Array, row: number, f: Float64Array): void {
  const ratio = log[row + at.L_RATIO];
  const open = s[at.GEAR] < 0;
  f[fit.F_SHAFT_SPEED] = open ? f[fit.F_IDLE] : ratio * log[row + at.L_SPEED];
  f[fit.F_TORQUE] = open ? 0 : log[row + at.L_FORCE] / ratio;
}

/** The law of `powerDrawn` (vehicle/power-map.ts) over the compiled map [W], at F_SHAFT_SPEED and F_TORQUE. */
function askPower(f: Float64Array): void {
  const w = f[fit.F_SHAFT_SPEED];
  const torque = f[fit.F_TORQUE];
  const within =
    w >= f[fit.F_CELL] && w < f[fit.F_CELL + 1] && torque >= f[fit.F_CELL + 2] && torque < f[fit.F_CELL + 3];
  if (!within) enterPowerCell(f);
  const power = f[fit.F_LAW] + f[fit.F_LAW + 1] * w + torque * (f[fit.F_LAW + 2] + f[fit.F_LAW + 3] * w);
  f[fit.F_POWER_ASKED] = Math.max(power, f[fit.F_LEAST]);
}

function enterPowerCell(f: Float64Array): void {
  const rows = f[fit.F_SPEED_COUNT] | 0;
  const columns = f[fit.F_TORQUE_COUNT] | 0;
  const i = enterInterval(f, fit.F_CELL, f[fit.F_SPEEDS] | 0, rows, f[fit.F_SHAFT_SPEED]);
  const j = enterInterval(f, fit.F_CELL + 2, f[fit.F_TORQUES] | 0, columns, f[fit.F_TORQUE]);
  const cell = (f[fit.F_POWER] | 0) + 4 * (i * (columns + 1) + j);
  for (let k = 0; k < 4; k++) f[fit.F_LAW + k] = f[cell + k];
}

/** Finds a value among so many inner edges from a place on, and notes the two around it; returns how many lie at or below it. */
function enterInterval(f: Float64Array, noted: number, edges: number, count: number, value: number): number {
  let i = 0;
  while (i < count && value >= f[edges + i]) i++;
  f[noted] = i > 0 ? f[edges + i - 1] : Number.NEGATIVE_INFINITY;
  f[noted + 1] = i < count ? f[edges + i] : Number.POSITIVE_INFINITY;
  return i;
}
