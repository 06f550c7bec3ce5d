import { BUS_LIMITED, BUS_MEASURED, BUS_TARGET } from '../control/bus.ts';
import { holdRules, RULES } from '../control/hold-rules.ts';
import { setTarget } from '../control/set-point.ts';
import { engageGear } from './engage-gear.ts';
import { FAULTS } from './faulty-sensor.ts';
import { RESUME_RAMP } from './gearbox.ts';
import type { HoldLog } from './hold-log.ts';
import { holdMachines } from './hold-machines.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { stationAt } from './places.ts';
import type { LoopPlan, RiderAct, RoutePlace } from './plan.ts';
import type { HoldEventCause } from './result.ts';
import { lockThrottle, markLock } from './settle.ts';
import { closedThrottle } from './throttle-in-hand.ts';

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
 *   ride     while hold is off: goes on at the new speed
 *   clutch   pulled while hold is off too
 *
 * What is asked of hold in another state is an event `refused` by the rider, and has no effect. After a rule has ended
 * hold the rider holds the speed of that moment.
 *
 * @param ridden the machine for the rider's shifts
 */
export function holdOf(machine: Machine, ridden: Machine, plan: LoopPlan, log: HoldLog): Hold {
  const { s, p } = machine;
  const { supervisor = null, faults = [] } = plan;
  const { acts = [], resumesAfter = null } = plan.rider;
  const sample = p[at.P_SAMPLE];
  const locked = plan.controller.kind === 'locked';
  const servo = plan.vehicle.actuator.engagesFrom === 'rest' ? servoAt(machine) : null;
  const rules = supervisor === null || locked ? null : holdRules(supervisor, sample, at.RULES_MEMORY);
  const resumeRamp = supervisor === null ? (machine.controller.ramp ?? RESUME_RAMP) : supervisor.resumeRamp;
  p[at.P_HOLD] = 1;
  const inForce = holdMachines(machine, ridden, plan, rules);

  const ticksOf = (time: number): number => Math.ceil(time / sample - 1e-9);
  const placesOf = (of: readonly { readonly at: RoutePlace }[]): number[] =>
    of.map(({ at: place }) =>
      'distance' in place ? stationAt(plan.road, place.distance) : Number.POSITIVE_INFINITY,
    );
  const actPlaces = placesOf(acts);
  const faultPlaces = placesOf(faults);
  /** Samples until a place by time; Infinity for one by distance. */
  const ticksTo = ({ at: place }: { readonly at: RoutePlace }): number =>
    'time' in place ? Math.max(0, ticksOf(place.time) - s[at.TICK]) : Number.POSITIVE_INFINITY;
  const due = (of: { readonly at: RoutePlace }, place: number): boolean =>
    s[at.STATION] >= place || ticksTo(of) === 0;

  const isOff = (): boolean => s[at.HOLD_MODE] >= at.BY_HAND;
  const refuses = (): boolean => rules?.refuses(s[BUS_MEASURED]) ?? false;

  const goOff = (mode: number): void => {
    s[at.HOLD_MODE] = mode;
    s[at.HOLD_TAKES] = 0;
    s[at.HOLD_RESUMES] = 0;
    s[at.HAND_SPEED] = s[at.SPEED];
    s[at.HAND_RATE] = 0;
  };
  const takeOver = (takes: number, cause: HoldEventCause): void => {
    if (isOff() && servo !== null) servo(closedThrottle(p), -1);
    s[at.HOLD_MODE] = at.ENGAGED;
    s[at.HOLD_TAKES] = takes;
    s[at.HOLD_RESUMES] = 0;
    s[at.BRAKE_REFERENCE] = Number.POSITIVE_INFINITY;
    setTarget(s, s[BUS_TARGET], takes === at.RESUMES ? resumeRamp : null, sample);
    if (locked) {
      markLock(machine, plan);
      lockThrottle(machine, plan, takes === at.ENGAGES ? s[BUS_MEASURED] : s[BUS_TARGET]);
    }
    log.open(takes === at.ENGAGES ? 'engaged' : 'resumed', cause);
  };
  const endOverride = (cause: HoldEventCause): void => {
    if (s[at.HOLD_MODE] === at.OVERRIDDEN) {
      log.note('override_ended', cause);
      servo?.(s[at.OWN_COMMAND], 1);
    }
    s[at.HOLD_MODE] = at.ENGAGED;
  };

  const takeFound = (): void => {
    const found = s[at.HOLD_FOUND];
    s[at.HOLD_FOUND] = 0;
    if (found === at.RE_ENTERS && s[at.HOLD_MODE] === at.RE_ENTERING) {
      log.note('reentered', 'rider');
      s[at.HOLD_MODE] = at.ENGAGED;
      s[BUS_LIMITED] = s[at.OWN_COMMAND];
    } else if (found > 0 && !isOff()) {
      log.note('ended', RULES[found - 1]!);
      goOff(at.BY_HAND);
      if (resumesAfter !== null) s[at.HOLD_RESUMES] = s[at.TICK] + Math.max(1, ticksOf(resumesAfter));
    }
  };
  const takeFaults = (): void => {
    if (s[at.FAULT] !== 0 && s[at.TICK] >= s[at.FAULT_UNTIL]) s[at.FAULT] = 0;
    while (
      s[at.FAULTS_BEGUN] < faults.length &&
      due(faults[s[at.FAULTS_BEGUN]]!, faultPlaces[s[at.FAULTS_BEGUN]]!)
    ) {
      const fault = faults[s[at.FAULTS_BEGUN]]!;
      s[at.FAULTS_BEGUN] += 1;
      s[at.FAULT] = 1 + FAULTS.indexOf(fault.shows);
      s[at.FAULT_UNTIL] = s[at.TICK] + Math.max(1, ticksOf(fault.for));
      s[at.FAULT_VALUE] = s[BUS_MEASURED];
    }
  };
  const letGo = (): void => {
    if (s[at.TICK] < s[at.HOLD_UNTIL]) return;
    if (s[at.HOLD_MODE] === at.OVERRIDDEN) {
      log.note('override_ended', 'rider');
      s[at.HOLD_MODE] = at.RE_ENTERING;
      servo?.(s[at.OWN_COMMAND], 1);
    } else if (s[at.HOLD_MODE] === at.DECLUTCHED) {
      engageGear(machine, s[at.NEXT_GEAR]);
      s[at.HOLD_MODE] = at.BY_HAND;
      if (s[at.HAND_RATE] === 0) s[at.HAND_SPEED] = s[at.SPEED];
    }
  };

  const end = (mode: number, cause: HoldEventCause): void => {
    const was = s[at.HOLD_MODE];
    if (!isOff()) log.note('ended', cause);
    goOff(was === at.DECLUTCHED ? was : mode);
  };
  const engage = (takes: number, cause: HoldEventCause): void => {
    if (s[at.HOLD_MODE] === at.DECLUTCHED) log.note('refused', 'clutch');
    else if (takes === at.RESUMES && !isOff()) log.note('refused', 'rider');
    else if (refuses()) log.note('refused', 'below_lowest_speed');
    else {
      if (!isOff()) endOverride(cause);
      takeOver(takes, cause);
    }
  };
  const tap = (taps: number, cause: HoldEventCause): void => {
    const target = s[BUS_TARGET] + taps * (supervisor?.tap ?? 0);
    if (isOff() || locked) log.note('refused', 'rider');
    else if (!(target > 0) || rules?.refuses(target)) log.note('refused', 'below_lowest_speed');
    else {
      setTarget(s, target, supervisor?.tapRamp ?? machine.controller.ramp, sample);
      s[at.BRAKE_REFERENCE] = Math.max(s[at.BRAKE_REFERENCE], target);
      log.note('tapped', cause);
    }
  };
  const override = (throttle: number, time: number, cause: HoldEventCause): void => {
    if (isOff()) {
      log.note('refused', 'rider');
      return;
    }
    if (s[at.HOLD_MODE] === at.ENGAGED) s[at.OWN_COMMAND] = s[BUS_LIMITED];
    endOverride(cause);
    log.note('override_began', cause);
    s[at.HOLD_MODE] = at.OVERRIDDEN;
    s[at.HOLD_UNTIL] = s[at.TICK] + Math.max(1, ticksOf(time));
    s[at.GRIP] = Math.min(throttle, p[at.P_GREATEST]);
  };
  const pullClutch = (time: number, cause: HoldEventCause): void => {
    const open = s[at.HOLD_MODE] === at.DECLUTCHED;
    end(at.DECLUTCHED, cause);
    s[at.HOLD_UNTIL] = s[at.TICK] + Math.max(1, ticksOf(time));
    if (open) return;
    s[at.NEXT_GEAR] = s[at.GEAR];
    engageGear(machine, -1);
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
        override(does.throttle, does.for, by('rider'));
        return;
      case 'cancel':
        if (!isOff()) end(does.then === 'coasts' ? at.COASTING : at.BY_HAND, by('rider'));
        return;
      case 'brake':
        end(at.BY_HAND, by('brake'));
        s[at.HAND_SPEED] = Math.min(does.to, s[at.SPEED]);
        s[at.HAND_RATE] = does.deceleration;
        return;
      case 'ride':
        end(at.BY_HAND, by('rider'));
        s[at.HAND_SPEED] = does.to;
        s[at.HAND_RATE] = -does.acceleration;
        return;
      case 'clutch':
        pullClutch(does.for, by('clutch'));
        return;
    }
  };

  const act = (shifting: boolean): void => {
    takeFaults();
    if (shifting && !isOff()) s[at.HOLD_MODE] = at.ENGAGED;
    if (shifting) return;
    letGo();
    while (s[at.HOLD_TAKES] === 0 && s[at.HOLD_ACTS] < acts.length) {
      const next = acts[s[at.HOLD_ACTS]]!;
      if (!due(next, actPlaces[s[at.HOLD_ACTS]]!)) break;
      s[at.HOLD_ACTS] += 1;
      perform(next);
    }
    const resumes = s[at.HOLD_RESUMES];
    if (resumes > 0 && s[at.TICK] >= resumes && !refuses()) takeOver(at.RESUMES, 'rider');
  };
  const waits = (shifting: boolean): boolean => shifting || s[at.HOLD_TAKES] !== 0;
  const ticksLeft = (shifting: boolean): number => {
    const now = s[at.TICK];
    let left = Number.POSITIVE_INFINITY;
    const until = (tick: number): void => {
      left = Math.min(left, Math.max(1, tick - now));
    };
    if (s[at.HOLD_TAKES] !== 0) until(now + 1);
    if (s[at.FAULT] !== 0) until(s[at.FAULT_UNTIL]);
    if (s[at.FAULTS_BEGUN] < faults.length) until(now + ticksTo(faults[s[at.FAULTS_BEGUN]]!));
    if (shifting) return left;
    if (s[at.HOLD_MODE] === at.OVERRIDDEN || s[at.HOLD_MODE] === at.DECLUTCHED) until(s[at.HOLD_UNTIL]);
    if (s[at.HOLD_RESUMES] > 0) until(s[at.HOLD_RESUMES]);
    if (!waits(shifting) && s[at.HOLD_ACTS] < acts.length) until(now + ticksTo(acts[s[at.HOLD_ACTS]]!));
    return left;
  };
  const nextPlace = (shifting: boolean): number => {
    const act = waits(shifting) ? undefined : actPlaces[s[at.HOLD_ACTS]];
    return Math.min(
      act ?? Number.POSITIVE_INFINITY,
      faultPlaces[s[at.FAULTS_BEGUN]] ?? Number.POSITIVE_INFINITY,
    );
  };
  return {
    takeFound,
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

/** Puts the servo beside the grip where it holds a throttle: 1, pulling at it; -1, all of its slack before it. */
function servoAt({ s, p }: Machine): (throttle: number, side: number) => void {
  return (throttle, side) => {
    s[at.ACTUATOR] = throttle + side * p[at.P_PLAY];
    s[at.PLATE] = throttle;
  };
}
