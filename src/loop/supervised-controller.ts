import {
  BUS_COMMAND,
  BUS_LIMITED,
  BUS_MEASURED,
  BUS_REFERENCE,
  BUS_REFERENCE_STEP,
  BUS_TARGET,
} from '../control/bus.ts';
import type { Controller } from '../control/controller.ts';
import type { HoldRules } from '../control/hold-rules.ts';
import type { OverrideRule } from '../control/supervisor-setup.ts';
import * as at from './layout.ts';

/**
 * A controller in a unit with rules, while hold is on. In one step:
 *
 *   takes over   where it is told to (HOLD_TAKES), with the measurement of this very sample, so that the command is the
 *                rider's throttle to rounding: the reference begins at the measured speed, or, where it steps, at the
 *                set speed
 *   rules        one that is broken is kept in HOLD_FOUND, and the command stands: the sample is the last with hold on
 *   override     the controller goes on from its own command, which the grip is no part of; the actuator gets the
 *                greater of the two. Under `held` the integral stands while the grip has the throttle, and from where it
 *                is let go until the measured speed is no more than `reentry` above the reference. A speed below that
 *                counts as back: a hill that it lost speed on could keep the integral for ever.
 *
 * @param rules null: none
 */
export function supervisedController(
  inner: Controller,
  rules: HoldRules | null,
  override: OverrideRule,
): Controller {
  const { integralAt } = inner;
  const kept = new Float64Array(integralAt.length);
  const holds = override.integral === 'held';
  const { reentry } = override;

  const takeOver = (bus: Float64Array): void => {
    const steps = bus[BUS_REFERENCE_STEP] === Number.POSITIVE_INFINITY;
    if (bus[at.HOLD_TAKES] === at.ENGAGES) bus[BUS_TARGET] = bus[BUS_MEASURED];
    bus[BUS_REFERENCE] = steps ? bus[BUS_TARGET] : bus[BUS_MEASURED];
    bus[at.HOLD_TAKES] = 0;
    rules?.begin(bus);
    inner.engage(bus);
  };
  const stepOverridden = (bus: Float64Array): void => {
    bus[BUS_LIMITED] = bus[at.OWN_COMMAND];
    for (let i = 0; i < integralAt.length; i++) kept[i] = bus[integralAt[i]!];
    inner.step(bus);
    const own = bus[BUS_LIMITED];
    const returns = bus[at.HOLD_MODE] === at.RE_ENTERING;
    const gripped = !returns && bus[at.GRIP] > own;
    if (holds && (gripped || returns))
      for (let i = 0; i < integralAt.length; i++) bus[integralAt[i]!] = kept[i]!;
    bus[at.OWN_COMMAND] = bus[BUS_LIMITED];
    bus[BUS_LIMITED] = gripped ? bus[at.GRIP] : own;
    if (gripped && bus[BUS_COMMAND] < bus[at.GRIP]) bus[BUS_COMMAND] = bus[at.GRIP];
    if (returns && bus[BUS_MEASURED] - bus[BUS_REFERENCE] <= reentry) bus[at.HOLD_FOUND] = at.RE_ENTERS;
  };
  const step = (bus: Float64Array): void => {
    if (bus[at.HOLD_TAKES] !== 0) takeOver(bus);
    else if (rules !== null) {
      const broken = rules.broken(bus, bus[at.HOLD_MODE] !== at.ENGAGED);
      if (broken > 0) {
        bus[at.HOLD_FOUND] = broken;
        return;
      }
    }
    if (bus[at.HOLD_MODE] === at.ENGAGED) inner.step(bus);
    else stepOverridden(bus);
  };
  return { ...inner, step };
}
