import { BUS_TARGET } from '../control/bus.ts';
import { setTarget } from '../control/set-point.ts';
import { advanceExact } from './exact.ts';
import { advanceFast } from './fast.ts';
import { gearbox, restingController } from './gearbox.ts';
import * as at from './layout.ts';
import { addWorks } from './ledger.ts';
import type { Kernel, Machine } from './machine.ts';
import { stationAt } from './places.ts';
import type { LoopPlan, SetSpeedChange } from './plan.ts';
import type { ShiftEvent } from './result.ts';
import { lockThrottle, markLock } from './settle.ts';

/** Ticks that reach a time [s] from a tick count; a hair early counts as reached. */
const ticksTo = (time: number, sample: number, tick: number): number =>
  Math.max(0, Math.ceil(time / sample - 1e-9) - tick);

/** A run under way: chunks of the kernel, cut where the set speed changes and where gears are shifted. */
export interface Journey {
  /** Runs samples until one would start at or beyond a station [m] or [s], or `ticks` have run. Returns the event. */
  readonly advance: (until: number, ticks: number) => number;
  /** Seconds since the start of the run. */
  readonly time: () => number;
  /** True when the time limit is reached. */
  readonly late: () => boolean;
  /** Shifts that have begun in this journey, in order along the way. */
  readonly shifts: readonly ShiftEvent[];
}

/**
 * A journey from the machine's present state. Set-speed changes that lie at or before it are taken as made: where the
 * set speed in force is not the plan's (a replay with another one), it changes now.
 *
 * @param heard called after each chunk, while its samples are in the log
 */
export function journey(machine: Machine, plan: LoopPlan, heard: (machine: Machine) => void): Journey {
  const { s, p } = machine;
  const kernel: Kernel = plan.scheme === 'fast' ? advanceFast : advanceExact;
  const sample = p[at.P_SAMPLE];
  const { changes } = plan.hold;
  const lastTick = Math.ceil(plan.timeLimit / sample - 1e-9);
  // A change acts when the command that follows it does, computing delay and dead time later; by distance, at the set speed before it.
  const late = machine.controller.computingDelay + plan.vehicle.actuator.deadTime;
  const places = changes.map(({ at: place }, i) => {
    if (!('distance' in place)) return Number.POSITIVE_INFINITY;
    const before = p[at.P_TO_TRUE] * (i === 0 ? plan.hold : changes[i - 1]!).setSpeed;
    return stationAt(plan.road, place.distance) + late * (plan.road.along === 'time' ? 1 : before);
  });
  const due = (i: number): boolean => {
    const place = changes[i]!.at;
    return 'time' in place
      ? ticksTo(place.time + late, sample, s[at.TICK]) === 0
      : s[at.STATION] >= places[i]!;
  };
  const change = (setSpeed: number, made: SetSpeedChange | null): void => {
    setTarget(s, setSpeed, made?.ramp ?? machine.controller.ramp, sample);
    s[at.BRAKE_REFERENCE] = Math.max(s[at.BRAKE_REFERENCE], setSpeed);
    markLock(machine, plan);
  };
  const makeChanges = (): void => {
    while (s[at.CHANGES] < changes.length && due(s[at.CHANGES])) {
      const made = changes[s[at.CHANGES]]!;
      s[at.CHANGES] += 1;
      change(made.setSpeed, made);
      lockThrottle(machine, plan, made.setSpeed);
    }
  };

  const setSpeedInForce = (): number =>
    s[at.CHANGES] > 0 ? changes[s[at.CHANGES] - 1]!.setSpeed : plan.hold.setSpeed;

  // Set speed and gear in force here, by this plan.
  s[at.CHANGES] = 0;
  while (s[at.CHANGES] < changes.length && due(s[at.CHANGES])) s[at.CHANGES] += 1;
  const last = s[at.CHANGES] > 0 ? changes[s[at.CHANGES] - 1]! : null;
  const gears = gearbox(machine, plan, () => {
    markLock(machine, plan);
    lockThrottle(machine, plan, setSpeedInForce());
  });
  const inForce = setSpeedInForce();
  if (s[BUS_TARGET] !== inForce) change(inForce, last);
  lockThrottle(machine, plan, inForce);
  const ridden: Machine = { ...machine, controller: restingController(machine.controller) };

  const advance = (until: number, ticks: number): number => {
    let left = Math.min(ticks, lastTick - s[at.TICK]);
    let event = at.RUNNING;
    while (left > 0 && s[at.STATION] < until && event === at.RUNNING) {
      makeChanges();
      gears.shift();
      const next = s[at.CHANGES] < changes.length ? changes[s[at.CHANGES]]! : null;
      const place = next === null ? Number.POSITIVE_INFINITY : places[s[at.CHANGES]]!;
      const run =
        next !== null && 'time' in next.at ? ticksTo(next.at.time + late, sample, s[at.TICK]) : at.LOG_ROWS;
      const before = s[at.TICK];
      event = kernel(
        gears.holdIsOff() ? ridden : machine,
        Math.min(run, left, at.LOG_ROWS, gears.ticksLeft()),
        Math.min(until, place, gears.nextPlace()),
      );
      addWorks(machine);
      heard(machine);
      left -= s[at.TICK] - before;
    }
    return event;
  };
  return {
    advance,
    time: () => s[at.TICK] * sample + s[at.PARTIAL],
    late: () => s[at.TICK] >= lastTick,
    shifts: gears.shifts,
  };
}
