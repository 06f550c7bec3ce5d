import {
  BUS_COMMAND,
  BUS_FEEDFORWARD,
  BUS_INTEGRAL,
  BUS_LIMITED,
  BUS_PROPORTIONAL,
  BUS_REFERENCE,
} from '../control/bus.ts';
import type { Controller } from '../control/controller.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { LoopPlan } from './plan.ts';
import { heldForDrop, WATCHFUL_BRAKE } from './rider-brake.ts';
import { closedThrottle, throttleInHand } from './throttle-in-hand.ts';

/** Time constant with which the hand brings the speed back to the one that the rider holds [s]. */
const HAND_TIME = 2;
/** Nearer to the speed that the rider brakes to than this, they have it [m/s]. */
const REACHED = 1e-9;

/**
 * What has the throttle while hold is off: an ideal rider, who knows road, wind and vehicle. With the speed vh that they
 * hold, they give the throttle of the acceleration
 *
 *     a = (vh - v) / 2 s           or, braking at b down to vh,           a = -b
 *
 * the first no more than b where they gain speed at b. They use the brake only where the throttle is closed and that is
 * not enough; with it, the speed falls by b Ts in every sample, and where no b is asked for by no more than
 * WATCHFUL_BRAKE Ts. Coasting, or with the clutch open, the throttle is closed. What the rider's hand cannot know are the lags of actuator and drive.
 *
 * The command stands as feedforward. BUS_REFERENCE is what the brake holds: Infinity where it is not used.
 *
 * @param machine that the step is called over: its bus is the whole state
 */
export function handController(machine: Machine, plan: LoopPlan): Controller {
  const { s, p, controller } = machine;
  const sample = p[at.P_SAMPLE];
  const perTrue = 1 / p[at.P_TO_TRUE];

  const step = (): void => {
    const v = s[at.SPEED];
    const mode = s[at.HOLD_MODE];
    let held = s[at.HAND_SPEED];
    let acceleration = (held - v) / HAND_TIME;
    if (s[at.HAND_RATE] > 0) {
      const drop = Math.min(s[at.HAND_RATE] * sample, v - held);
      if (drop > REACHED) {
        acceleration = -drop / sample;
        held = heldForDrop(v, drop, sample);
      } else s[at.HAND_RATE] = 0;
    } else {
      if (s[at.HAND_RATE] < 0) acceleration = Math.min(acceleration, -s[at.HAND_RATE]);
      if (held < v) held = Math.max(held, heldForDrop(v, WATCHFUL_BRAKE * sample, sample));
    }
    const closed = mode !== at.BY_HAND || s[at.GEAR] < 0;
    const throttle = closed ? closedThrottle(p) : throttleInHand(machine, plan, acceleration);
    const brakes = mode !== at.COASTING && (closed || throttle <= p[at.P_LEAST]);
    s[BUS_REFERENCE] = brakes ? held * perTrue : Number.POSITIVE_INFINITY;
    s[at.BRAKE_REFERENCE] = Number.POSITIVE_INFINITY;
    s[BUS_PROPORTIONAL] = 0;
    s[BUS_INTEGRAL] = 0;
    s[BUS_FEEDFORWARD] = throttle;
    s[BUS_COMMAND] = throttle;
    s[BUS_LIMITED] = throttle;
  };
  return { ...controller, step };
}
