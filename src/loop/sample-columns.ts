import {
  BUS_COMMAND,
  BUS_FEEDFORWARD,
  BUS_INTEGRAL,
  BUS_MEASURED,
  BUS_PROPORTIONAL,
  BUS_REFERENCE,
  BUS_TARGET,
} from '../control/bus.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { LIMIT_BRAKE, LIMIT_LOWER, LIMIT_RATE, LIMIT_UPPER } from './plan.ts';
import type { FullSeries } from './result.ts';

const NUMBERS = [
  'time',
  'distance',
  'setSpeed',
  'reference',
  'speed',
  'measured',
  'command',
  'actuator',
  'proportional',
  'integral',
  'feedforward',
  'driveForce',
  'brakeForce',
  'acceleration',
] as const;

/** A full series while it grows. */
export interface SampleColumns {
  /** Adds the sample that a kernel has just run, with the time [s] and horizontal distance [m] of its start. */
  readonly push: (machine: Machine, time: number, distance: number, gear: number) => void;
  readonly finish: () => FullSeries;
}

/** LIMIT_ bits of the one sample in the log. */
function limitBits({ s, p, chunk }: Machine): number {
  return (
    (s[BUS_COMMAND] >= p[at.P_HIGH] ? LIMIT_UPPER : 0) |
    (s[BUS_COMMAND] <= p[at.P_LOW] ? LIMIT_LOWER : 0) |
    (chunk[at.C_RATED_TIME] > 0 ? LIMIT_RATE : 0) |
    (chunk[at.C_BRAKE_FORCE] > 0 ? LIMIT_BRAKE : 0)
  );
}

/** Reference, set speed and error are in true speed, like `speed`; `measured` is what the controller read. */
export function sampleColumns(): SampleColumns {
  const width = NUMBERS.length + 2;
  let rows = new Float64Array(width * 1024);
  let size = 0;
  const push: SampleColumns['push'] = (machine, time, distance, gear) => {
    const { s, p, log, chunk } = machine;
    if (width * (size + 1) > rows.length) {
      const more = new Float64Array(2 * rows.length);
      more.set(rows);
      rows = more;
    }
    const row = width * size++;
    rows[row] = time;
    rows[row + 1] = distance;
    rows[row + 2] = s[BUS_TARGET] * p[at.P_TO_TRUE];
    rows[row + 3] = s[BUS_REFERENCE] * p[at.P_TO_TRUE];
    rows[row + 4] = log[at.L_SPEED];
    rows[row + 5] = s[BUS_MEASURED];
    rows[row + 6] = s[BUS_COMMAND];
    rows[row + 7] = log[at.L_ACTUATOR];
    rows[row + 8] = s[BUS_PROPORTIONAL];
    rows[row + 9] = s[BUS_INTEGRAL];
    rows[row + 10] = s[BUS_FEEDFORWARD];
    rows[row + 11] = p[at.P_EFFECTIVE_MASS] * chunk[at.C_DRIVE_FORCE];
    rows[row + 12] = p[at.P_EFFECTIVE_MASS] * chunk[at.C_BRAKE_FORCE];
    rows[row + 13] = chunk[at.C_ACCELERATION];
    rows[row + 14] = limitBits(machine);
    rows[row + 15] = gear;
  };
  const finish = (): FullSeries => {
    const column = (k: number): Float64Array => {
      // A plain loop: `from` with a callback costs twenty times as much.
      const values = new Float64Array(size);
      for (let i = 0; i < size; i++) values[i] = rows[width * i + k]!;
      return values;
    };
    const numbers = Object.fromEntries(NUMBERS.map((name, k) => [name, column(k)])) as Record<
      (typeof NUMBERS)[number],
      Float64Array
    >;
    const limit = Uint8Array.from(column(NUMBERS.length));
    return { ...numbers, size, limit, gear: Uint8Array.from(column(NUMBERS.length + 1)) };
  };
  return { push, finish };
}
