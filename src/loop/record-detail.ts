import { BUS_TARGET } from '../control/bus.ts';
import { fromKmh } from '../units/convert.ts';
import { distributionRecorder } from './distribution.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { BinDetail } from './result.ts';

const ERROR_CLASS = fromKmh(0.01);
const COMMAND_CLASS = 0.001;
const ACCELERATION_CLASS = 0.01;
const JERK_CLASS = 0.005;
/**
 * Window of the jerk [s]: about the shortest change of acceleration that a rider tells from a jolt, and as long as any
 * usual sample, so that loops of different sample times are measured alike; from one sample to the next, jerk is that
 * of the sampling.
 */
const JERK_WINDOW = 0.2;
/** A command that comes back by less has not turned. */
const DEAD_ZONE = 0.005;

/** What is read of a machine. */
export type Heard = Pick<Machine, 's' | 'p' | 'log' | 'chunk'>;

/** The detail of a record while it grows. */
export interface DetailRecorder {
  /** Adds the samples that the kernel has just run to the open bin. */
  readonly add: (machine: Heard) => void;
  /** The same of samples with hold off: nothing counts, and the command is followed anew behind them. */
  readonly skip: (machine: Heard) => void;
  readonly close: () => void;
  readonly finish: () => BinDetail;
}

/**
 * A recorder of what `BinDetail` tells. Keeps its own memory of the samples before: nothing of the run depends on it.
 *
 * @param bins how many there will be at most
 * @param sample time of a sample [s]
 */
export function detailRecorder(bins: number, sample: number): DetailRecorder {
  const column = (): Float64Array => new Float64Array(bins);
  const columns = {
    errorAbsolute: column(),
    errorMoment: column(),
    accelerationSquare: column(),
    accelerationAbsolute: column(),
    inertialWork: column(),
    commandRate: column(),
    reversals: new Uint32Array(bins),
  };
  const error = distributionRecorder(bins, ERROR_CLASS, sample);
  const command = distributionRecorder(bins, COMMAND_CLASS, sample);
  const acceleration = distributionRecorder(bins, ACCELERATION_CLASS, sample);
  const jerk = distributionRecorder(bins, JERK_CLASS, sample);
  const window = Math.max(1, Math.round(JERK_WINDOW / sample));
  const perWindowSquare = 1 / (window * sample * window * sample);
  // Speeds of the last two windows, then those of the chunk, then that at its end; values of a quantity in the chunk.
  const reach = 2 * window;
  const speeds = new Float64Array(reach + at.LOG_ROWS + 1);
  const values = new Float64Array(at.LOG_ROWS);
  let kept = 0;
  const turns = turnCounter();
  let bin = 0;
  /** Samples since the start of the bin. */
  let passed = 0;
  let before = Number.NaN;

  const takeSpeeds = ({ s, log }: Heard, rows: number): void => {
    for (let row = 0; row < rows; row++) speeds[reach + row] = log[row * at.L_STRIDE + at.L_SPEED];
    speeds[reach + rows] = s[at.SPEED];
  };
  const keepSpeeds = (rows: number): void => {
    speeds.copyWithin(0, rows, rows + reach);
    kept = Math.min(reach, kept + rows);
  };

  const addErrors = (setSpeed: number, rows: number, lastShare: number): void => {
    let absolute = 0;
    let moment = 0;
    for (let row = 0; row < rows; row++) {
      const share = row < rows - 1 ? 1 : lastShare;
      const e = speeds[reach + row] - setSpeed;
      const size = Math.abs(e) * share;
      values[row] = e;
      absolute += size;
      moment += size * (passed + row + 0.5 * share);
    }
    error.add(values, rows, lastShare);
    columns.errorAbsolute[bin] += sample * absolute;
    columns.errorMoment[bin] += sample * sample * moment;
  };

  const addAccelerations = (mass: number, rows: number, lastShare: number): void => {
    let squares = 0;
    let changes = 0;
    let rises = 0;
    for (let row = 0; row < rows; row++) {
      const time = row < rows - 1 ? sample : lastShare * sample;
      const speed = speeds[reach + row];
      const change = speeds[reach + row + 1] - speed;
      const a = time > 0 ? change / time : 0;
      values[row] = a;
      squares += a * change;
      changes += Math.abs(change);
      if (change > 0) rises += change * (speed + speed + change);
    }
    acceleration.add(values, rows, lastShare);
    columns.accelerationSquare[bin] += squares;
    columns.accelerationAbsolute[bin] += changes;
    columns.inertialWork[bin] += 0.5 * mass * rises;
  };

  const addJerks = (rows: number, lastShare: number): void => {
    let count = 0;
    for (let row = Math.max(0, reach - kept); row < rows; row++)
      values[count++] = (speeds[row + reach] - 2 * speeds[row + window] + speeds[row]) * perWindowSquare;
    jerk.add(values, count, lastShare);
  };

  const addCommands = ({ p, log }: Heard, rows: number, lastShare: number): void => {
    const highest = p[at.P_GREATEST];
    const lowest = p[at.P_LEAST];
    let steepest = 0;
    for (let row = 0; row < rows; row++) {
      const u = Math.min(Math.max(log[row * at.L_STRIDE + at.L_COMMAND], lowest), highest);
      values[row] = u;
      const step = Math.abs(u - before);
      if (step > steepest) steepest = step;
      before = u;
      if (turns.turned(u)) columns.reversals[bin]++;
    }
    command.add(values, rows, lastShare);
    columns.commandRate[bin] = Math.max(columns.commandRate[bin], steepest / sample);
  };
  const forgetCommand = (): void => {
    before = Number.NaN;
    turns.forget();
  };

  const add: DetailRecorder['add'] = (machine) => {
    const { s, p, chunk } = machine;
    const rows = chunk[at.C_TICKS];
    if (rows === 0) return;
    const lastShare = chunk[at.C_TIME] / sample - (rows - 1);
    takeSpeeds(machine, rows);
    addErrors(s[BUS_TARGET] * p[at.P_TO_TRUE], rows, lastShare);
    addAccelerations(s[at.EFFECTIVE_MASS], rows, lastShare);
    addJerks(rows, lastShare);
    keepSpeeds(rows);
    passed += rows - 1 + lastShare;
    if (s[at.SHIFT_PART] > 0) forgetCommand();
    else addCommands(machine, rows, lastShare);
  };

  const skip: DetailRecorder['skip'] = (machine) => {
    const rows = machine.chunk[at.C_TICKS];
    if (rows === 0) return;
    takeSpeeds(machine, rows);
    keepSpeeds(rows);
    passed += machine.chunk[at.C_TIME] / sample;
    forgetCommand();
  };

  const close = (): void => {
    for (const one of [error, command, acceleration, jerk]) one.close();
    bin++;
    passed = 0;
  };
  const finish = (): BinDetail => ({
    errorAbsolute: columns.errorAbsolute.slice(0, bin),
    errorMoment: columns.errorMoment.slice(0, bin),
    accelerationSquare: columns.accelerationSquare.slice(0, bin),
    accelerationAbsolute: columns.accelerationAbsolute.slice(0, bin),
    inertialWork: columns.inertialWork.slice(0, bin),
    commandRate: columns.commandRate.slice(0, bin),
    reversals: columns.reversals.slice(0, bin),
    error: error.finish(),
    command: command.finish(),
    acceleration: acceleration.finish(),
    jerk: jerk.finish(),
  });
  return { add, skip, close, finish };
}

/** Turns of a command with a dead zone: it has turned once it is that far from its last extreme, on the other side. */
function turnCounter() {
  let direction = 0;
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  return {
    turned: (u: number): boolean => {
      if (u > high) high = u;
      if (u < low) low = u;
      if (direction >= 0 && high - u > DEAD_ZONE) {
        const turned = direction > 0;
        direction = -1;
        low = u;
        return turned;
      }
      if (direction <= 0 && u - low > DEAD_ZONE) {
        const turned = direction < 0;
        direction = 1;
        high = u;
        return turned;
      }
      return false;
    },
    forget: (): void => {
      direction = 0;
      low = Number.POSITIVE_INFINITY;
      high = Number.NEGATIVE_INFINITY;
    },
  };
}
