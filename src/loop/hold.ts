import { BUS_MEASURED, BUS_TARGET } from '../control/bus.ts';
import { holdRules } from '../control/hold-rules.ts';
import { setTarget } from '../control/set-point.ts';
import type { HoldLog } from './hold-log.ts';
import { holdMachines } from './hold-machines.ts';
import { holdModes } from './hold-modes.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { LoopPlan, RiderAct } from './plan.ts';
import type { HoldEventCause } from './result.ts';
import { routeSchedule } from './route-schedule.ts';
import { sensorFaults } from './sensor-faults.ts';

/** Who has the throttle, in a run under way: what happens to hold between two chunks of the kernel. */
export interface Hold {
  /** Takes what the sample before has found; to be called before the rider's shifts of the sample that starts now. */
  readonly takeFound: () => void;
  /** Does what else is due at that sample; `shifting`: the rider is busy with a shift, and acts wait. */
  readonly act: (shifting: boolean) => void;
  /** The machine with the controller that steps now. */
  readonly machine: (shifting: boolean) => Machine;
  /** True while the rider has the clutch pulled without a shift. */
  readonly declutched: () => boolean;
  /** Samples until something is due; Infinity: nothing that is known by its time. */
  readonly ticksLeft: (shifting: boolean) => number;
  /** Station from which on no sample may start before `act` has been called [m] or [s]. */
  readonly nextPlace: (shifting: boolean) => number;
  /** To be called after each chunk: events that wanted to see their first sample. */
  readonly tell: () => void;
}

/**
 * The supervisor and the rider of a journey that begins at the machine's present state.
 *
 * At one sample things happen in this order: planned changes of the set speed; what the controller's step of the sample
 * before has found (a rule that ends hold, the speed back after an override); the rider's shifts; the end of a fault, and
 * its beginning; grip or clutch let go; acts that are due, in the order of the plan; the rider's own resume. Then the
 * sensor measures, and what has the throttle steps. An act is taken where the command that answers it moves the
 * throttle; while the rider shifts, acts wait, and a shift ends an override.
 *
 *   engage   the speed measured in this sample becomes the set speed; also while hold is on, where it lets the grip go
 *   resume   while hold is off; below the lowest speed both are refused, as with the clutch pulled
 *   tap      while hold is on; refused where it would lead below the lowest speed
 *   override while hold is on
 *   cancel   while hold is off: nothing happens
 *   brake    while hold is off: brakes to the new speed; so does ride, with the throttle
 *   clutch   pulled while hold is off too
 *
 * What is asked of hold in another state is an event `refused` by the rider, and has no effect. After a rule has ended
 * hold the rider holds the speed of that moment, so that below the lowest speed their own resume waits.
 *
 * @param ridden the machine for the rider's shifts
 */
export function holdOf(machine: Machine, ridden: Machine, plan: LoopPlan, log: HoldLog): Hold {
  const { s, p } = machine;
  const { supervisor = null } = plan;
  const sample = p[at.P_SAMPLE];
  const locked = plan.controller.kind === 'locked';
  const rules = supervisor === null || locked ? null : holdRules(supervisor, sample, at.RULES_MEMORY);
  p[at.P_HOLD] = 1;
  const inForce = holdMachines(machine, ridden, plan, rules);
  const modes = holdModes(machine, plan, log);
  const faults = sensorFaults(machine, plan);
  const acts = routeSchedule(machine, plan, plan.rider.acts ?? [], at.HOLD_ACTS);
  /** A sensor that shows nothing gives no set speed, rules or not. */
  const refuses = (speed: number): boolean => !(speed > 0) || (rules?.refuses(speed) ?? false);

  const engage = (takes: number, cause: HoldEventCause): void => {
    if (s[at.HOLD_MODE] === at.DECLUTCHED) log.note('refused', 'clutch');
    else if (takes === at.RESUMES && !modes.isOff()) log.note('refused', 'rider');
    else if (refuses(s[BUS_MEASURED])) log.note('refused', 'below_lowest_speed');
    else {
      if (!modes.isOff()) modes.endOverride(cause);
      modes.takeOver(takes, cause);
    }
  };
  const tap = (taps: number, cause: HoldEventCause): void => {
    const target = s[BUS_TARGET] + taps * (supervisor?.tap ?? 0);
    if (modes.isOff() || locked) log.note('refused', 'rider');
    else if (refuses(target)) log.note('refused', 'below_lowest_speed');
    else {
      setTarget(s, target, supervisor?.tapRamp ?? machine.controller.ramp, sample);
      s[at.BRAKE_REFERENCE] = Math.max(s[at.BRAKE_REFERENCE], target);
      log.note('tapped', cause);
    }
  };
  /** Hold ends, and the rider brakes (rate above 0) or rides (below) to another speed. */
  const goTo = (speed: number, rate: number, cause: HoldEventCause): void => {
    modes.end(at.BY_HAND, cause);
    s[at.HAND_SPEED] = speed;
    s[at.HAND_RATE] = rate;
  };
  const perform = ({ does, reason }: RiderAct): void => {
    const by = (cause: HoldEventCause): HoldEventCause => (reason === 'bend' ? 'bend' : cause);
    switch (does.kind) {
      case 'engage':
        engage(at.ENGAGES, by('rider'));
        return;
      case 'resume':
        engage(at.RESUMES, by('rider'));
        return;
      case 'tap':
        tap(does.taps, by('rider'));
        return;
      case 'override':
        if (modes.isOff()) log.note('refused', 'rider');
        else modes.beginOverride(does.throttle, does.for, by('rider'));
        return;
      case 'cancel':
        if (!modes.isOff()) modes.end(does.then === 'coasts' ? at.COASTING : at.BY_HAND, by('rider'));
        return;
      case 'brake':
        goTo(Math.min(does.to, s[at.SPEED]), does.deceleration, by('brake'));
        return;
      case 'ride':
        goTo(does.to, -does.acceleration, by('rider'));
        return;
      case 'clutch':
        modes.pullClutch(does.for, by('clutch'));
        return;
    }
  };

  const act = (shifting: boolean): void => {
    faults.take();
    if (shifting) {
      if (!modes.isOff()) s[at.HOLD_MODE] = at.ENGAGED;
      return;
    }
    modes.letGo();
    // Whatever comes after a takeover at the same place waits until that has been done, in the next sample.
    while (s[at.HOLD_TAKES] === 0) {
      const next = acts.take();
      if (next === null) break;
      perform(next);
    }
    const resumes = s[at.HOLD_RESUMES];
    if (resumes > 0 && s[at.TICK] >= resumes && !refuses(s[BUS_MEASURED]))
      modes.takeOver(at.RESUMES, 'rider');
  };
  const ticksLeft = (shifting: boolean): number => {
    const mode = s[at.HOLD_MODE];
    let left = faults.ticksLeft();
    if (s[at.HOLD_TAKES] !== 0) left = 1;
    else if (!shifting) {
      left = Math.min(left, acts.ticksLeft());
      if (mode === at.OVERRIDDEN || mode === at.DECLUTCHED)
        left = Math.min(left, s[at.HOLD_UNTIL] - s[at.TICK]);
      if (s[at.HOLD_RESUMES] > 0) left = Math.min(left, s[at.HOLD_RESUMES] - s[at.TICK]);
    }
    return Math.max(1, left);
  };
  const nextPlace = (shifting: boolean): number =>
    Math.min(
      faults.nextPlace(),
      shifting || s[at.HOLD_TAKES] !== 0 ? Number.POSITIVE_INFINITY : acts.nextPlace(),
    );
  return {
    takeFound: modes.takeFound,
    act,
    machine: inForce,
    declutched: () => s[at.HOLD_MODE] === at.DECLUTCHED,
    ticksLeft,
    nextPlace,
    tell: () => {
      if (s[at.HOLD_TAKES] === 0) log.close();
    },
  };
}
