import { BUS_LIMITED, BUS_MEASURED, BUS_TARGET } from '../control/bus.ts';
import { RULES } from '../control/hold-rules.ts';
import { setTarget } from '../control/set-point.ts';
import { engageGear } from './engage-gear.ts';
import { RESUME_RAMP } from './gearbox.ts';
import type { HoldLog } from './hold-log.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { LoopPlan } from './plan.ts';
import type { HoldEventCause } from './result.ts';
import { ticksOf } from './route-schedule.ts';
import { lockThrottle, markLock } from './settle.ts';
import { closedThrottle } from './throttle-in-hand.ts';

/** Ways from one mode of hold to another (see HOLD_MODE), with their events. */
export interface HoldModes {
  readonly isOff: () => boolean;
  /** Hold takes over in the next step: the event is told once that has been done. */
  readonly takeOver: (takes: number, cause: HoldEventCause) => void;
  /** Hold ends, and the rider goes on in a mode at the speed of the moment; with hold off already there is no event. A pulled clutch stays pulled. */
  readonly end: (mode: number, cause: HoldEventCause) => void;
  readonly beginOverride: (throttle: number, time: number, cause: HoldEventCause) => void;
  /** Lets the grip go at once, and the controller have all of it. */
  readonly endOverride: (cause: HoldEventCause) => void;
  readonly pullClutch: (time: number, cause: HoldEventCause) => void;
  /** Lets grip or clutch go where their time has passed. */
  readonly letGo: () => void;
  /** Takes what the controller's step of the sample before has found. */
  readonly takeFound: () => void;
}

/** The modes of the hold over a machine's state. */
export function holdModes(machine: Machine, plan: LoopPlan, log: HoldLog): HoldModes {
  const { s, p } = machine;
  const { supervisor } = plan;
  const resumeRamp =
    supervisor === undefined ? (machine.controller.ramp ?? RESUME_RAMP) : supervisor.resumeRamp;
  const resumesAfter = plan.rider.resumesAfter ?? null;
  const locked = plan.controller.kind === 'locked';
  const servo = plan.vehicle.actuator.engagesFrom === 'rest';
  const isOff = (): boolean => s[at.HOLD_MODE] >= at.BY_HAND;
  const from = (time: number): number => s[at.TICK] + Math.max(1, ticksOf(machine, time));

  /** Puts the servo beside the grip where it holds a throttle: pulling at it (1), or all of its slack before it (-1). */
  const setServo = (throttle: number, side: number): void => {
    if (!servo) return;
    s[at.ACTUATOR] = throttle + side * p[at.P_PLAY];
    s[at.PLATE] = throttle;
  };
  const takeOver: HoldModes['takeOver'] = (takes, cause) => {
    if (isOff()) setServo(closedThrottle(p), -1);
    // A locked throttle is locked now, for the speed that was measured last; a controller engages at that of its next step.
    const target = locked && takes === at.ENGAGES ? s[BUS_MEASURED] : s[BUS_TARGET];
    s[at.HOLD_MODE] = at.ENGAGED;
    s[at.HOLD_TAKES] = locked ? at.RESUMES : takes;
    s[at.HOLD_RESUMES] = 0;
    s[at.BRAKE_REFERENCE] = Number.POSITIVE_INFINITY;
    setTarget(s, target, takes === at.RESUMES ? resumeRamp : null, p[at.P_SAMPLE]);
    if (locked) {
      markLock(machine, plan);
      lockThrottle(machine, plan, target);
    }
    log.open(takes === at.ENGAGES ? 'engaged' : 'resumed', cause);
  };
  const end: HoldModes['end'] = (mode, cause) => {
    if (!isOff()) log.note('ended', cause);
    if (s[at.HOLD_MODE] !== at.DECLUTCHED) s[at.HOLD_MODE] = mode;
    s[at.HOLD_RESUMES] = 0;
    s[at.HAND_SPEED] = s[at.SPEED];
    s[at.HAND_RATE] = 0;
  };

  const letGripGo = (mode: number, cause: HoldEventCause): void => {
    if (s[at.HOLD_MODE] === at.OVERRIDDEN) {
      log.note('override_ended', cause);
      setServo(s[at.OWN_COMMAND], 1);
    }
    s[at.HOLD_MODE] = mode;
  };
  const endOverride: HoldModes['endOverride'] = (cause) => letGripGo(at.ENGAGED, cause);
  const beginOverride: HoldModes['beginOverride'] = (throttle, time, cause) => {
    if (s[at.HOLD_MODE] === at.ENGAGED) s[at.OWN_COMMAND] = s[BUS_LIMITED];
    endOverride(cause);
    log.note('override_began', cause);
    s[at.HOLD_MODE] = at.OVERRIDDEN;
    s[at.HOLD_UNTIL] = from(time);
    s[at.GRIP] = Math.min(throttle, p[at.P_GREATEST]);
  };

  const pullClutch: HoldModes['pullClutch'] = (time, cause) => {
    const pulled = s[at.HOLD_MODE] === at.DECLUTCHED;
    end(at.DECLUTCHED, cause);
    s[at.HOLD_UNTIL] = from(time);
    if (pulled) return;
    s[at.NEXT_GEAR] = s[at.GEAR];
    engageGear(machine, -1);
  };
  const letClutchGo = (): void => {
    engageGear(machine, s[at.NEXT_GEAR]);
    s[at.HOLD_MODE] = at.BY_HAND;
    if (s[at.HAND_RATE] === 0) s[at.HAND_SPEED] = s[at.SPEED];
  };

  const letGo = (): void => {
    if (s[at.TICK] < s[at.HOLD_UNTIL]) return;
    if (s[at.HOLD_MODE] === at.OVERRIDDEN) letGripGo(at.RE_ENTERING, 'rider');
    else if (s[at.HOLD_MODE] === at.DECLUTCHED) letClutchGo();
  };
  const takeFound = (): void => {
    const found = s[at.HOLD_FOUND];
    if (found === 0) return;
    s[at.HOLD_FOUND] = 0;
    if (found === at.RE_ENTERS) {
      log.note('reentered', 'rider');
      s[at.HOLD_MODE] = at.ENGAGED;
      s[BUS_LIMITED] = s[at.OWN_COMMAND];
    } else {
      end(at.BY_HAND, RULES[found - 1]!);
      if (resumesAfter !== null) s[at.HOLD_RESUMES] = from(resumesAfter);
    }
  };
  return { isOff, takeOver, end, beginOverride, endOverride, pullClutch, letGo, takeFound };
}
