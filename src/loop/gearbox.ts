import {
  BUS_COMMAND,
  BUS_FEEDFORWARD,
  BUS_INTEGRAL,
  BUS_LIMITED,
  BUS_MEASURED,
  BUS_PROPORTIONAL,
  BUS_REFERENCE,
  BUS_REFERENCE_STEP,
  BUS_TARGET,
} from '../control/bus.ts';
import type { Controller } from '../control/controller.ts';
import { setTarget } from '../control/set-point.ts';
import { engageGear, gearInHand } from './engage-gear.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { distanceAt, stationAt } from './places.ts';
import type { LoopPlan } from './plan.ts';
import type { ShiftEvent } from './result.ts';
import { gearDue } from './shift-due.ts';
import { closedThrottle, throttleInHand } from './throttle-in-hand.ts';

/** Rate at which the reference comes back to the set speed, where nobody has written one [m/s2]. */
export const RESUME_RAMP = 0.5;

/** Parts of a shift, s[SHIFT_PART]: above 0 hold is off or the drive without torque; below 0 an automatic gearbox rests. */
const RESTS = -1;
const NONE = 0;
const CLUTCH_OPEN = 1;
const RIDERS_THROTTLE = 2;

/** The gears of a run under way: what happens to them between two chunks of the kernel. */
export interface Gearbox {
  /** Begins, carries on and ends the shifts that are due at the sample that starts now. */
  readonly shift: () => void;
  /** True while the rider shifts: the controller is not stepped. */
  readonly holdIsOff: () => boolean;
  /** Samples until the next part of a shift; Infinity: none is under way. */
  readonly ticksLeft: () => number;
  /** Station from which on no sample may start before `shift` has been called [m] or [s]. */
  readonly nextPlace: () => number;
  /** Shifts that have begun in this journey. */
  readonly shifts: readonly ShiftEvent[];
}

/**
 * Shifts of a journey that begins at the machine's present state.
 *
 * Automatic: where the lines ask for another gear the clutch opens for `gap`, hold goes on; then the new gear is engaged
 * and kept for `dwell`, counted from where the shift began (and one sample at the least).
 *
 * Clutch: at the place of a planned shift hold is cancelled, the clutch opened and the command 0 for `open`. Then the
 * new gear is engaged with the throttle that holds the speed there, for `resume`; then hold resumes without a bump, the
 * reference from the measured speed to the set speed, at the rate of a change that is still under way, or else at the
 * controller's ramp or at 0.5 m/s2. The rider's brake goes by no more than the reference before. A shift whose place is
 * passed while another is under way follows it.
 *
 * Planned shifts that lie at or before the start of a run are taken as made. Where a plan with fixed gears or a clutch has
 * another gear in force than the machine (a replay with another plan), it is engaged now.
 *
 * Hold that is off stays off through a shift.
 *
 * @param lock locks a locked throttle again, for the gear in hand
 * @param told is told what a shift does to hold
 */
export function gearbox(
  machine: Machine,
  plan: LoopPlan,
  lock: () => void,
  told: (kind: 'ended' | 'resumed') => void,
): Gearbox {
  const { s, p } = machine;
  const box = plan.vehicle.drive.gearbox;
  const sample = p[at.P_SAMPLE];
  const planned = box.kind === 'clutch' ? plan.rider.shifts : [];
  const places = planned.map(({ distance }) => stationAt(plan.road, distance));
  const events: ShiftEvent[] = [];
  const ticksOf = (time: number): number => Math.ceil(time / sample - 1e-9);

  const enter = (part: number, ticks: number): void => {
    s[at.SHIFT_PART] = part;
    s[at.SHIFT_UNTIL] = s[at.TICK] + ticks;
  };
  const openClutch = (to: number, ticks: number, resumeTicks: number | null): void => {
    const now = s[at.TICK];
    events.push({
      time: now * sample,
      distance: distanceAt(plan.road, s[at.STATION]),
      from: s[at.GEAR],
      to,
      resumedAt: resumeTicks === null ? null : (now + ticks + resumeTicks) * sample,
    });
    s[at.NEXT_GEAR] = to;
    engageGear(machine, -1);
    enter(CLUTCH_OPEN, ticks);
  };

  const shiftAutomatic = (open: number, dwell: number): void => {
    if (s[at.SHIFT_PART] === CLUTCH_OPEN && ended(s)) {
      engageGear(machine, s[at.NEXT_GEAR]);
      enter(RESTS, Math.max(1, dwell - open));
    }
    if (s[at.SHIFT_PART] === RESTS && ended(s)) s[at.SHIFT_PART] = NONE;
    if (s[at.SHIFT_PART] !== NONE) return;
    const to = gearDue(machine);
    if (to === s[at.GEAR]) return;
    openClutch(to, open, null);
    if (open === 0) shiftAutomatic(open, dwell);
  };

  const shiftByClutch = (open: number, resume: number): void => {
    if (s[at.SHIFT_PART] === CLUTCH_OPEN && ended(s)) {
      engageGear(machine, s[at.NEXT_GEAR]);
      s[BUS_LIMITED] = throttleInHand(machine, plan, 0);
      enter(RIDERS_THROTTLE, resume);
    }
    if (s[at.SHIFT_PART] === RIDERS_THROTTLE && ended(s)) {
      s[at.SHIFT_PART] = NONE;
      if (holdIsOn(s)) {
        told('resumed');
        resumeReference(s, machine.controller.ramp ?? RESUME_RAMP, sample);
        machine.controller.engage(s);
        lock();
      }
    }
    const next = s[at.SHIFTS];
    if (s[at.SHIFT_PART] !== NONE || next >= planned.length || s[at.STATION] < places[next]!) return;
    s[at.SHIFTS] = next + 1;
    if (planned[next]!.gear !== s[at.GEAR]) {
      if (holdIsOn(s)) told('ended');
      openClutch(planned[next]!.gear, open, resume);
      s[BUS_LIMITED] = closedThrottle(p);
    }
    shiftByClutch(open, resume);
  };

  if (box.kind !== 'automatic') takePlan(machine, plan, places);
  const shift =
    box.kind === 'automatic'
      ? () => shiftAutomatic(ticksOf(box.gap), ticksOf(box.dwell))
      : box.kind === 'clutch'
        ? () => shiftByClutch(ticksOf(box.open), ticksOf(box.resume))
        : () => undefined;
  return {
    shift,
    holdIsOff: () => box.kind === 'clutch' && s[at.SHIFT_PART] > NONE,
    ticksLeft: () =>
      s[at.SHIFT_PART] === NONE ? Number.POSITIVE_INFINITY : Math.max(0, s[at.SHIFT_UNTIL] - s[at.TICK]),
    nextPlace: () =>
      s[at.SHIFT_PART] === NONE && s[at.SHIFTS] < places.length
        ? places[s[at.SHIFTS]]!
        : Number.POSITIVE_INFINITY,
    shifts: events,
  };
}

/** Where hold is off: the command stays where the rider has it. */
export function restingController(controller: Controller): Controller {
  return {
    ...controller,
    step: (bus) => {
      const command = bus[BUS_LIMITED];
      bus[BUS_PROPORTIONAL] = 0;
      bus[BUS_INTEGRAL] = 0;
      bus[BUS_FEEDFORWARD] = command;
      bus[BUS_COMMAND] = command;
    },
  };
}

/** Gear of a plan without an automatic gearbox at a place, where every shift up to there has been made. */
export function gearInForce(plan: LoopPlan, distance: number): number {
  const { drive } = plan.vehicle;
  if (drive.gearbox.kind !== 'clutch') return drive.gear;
  return plan.rider.shifts.findLast((shift) => shift.distance <= distance)?.gear ?? drive.gear;
}

function holdIsOn(s: Float64Array): boolean {
  return s[at.HOLD_MODE] < at.BY_HAND;
}

function ended(s: Float64Array): boolean {
  return s[at.TICK] >= s[at.SHIFT_UNTIL];
}

/** The reference starts at the measured speed again; what the rider brakes for does not rise with it. */
function resumeReference(s: Float64Array, ramp: number, sample: number): void {
  const target = s[BUS_TARGET];
  const before = s[BUS_REFERENCE];
  const changes = before !== target && Number.isFinite(s[BUS_REFERENCE_STEP]);
  s[at.BRAKE_REFERENCE] = Math.max(Math.min(before, s[at.BRAKE_REFERENCE]), target);
  s[BUS_REFERENCE] = s[BUS_MEASURED];
  if (!changes) setTarget(s, target, ramp, sample);
}

/** Counts the planned shifts that have been made, and engages the gear in force where the machine has another. */
function takePlan(machine: Machine, plan: LoopPlan, places: readonly number[]): void {
  const { s } = machine;
  const { drive } = plan.vehicle;
  const { shifts } = plan.rider;
  const after = (made: number): number => (made === 0 ? drive.gear : shifts[made - 1]!.gear);
  const passed = places.filter((place) => place <= s[at.STATION]).length;
  const made = s[at.SHIFTS];
  const known = made <= passed && after(made) === gearInHand(s);
  if (s[at.TICK] > 0 && known && s[at.SHIFT_PART] !== RESTS) return;
  s[at.SHIFTS] = passed;
  s[at.SHIFT_PART] = NONE;
  const gear = after(passed);
  if (gear === s[at.GEAR]) return;
  engageGear(machine, gear);
  s[at.LOCK_GEAR] = gear;
}
