import {
  BUS_COMMAND,
  BUS_FEEDFORWARD,
  BUS_INTEGRAL,
  BUS_LIMITED,
  BUS_MEASURED,
  BUS_PROPORTIONAL,
  BUS_REFERENCE,
  BUS_TARGET,
} from '../control/bus.ts';
import { gearInHand } from './engage-gear.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import {
  LIMIT_BRAKE,
  LIMIT_LOWER,
  LIMIT_OFF,
  LIMIT_OVERRIDE,
  LIMIT_RATE,
  LIMIT_SHIFT,
  LIMIT_UPPER,
} from './plan.ts';
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
  'shaftSpeed',
  'driveForce',
  'brakeForce',
  'acceleration',
] as const;

/** A full series while it grows. */
export interface SampleColumns {
  /** Adds the sample that a kernel has just run, with the time [s] and horizontal distance [m] of its start. */
  readonly push: (machine: Machine, time: number, distance: number) => void;
  readonly finish: () => FullSeries;
}

/** LIMIT_ bits of the one sample in the log. With hold off no limit holds it back; the brake is on all the same. */
function limitBits({ s, p, chunk }: Machine): number {
  const shifting = s[at.SHIFT_PART] > 0;
  const off = s[at.HOLD_MODE] >= at.BY_HAND;
  const held = !(shifting || off);
  const overridden = s[at.HOLD_MODE] === at.OVERRIDDEN && s[BUS_LIMITED] > s[at.OWN_COMMAND];
  return (
    (held && s[BUS_COMMAND] >= p[at.P_GREATEST] ? LIMIT_UPPER : 0) |
    (held && s[BUS_COMMAND] <= p[at.P_LEAST] ? LIMIT_LOWER : 0) |
    (!off && chunk[at.C_RATED_TIME] > 0 ? LIMIT_RATE : 0) |
    (chunk[at.C_BRAKE_FORCE] > 0 ? LIMIT_BRAKE : 0) |
    (shifting ? LIMIT_SHIFT : 0) |
    (off ? LIMIT_OFF : 0) |
    (held && overridden ? LIMIT_OVERRIDE : 0)
  );
}

/**
 * With hold off the set speed is the one that a resume goes back to, and the reference the speed that the rider holds or
 * brakes to. Reference, set speed and error are in true speed, like `speed`; `measured` is what the controller read.
 *
 * @param expected number of samples, about
 */
export function sampleColumns(expected: number): SampleColumns {
  // A tenth more than expected; what is not to be told beforehand grows.
  let capacity = Math.min(Math.max(Math.ceil(1.1 * expected), 256), 1 << 20);
  const columns = NUMBERS.map(() => new Float64Array(capacity));
  let limit = new Uint8Array(capacity);
  let gears = new Uint8Array(capacity);
  let size = 0;
  const grow = (): void => {
    capacity *= 2;
    columns.forEach((column, k) => {
      columns[k] = new Float64Array(capacity);
      columns[k]!.set(column);
    });
    [limit, gears] = [limit, gears].map((bytes) => {
      const more = new Uint8Array(capacity);
      more.set(bytes);
      return more;
    }) as [typeof limit, typeof gears];
  };
  const push: SampleColumns['push'] = (machine, time, distance) => {
    const { s, p, log, chunk } = machine;
    if (size === capacity) grow();
    columns[0]![size] = time;
    columns[1]![size] = distance;
    columns[2]![size] = s[BUS_TARGET] * p[at.P_TO_TRUE];
    columns[3]![size] = s[at.HOLD_MODE] >= at.BY_HAND ? s[at.HAND_SPEED] : s[BUS_REFERENCE] * p[at.P_TO_TRUE];
    columns[4]![size] = log[at.L_SPEED];
    columns[5]![size] = s[BUS_MEASURED];
    columns[6]![size] = s[BUS_COMMAND];
    columns[7]![size] = log[at.L_ACTUATOR];
    columns[8]![size] = s[BUS_PROPORTIONAL];
    columns[9]![size] = s[BUS_INTEGRAL];
    columns[10]![size] = s[BUS_FEEDFORWARD];
    columns[11]![size] = s[at.RATIO] * log[at.L_SPEED];
    columns[12]![size] = chunk[at.C_DRIVE_FORCE];
    columns[13]![size] = chunk[at.C_BRAKE_FORCE];
    columns[14]![size] = chunk[at.C_ACCELERATION];
    limit[size] = limitBits(machine);
    gears[size] = gearInHand(s);
    size += 1;
  };
  const finish = (): FullSeries => {
    const numbers = Object.fromEntries(
      NUMBERS.map((name, k) => [name, columns[k]!.slice(0, size)]),
    ) as Record<(typeof NUMBERS)[number], Float64Array>;
    return { ...numbers, size, limit: limit.slice(0, size), gear: gears.slice(0, size) };
  };
  return { push, finish };
}
