import { BUS_TARGET } from '../control/bus.ts';
import { setTarget } from '../control/set-point.ts';
import { advanceExact } from './exact.ts';
import { advanceFast } from './fast.ts';
import { gearbox, restingController } from './gearbox.ts';
import { holdOf } from './hold.ts';
import { holdLog } from './hold-log.ts';
import * as at from './layout.ts';
import { addWorks } from './ledger.ts';
import type { Kernel, Machine } from './machine.ts';
import { stationAt } from './places.ts';
import { asksOfHold, type LoopPlan, type SetSpeedChange } from './plan.ts';
import type { HoldEvent, ShiftEvent } from './result.ts';
import { lockThrottle, markLock } from './settle.ts';

/** Ticks that reach a time [s] from a tick count; a hair early counts as reached. */
const ticksTo = (time: number, sample: number, tick: number): number =>
  Math.max(0, Math.ceil(time / sample - 1e-9) - tick);

/** A run under way: chunks of the kernel, cut where the set speed changes, gears are shifted, and hold changes hands. */
export interface Journey {
  /** Runs samples until one would start at or beyond a station [m] or [s], or `ticks` have run. Returns the event. */
  readonly advance: (until: number, ticks: number) => number;
  /** Seconds since the start of the run. */
  readonly time: () => number;
  /** True when the time limit is reached. */
  readonly late: () => boolean;
  /** Shifts that have begun in this journey, in order along the way. */
  readonly shifts: readonly ShiftEvent[];
  /** What has become of hold in this journey, in order along the way. */
  readonly holdEvents: readonly HoldEvent[];
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
    s[at.PLANNED_SPEED] = setSpeed;
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

  // Set speed and gear in force here, by this plan; what taps and engaging have made of the set speed stays.
  s[at.CHANGES] = 0;
  while (s[at.CHANGES] < changes.length && due(s[at.CHANGES])) s[at.CHANGES] += 1;
  const last = s[at.CHANGES] > 0 ? changes[s[at.CHANGES] - 1]! : null;
  const log = holdLog(machine, plan);
  const gears = gearbox(
    machine,
    plan,
    () => {
      markLock(machine, plan);
      lockThrottle(machine, plan, s[BUS_TARGET]);
    },
    (kind) => log.note(kind, 'gear_change'),
  );
  const inForce = last?.setSpeed ?? plan.hold.setSpeed;
  if (s[at.PLANNED_SPEED] !== inForce) change(inForce, last);
  lockThrottle(machine, plan, s[BUS_TARGET]);
  const ridden: Machine = { ...machine, controller: restingController(machine.controller) };
  const hold = asksOfHold(plan) ? holdOf(machine, ridden, plan, log) : null;

  const advance = (until: number, ticks: number): number => {
    let left = Math.min(ticks, lastTick - s[at.TICK]);
    let event = at.RUNNING;
    while (left > 0 && s[at.STATION] < until && event === at.RUNNING) {
      makeChanges();
      hold?.takeFound();
      if (!(hold?.declutched() ?? false)) gears.shift();
      const shifting = gears.holdIsOff();
      hold?.act(shifting);
      const next = s[at.CHANGES] < changes.length ? changes[s[at.CHANGES]]! : null;
      const place = next === null ? Number.POSITIVE_INFINITY : places[s[at.CHANGES]]!;
      const run =
        next !== null && 'time' in next.at ? ticksTo(next.at.time + late, sample, s[at.TICK]) : at.LOG_ROWS;
      const before = s[at.TICK];
      let most = Math.min(run, left, at.LOG_ROWS, gears.ticksLeft());
      let end = Math.min(until, place);
      if (!(hold?.declutched() ?? false)) end = Math.min(end, gears.nextPlace());
      if (hold !== null) {
        most = Math.min(most, hold.ticksLeft(shifting));
        end = Math.min(end, hold.nextPlace(shifting));
      }
      event = kernel(hold?.machine(shifting) ?? (shifting ? ridden : machine), most, end);
      hold?.tell();
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
    holdEvents: log.events,
  };
}
