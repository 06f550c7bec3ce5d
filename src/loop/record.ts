import { BUS_COMMAND, BUS_LIMITED, BUS_TARGET } from '../control/bus.ts';
import * as at from './layout.ts';
import { LIMIT_BRAKE, LIMIT_LOWER, LIMIT_RATE, LIMIT_UPPER } from './plan.ts';
import type { BinRecord } from './result.ts';

// Places of the open bin's sums. Speed and error: extremes over the samples.
const SAMPLES = 0;
const TIME = 1;
const DISTANCE = 2;
const ERROR = 3;
const SQUARE = 4;
const SPEED_MIN = 5;
const SPEED_MAX = 6;
const ERROR_MIN = 7;
const ERROR_MAX = 8;
const THROTTLE = 9;
const THROTTLE_MIN = 10;
const THROTTLE_MAX = 11;
const TRAVEL = 12;
const UPPER = 13;
const LOWER = 14;
const RATE = 15;
const BRAKE = 16;
const BAND = 17;
const DRIVE = 21;
const PUSH = 22;
const BRAKE_WORK = 23;
const SET_SPEED = 24;
const SUMS = 25;

/** Empty sums for one bin. */
export function emptySums(): Float64Array {
  return clearSums(new Float64Array(SUMS));
}

function clearSums(sums: Float64Array): Float64Array {
  sums.fill(0);
  sums[SPEED_MIN] = sums[ERROR_MIN] = sums[THROTTLE_MIN] = Number.POSITIVE_INFINITY;
  sums[SPEED_MAX] = sums[ERROR_MAX] = sums[THROTTLE_MAX] = Number.NEGATIVE_INFINITY;
  return sums;
}

/** Adds the sample that a kernel has just run (SAMPLE_ places and the bus) to the sums of the open bin. */
export function recordSample(s: Float64Array, p: Float64Array, sums: Float64Array): void {
  const time = s[at.SAMPLE_TIME];
  const speed = s[at.SAMPLE_SPEED];
  const throttle = s[at.SAMPLE_ACTUATOR];
  const setSpeed = s[BUS_TARGET] * p[at.P_TO_TRUE];
  const error = speed - setSpeed;
  const size = error < 0 ? -error : error;
  if (sums[SAMPLES] === 0) sums[SET_SPEED] = setSpeed;
  sums[SAMPLES] += 1;
  sums[TIME] += time;
  sums[DISTANCE] += s[at.SAMPLE_DISTANCE];
  sums[ERROR] += error * time;
  sums[SQUARE] += error * error * time;
  if (speed < sums[SPEED_MIN]) sums[SPEED_MIN] = speed;
  if (speed > sums[SPEED_MAX]) sums[SPEED_MAX] = speed;
  if (error < sums[ERROR_MIN]) sums[ERROR_MIN] = error;
  if (error > sums[ERROR_MAX]) sums[ERROR_MAX] = error;
  sums[THROTTLE] += throttle * time;
  if (throttle < sums[THROTTLE_MIN]) sums[THROTTLE_MIN] = throttle;
  if (throttle > sums[THROTTLE_MAX]) sums[THROTTLE_MAX] = throttle;

  const limited = s[BUS_LIMITED];
  const change = limited - s[at.LAST_COMMAND];
  s[at.LAST_COMMAND] = limited;
  sums[TRAVEL] += change < 0 ? -change : change;
  let limit = 0;
  if (s[BUS_COMMAND] >= p[at.P_HIGH]) {
    limit = LIMIT_UPPER;
    sums[UPPER] += time;
  } else if (s[BUS_COMMAND] <= p[at.P_LOW]) {
    limit = LIMIT_LOWER;
    sums[LOWER] += time;
  }
  if (s[at.SAMPLE_RATED] !== 0) {
    limit |= LIMIT_RATE;
    sums[RATE] += time;
  }
  if (s[at.SAMPLE_BRAKE_FORCE] > 0) {
    limit |= LIMIT_BRAKE;
    sums[BRAKE] += time;
  }
  s[at.SAMPLE_LIMIT] = limit;
  if (size <= p[at.P_BANDS]) sums[BAND] += time;
  if (size <= p[at.P_BANDS + 1]) sums[BAND + 1] += time;
  if (size <= p[at.P_BANDS + 2]) sums[BAND + 2] += time;
  if (size <= p[at.P_BANDS + 3]) sums[BAND + 3] += time;
  sums[DRIVE] += s[at.SAMPLE_DRIVE_WORK];
  sums[PUSH] += s[at.SAMPLE_PUSH];
  sums[BRAKE_WORK] += s[at.SAMPLE_BRAKE_WORK];
}

type Writable<T> = { -readonly [K in keyof T]: T[K] };

/** The record of a run while it grows. */
export interface Recorder {
  /** Closes the open bin and starts the next; `time` is that of the first sample of the bin that is closed. */
  readonly close: (s: Float64Array, p: Float64Array, sums: Float64Array, time: number, gear: number) => void;
  /** The record as far as it got. */
  readonly finish: () => BinRecord;
}

/**
 * A recorder over bins of horizontal distance.
 *
 * @param edge edges of all bins of the road [m]
 * @param bands number of bands, at most 4
 */
export function recorder(edge: Float64Array, bands: number): Recorder {
  const all = edge.length - 1;
  const column = (): Float64Array => new Float64Array(all);
  let size = 0;
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
    timeUpper: column(),
    timeLower: column(),
    timeRate: column(),
    timeBrake: column(),
    timeInBand: new Float64Array(all * bands),
    gear: new Uint8Array(all),
    driveForce: column(),
    wheelPower: column(),
    driveWork: column(),
    regenerationWork: column(),
    brakeWork: column(),
  };

  const close: Recorder['close'] = (s, p, sums, timeAt, gear) => {
    const i = size++;
    const time = sums[TIME];
    r.timeAt[i] = timeAt;
    r.gear[i] = gear;
    if (!(time > 0)) {
      // No sample starts in this bin: what holds while it is passed over.
      const setSpeed = s[BUS_TARGET] * p[at.P_TO_TRUE];
      r.setSpeed[i] = setSpeed;
      r.speedMean[i] = r.speedMin[i] = r.speedMax[i] = s[at.SPEED];
      r.errorMin[i] = r.errorMax[i] = s[at.SPEED] - setSpeed;
      r.throttleMean[i] = r.throttleMin[i] = r.throttleMax[i] = s[at.ACTUATOR];
      r.driveForce[i] = s[at.SAMPLE_DRIVE_FORCE];
      r.wheelPower[i] = s[at.SAMPLE_DRIVE_FORCE] * s[at.SPEED];
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
    r.errorMin[i] = sums[ERROR_MIN];
    r.errorMax[i] = sums[ERROR_MAX];
    r.throttleMean[i] = sums[THROTTLE] / time;
    r.throttleMin[i] = sums[THROTTLE_MIN];
    r.throttleMax[i] = sums[THROTTLE_MAX];
    r.throttleTravel[i] = sums[TRAVEL];
    r.timeUpper[i] = sums[UPPER];
    r.timeLower[i] = sums[LOWER];
    r.timeRate[i] = sums[RATE];
    r.timeBrake[i] = sums[BRAKE];
    for (let b = 0; b < bands; b++) r.timeInBand[i * bands + b] = sums[BAND + b];
    r.driveForce[i] = sums[DISTANCE] > 0 ? sums[DRIVE] / sums[DISTANCE] : s[at.SAMPLE_DRIVE_FORCE];
    r.wheelPower[i] = sums[DRIVE] / time;
    r.driveWork[i] = sums[PUSH];
    r.regenerationWork[i] = sums[DRIVE] - sums[PUSH];
    r.brakeWork[i] = sums[BRAKE_WORK];
    clearSums(sums);
  };

  const finish = (): BinRecord => {
    if (size === all) return { ...r, size };
    const cut: Record<string, unknown> = {};
    for (const [key, value] of Object.entries(r)) {
      if (value instanceof Float64Array)
        cut[key] = value.slice(0, key === 'edge' ? size + 1 : key === 'timeInBand' ? size * bands : size);
    }
    return { ...r, ...cut, size, gear: r.gear.slice(0, size) };
  };
  return { close, finish };
}
