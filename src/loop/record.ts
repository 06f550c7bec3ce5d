import { BUS_TARGET } from '../control/bus.ts';
import { gearInHand } from './engage-gear.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { DetailRecorder } from './record-detail.ts';
import type { BinRecord } from './result.ts';

// Places of the open bin's sums. Speed and error: extremes over the samples.
const TIME = 0;
const DISTANCE = 1;
const ERROR = 2;
const SQUARE = 3;
const SPEED_MIN = 4;
const SPEED_MAX = 5;
const THROTTLE = 6;
const THROTTLE_MIN = 7;
const THROTTLE_MAX = 8;
const TRAVEL = 9;
const UPPER = 10;
const LOWER = 11;
const RATE = 12;
const BRAKE = 13;
const BAND = 14;
const PUSH = 18;
const HOLD = 19;
const BRAKE_WORK = 20;
const SET_SPEED = 21;
const ERROR_MIN = 22;
const ERROR_MAX = 23;
const FORCE_MIN = 24;
const FORCE_MAX = 25;
const SHIFT = 26;
const DRAWN = 27;
const DRIVE_LOST = 28;
const REGENERATION_LOST = 29;
const OFF = 30;
const SUMS = 31;

function clearSums(sums: Float64Array): void {
  // Not by `fill`, which costs as much as a sample of the kernel: a bin is some thirty.
  for (let i = 0; i < SUMS; i++) sums[i] = 0;
  sums[SPEED_MIN] = sums[ERROR_MIN] = sums[THROTTLE_MIN] = sums[FORCE_MIN] = Number.POSITIVE_INFINITY;
  sums[SPEED_MAX] = sums[ERROR_MAX] = sums[THROTTLE_MAX] = sums[FORCE_MAX] = Number.NEGATIVE_INFINITY;
}

/** Adds the samples with hold on that a kernel has just run to the sums of the open bin. The set speed is the same for all of them. */
function addSamples(machine: Machine, sums: Float64Array): void {
  const { s, p, log, chunk } = machine;
  const ticks = chunk[at.C_TICKS];
  if (ticks === 0) return;
  const setSpeed = s[BUS_TARGET] * p[at.P_TO_TRUE];
  const highest = p[at.P_GREATEST];
  const lowest = p[at.P_LEAST];
  const sample = p[at.P_SAMPLE];
  // Samples are whole but for the last one of the run: everything is summed in samples.
  const last = ((ticks - 1) * at.L_STRIDE) | 0;
  const lastShare = chunk[at.C_TIME] / sample - (ticks - 1);
  let before = s[at.LAST_COMMAND];
  // The first band is counted on the way; a width below 0 counts nothing.
  const bands = p[at.P_BAND_COUNT];
  const width = bands > 0 ? p[at.P_BANDS] : -1;
  let share = 1;
  let errors = 0;
  let squares = 0;
  let throttles = 0;
  let travel = 0;
  let upper = 0;
  let lower = 0;
  let inside = 0;
  let slowest = Number.POSITIVE_INFINITY;
  let fastest = Number.NEGATIVE_INFINITY;
  let least = sums[THROTTLE_MIN];
  let most = sums[THROTTLE_MAX];
  let weakest = sums[FORCE_MIN];
  let strongest = sums[FORCE_MAX];
  if (sums[TIME] === 0) sums[SET_SPEED] = setSpeed;
  for (let i = 0; i <= last; i += at.L_STRIDE) {
    if (i === last) share = lastShare;
    const speed = log[i + at.L_SPEED];
    const throttle = log[i + at.L_ACTUATOR];
    let command = log[i + at.L_COMMAND];
    const force = log[i + at.L_FORCE];
    const error = speed - setSpeed;
    errors += error * share;
    squares += error * error * share;
    throttles += throttle * share;
    if (error <= width && error >= -width) inside += share;
    if (speed < slowest) slowest = speed;
    if (speed > fastest) fastest = speed;
    if (throttle < least) least = throttle;
    if (throttle > most) most = throttle;
    if (force < weakest) weakest = force;
    if (force > strongest) strongest = force;
    if (command >= highest) {
      command = highest;
      upper += share;
    } else if (command <= lowest) {
      command = lowest;
      lower += share;
    }
    travel += Math.abs(command - before);
    before = command;
  }
  sums[BAND] += sample * inside;
  for (let b = 1; b < bands; b++) {
    const wide = p[at.P_BANDS + b];
    let samples = 0;
    for (let i = 0; i <= last; i += at.L_STRIDE)
      if (Math.abs(log[i + at.L_SPEED] - setSpeed) <= wide) samples += i < last ? 1 : lastShare;
    sums[BAND + b] += sample * samples;
  }
  s[at.LAST_COMMAND] = before;
  sums[ERROR] += sample * errors;
  sums[SQUARE] += sample * squares;
  sums[THROTTLE] += sample * throttles;
  sums[TRAVEL] += travel;
  // While a shift keeps the drive from the hold, its command is at no limit of the drive.
  const held = s[at.SHIFT_PART] > 0 ? 0 : sample;
  sums[UPPER] += held * upper;
  sums[LOWER] += held * lower;
  sums[RATE] += chunk[at.C_RATED_TIME];
  sums[BRAKE] += chunk[at.C_BRAKE_TIME];
  sums[FORCE_MIN] = weakest;
  sums[FORCE_MAX] = strongest;
  sums[THROTTLE_MIN] = least;
  sums[THROTTLE_MAX] = most;
  if (slowest < sums[SPEED_MIN]) sums[SPEED_MIN] = slowest;
  if (fastest > sums[SPEED_MAX]) sums[SPEED_MAX] = fastest;
  if (slowest - setSpeed < sums[ERROR_MIN]) sums[ERROR_MIN] = slowest - setSpeed;
  if (fastest - setSpeed > sums[ERROR_MAX]) sums[ERROR_MAX] = fastest - setSpeed;
  addChunk(machine, sums);
}

/** The same of samples with hold off: what the rider does is no error and no limit of the hold. */
function addByHand(machine: Machine, sums: Float64Array): void {
  const { s, p, log, chunk } = machine;
  const ticks = chunk[at.C_TICKS];
  if (ticks === 0) return;
  if (sums[TIME] === 0) sums[SET_SPEED] = s[BUS_TARGET] * p[at.P_TO_TRUE];
  const lastShare = chunk[at.C_TIME] / p[at.P_SAMPLE] - (ticks - 1);
  for (let row = 0; row < ticks; row++) {
    const i = row * at.L_STRIDE;
    const speed = log[i + at.L_SPEED];
    const throttle = log[i + at.L_ACTUATOR];
    const force = log[i + at.L_FORCE];
    sums[THROTTLE] += p[at.P_SAMPLE] * throttle * (row < ticks - 1 ? 1 : lastShare);
    sums[SPEED_MIN] = Math.min(sums[SPEED_MIN], speed);
    sums[SPEED_MAX] = Math.max(sums[SPEED_MAX], speed);
    sums[THROTTLE_MIN] = Math.min(sums[THROTTLE_MIN], throttle);
    sums[THROTTLE_MAX] = Math.max(sums[THROTTLE_MAX], throttle);
    sums[FORCE_MIN] = Math.min(sums[FORCE_MIN], force);
    sums[FORCE_MAX] = Math.max(sums[FORCE_MAX], force);
  }
  s[at.LAST_COMMAND] = log[(ticks - 1) * at.L_STRIDE + at.L_COMMAND];
  sums[OFF] += chunk[at.C_TIME];
  addChunk(machine, sums);
}

/** What counts with hold on and off. */
function addChunk({ s, p, chunk }: Machine, sums: Float64Array): void {
  sums[TIME] += chunk[at.C_TIME];
  sums[DISTANCE] += chunk[at.C_DISTANCE];
  sums[PUSH] += chunk[at.C_PUSH];
  sums[HOLD] += chunk[at.C_HOLD];
  sums[BRAKE_WORK] += chunk[at.C_BRAKE];
  sums[DRAWN] += chunk[at.C_DRAWN];
  if (s[at.SHIFT_PART] > 0) sums[SHIFT] += chunk[at.C_TIME];
  if (p[at.P_SOURCE] === at.DRAWN_BY_SAMPLE) {
    // Once for all samples of the chunk: charge and heat move slowly, and an empty battery stays empty.
    sums[DRIVE_LOST] = Math.max(sums[DRIVE_LOST], 1 - s[at.DRIVE_FACTOR]);
    sums[REGENERATION_LOST] = Math.max(sums[REGENERATION_LOST], 1 - s[at.REGENERATION_FACTOR]);
  }
}

type Writable<T> = { -readonly [K in keyof T]: T[K] };

/** Columns to which nothing is written in most runs. */
type RareColumn =
  | 'timeUpper'
  | 'timeLower'
  | 'timeRate'
  | 'timeBrake'
  | 'regenerationWork'
  | 'brakeWork'
  | 'timeShift'
  | 'drawn'
  | 'driveLost'
  | 'regenerationLost'
  | 'timeOff';

/** The record of a run while it grows. */
export interface Recorder {
  /** Adds the samples that the kernel has just run to the open bin. */
  readonly add: (machine: Machine) => void;
  /** Closes the open bin and starts the next; `time` is that of the first sample of the bin that is closed. */
  readonly close: (machine: Machine, time: number) => void;
  /** The record as far as it got. */
  readonly finish: () => BinRecord;
}

/**
 * A recorder over bins of horizontal distance.
 *
 * @param edge edges of all bins of the road [m]
 * @param bands number of bands, at most 4
 * @param detail takes the same samples; null: the record has no detail
 */
export function recorder(edge: Float64Array, bands: number, detail: DetailRecorder | null = null): Recorder {
  const all = edge.length - 1;
  const column = (): Float64Array => new Float64Array(all);
  let size = 0;
  // Most runs have none of some columns: those are one and the same array of zeros until something is written to them.
  const none = column();
  const r: Writable<BinRecord> = {
    size,
    edge,
    timeAt: column(),
    time: column(),
    setSpeed: column(),
    speedMean: column(),
    speedMin: column(),
    speedMax: column(),
    errorMean: column(),
    errorSquare: column(),
    errorMin: column(),
    errorMax: column(),
    throttleMean: column(),
    throttleMin: column(),
    throttleMax: column(),
    throttleTravel: column(),
    timeUpper: none,
    timeLower: none,
    timeRate: none,
    timeBrake: none,
    timeInBand: new Float64Array(all * bands),
    gear: new Uint8Array(all),
    driveForce: column(),
    wheelPower: column(),
    driveWork: column(),
    regenerationWork: none,
    brakeWork: none,
    driveForceMax: column(),
    driveForceMin: column(),
    timeShift: none,
    drawn: none,
    driveLost: none,
    regenerationLost: none,
    timeOff: none,
    detail: null,
  };

  const write = (key: RareColumn, i: number, value: number): void => {
    if (r[key] === none) r[key] = column();
    r[key][i] = value;
  };

  const sums = new Float64Array(SUMS);
  clearSums(sums);
  const add = (machine: Machine): void => {
    if (machine.s[at.HOLD_MODE] >= at.BY_HAND) {
      addByHand(machine, sums);
      detail?.skip(machine);
    } else {
      addSamples(machine, sums);
      detail?.add(machine);
    }
  };

  const close: Recorder['close'] = ({ s, p, chunk }, timeAt) => {
    const i = size++;
    detail?.close();
    const time = sums[TIME];
    const force = chunk[at.C_DRIVE_FORCE];
    r.timeAt[i] = timeAt;
    r.gear[i] = gearInHand(s);
    if (sums[DRIVE_LOST] > 0) write('driveLost', i, sums[DRIVE_LOST]);
    if (sums[REGENERATION_LOST] > 0) write('regenerationLost', i, sums[REGENERATION_LOST]);
    if (!(time > 0)) {
      // No sample starts in this bin: what holds while it is passed over.
      const setSpeed = s[BUS_TARGET] * p[at.P_TO_TRUE];
      r.setSpeed[i] = setSpeed;
      r.speedMean[i] = r.speedMin[i] = r.speedMax[i] = s[at.SPEED];
      if (s[at.HOLD_MODE] < at.BY_HAND) r.errorMin[i] = r.errorMax[i] = s[at.SPEED] - setSpeed;
      r.throttleMean[i] = r.throttleMin[i] = r.throttleMax[i] = s[at.PLATE];
      r.driveForce[i] = r.driveForceMin[i] = r.driveForceMax[i] = force;
      r.wheelPower[i] = force * s[at.SPEED];
      clearSums(sums);
      return;
    }
    r.time[i] = time;
    r.setSpeed[i] = sums[SET_SPEED];
    r.speedMean[i] = sums[DISTANCE] / time;
    r.speedMin[i] = sums[SPEED_MIN];
    r.speedMax[i] = sums[SPEED_MAX];
    r.errorMean[i] = sums[ERROR];
    r.errorSquare[i] = sums[SQUARE];
    if (sums[ERROR_MIN] <= sums[ERROR_MAX]) {
      r.errorMin[i] = sums[ERROR_MIN];
      r.errorMax[i] = sums[ERROR_MAX];
    }
    r.throttleMean[i] = sums[THROTTLE] / time;
    r.throttleMin[i] = sums[THROTTLE_MIN];
    r.throttleMax[i] = sums[THROTTLE_MAX];
    r.throttleTravel[i] = sums[TRAVEL];
    if (sums[UPPER] > 0) write('timeUpper', i, sums[UPPER]);
    if (sums[LOWER] > 0) write('timeLower', i, sums[LOWER]);
    if (sums[RATE] > 0) write('timeRate', i, sums[RATE]);
    if (sums[BRAKE] > 0) write('timeBrake', i, sums[BRAKE]);
    if (sums[OFF] > 0) write('timeOff', i, sums[OFF]);
    if (sums[SHIFT] > 0) write('timeShift', i, sums[SHIFT]);
    if (sums[HOLD] < 0) write('regenerationWork', i, sums[HOLD]);
    if (sums[BRAKE_WORK] !== 0) write('brakeWork', i, sums[BRAKE_WORK]);
    if (sums[DRAWN] !== 0) write('drawn', i, sums[DRAWN]);
    for (let b = 0; b < bands; b++) r.timeInBand[i * bands + b] = sums[BAND + b];
    const work = sums[PUSH] + sums[HOLD];
    r.driveForce[i] = sums[DISTANCE] > 0 ? work / sums[DISTANCE] : force;
    r.wheelPower[i] = work / time;
    r.driveWork[i] = sums[PUSH];
    r.driveForceMin[i] = sums[FORCE_MIN];
    r.driveForceMax[i] = sums[FORCE_MAX];
    clearSums(sums);
  };

  const finish = (): BinRecord => {
    r.detail = detail === null ? null : detail.finish();
    if (size === all) return { ...r, size };
    const cut: Record<string, unknown> = {};
    for (const [key, value] of Object.entries(r)) {
      if (value instanceof Float64Array)
        cut[key] = value.slice(0, key === 'edge' ? size + 1 : key === 'timeInBand' ? size * bands : size);
    }
    return { ...r, ...cut, size, gear: r.gear.slice(0, size) };
  };
  return { add, close, finish };
}
