import { BUS_MEASURED } from '../control/bus.ts';
import type { Controller } from '../control/controller.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { LoopPlan, SensorFault } from './plan.ts';
import type { Checkpoint } from './result.ts';
import { routeSchedule, ticksOf } from './route-schedule.ts';

/** Kinds of a fault; s[FAULT] is 1 + the place in it. */
const KINDS: readonly SensorFault['shows'][] = ['nothing', 'last_value', 'double'];

/** The faults of the speed sensor in a run under way. */
export interface SensorFaults {
  /** Ends and begins those that are due at the sample that starts now; of two at once the later one shows. */
  readonly take: () => void;
  /** As in RouteSchedule: until one ends or begins. */
  readonly ticksLeft: () => number;
  readonly nextPlace: () => number;
}

export function sensorFaults(machine: Machine, plan: LoopPlan): SensorFaults {
  const { s } = machine;
  const schedule = routeSchedule(machine, plan, plan.faults ?? [], at.FAULTS_BEGUN);
  return {
    take: () => {
      if (s[at.FAULT] !== 0 && s[at.TICK] >= s[at.FAULT_UNTIL]) s[at.FAULT] = 0;
      for (let fault = schedule.take(); fault !== null; fault = schedule.take()) {
        s[at.FAULT] = 1 + KINDS.indexOf(fault.shows);
        s[at.FAULT_UNTIL] = s[at.TICK] + Math.max(1, ticksOf(machine, fault.for));
        s[at.FAULT_VALUE] = s[BUS_MEASURED];
      }
    },
    ticksLeft: () =>
      Math.min(
        schedule.ticksLeft(),
        s[at.FAULT] === 0 ? Number.POSITIVE_INFINITY : s[at.FAULT_UNTIL] - s[at.TICK],
      ),
    nextPlace: schedule.nextPlace,
  };
}

/** How many faults of its plan a run had begun at a checkpoint. */
export const faultsBegun = ({ state }: Checkpoint): number => state[at.FAULTS_BEGUN];

/** A controller, of any kind, to which a sensor with faults tells the speed. */
export function withFaultySensor(inner: Controller): Controller {
  const step = (bus: Float64Array): void => {
    const fault = bus[at.FAULT];
    if (fault === 1) bus[BUS_MEASURED] = 0;
    else if (fault === 2) bus[BUS_MEASURED] = bus[at.FAULT_VALUE];
    else if (fault === 3) bus[BUS_MEASURED] *= 2;
    inner.step(bus);
  };
  return { ...inner, step };
}
