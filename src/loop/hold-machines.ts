import type { Controller } from '../control/controller.ts';
import type { HoldRules } from '../control/hold-rules.ts';
import type { OverrideRule } from '../control/supervisor-setup.ts';
import { buildMachine } from './build-machine.ts';
import { loadSteps } from './lags.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { LoopPlan } from './plan.ts';
import { handController } from './ride-by-hand.ts';
import { withFaultySensor } from './sensor-faults.ts';
import { supervisedController } from './supervised-controller.ts';

/** A controller without a unit knows nothing of the grip. */
const NO_OVERRIDE_RULE: OverrideRule = { integral: 'runs', reentry: 0 };

/**
 * The machines of one state, by who has the throttle: the controller in its unit, the rider by hand, the rider who
 * shifts. Where a servo pulls at the throttle beside the grip, the grip moves it without that servo's lag, rate, steps
 * and slack, by hand and in an override.
 *
 * @param ridden the machine of a shift
 * @returns the machine for the mode that stands in the state; `shifting`: the rider is busy with a shift
 */
export function holdMachines(
  machine: Machine,
  ridden: Machine,
  plan: LoopPlan,
  rules: HoldRules | null,
): (shifting: boolean) => Machine {
  const { s, p } = machine;
  const besides = plan.vehicle.actuator.engagesFrom === 'rest';
  const sees = (of: Machine): Machine =>
    (plan.faults ?? []).length === 0 ? of : { ...of, controller: withFaultySensor(of.controller) };
  const supervised = supervisedController(
    machine.controller,
    rules,
    plan.supervisor?.override ?? NO_OVERRIDE_RULE,
  );
  const held = sees({ ...machine, controller: supervised });
  const shifted = sees(rules === null ? ridden : { ...ridden, controller: anew(ridden.controller, rules) });
  const byHand = sees({ ...underGrip(machine, plan), controller: handController(machine, plan) });
  const gripped = besides ? { ...underGrip(machine, plan), controller: held.controller } : held;

  // What a gear changes of the parameters, and what the brake is for, is brought up to date where a machine is taken.
  const taken = (of: Machine): Machine => {
    if (besides) loadSteps(of.p, of.lags, of.stepsInGear[1 + s[at.GEAR]]);
    else of.p.set(p);
    return of;
  };
  const takenByHand = (): Machine => {
    const { p: by } = taken(byHand);
    // By hand the speed to brake to says how hard.
    by[at.P_BRAKES_ABOVE] = 0;
    by[at.P_STRONGEST_BRAKE] = Number.POSITIVE_INFINITY;
    return byHand;
  };
  return (shifting) => {
    if (s[at.HOLD_MODE] >= at.BY_HAND) return takenByHand();
    if (shifting) return shifted;
    return besides && s[at.HOLD_MODE] === at.OVERRIDDEN ? taken(gripped) : held;
  };
}

/** While the rider shifts nothing is held to the rules, and what they remember is that of the last sample of the shift. */
function anew(inner: Controller, rules: HoldRules): Controller {
  const step = (bus: Float64Array): void => {
    rules.begin(bus);
    inner.step(bus);
  };
  return { ...inner, step };
}

/** Parameters and lags of the grip's own way to the throttle. */
function underGrip(machine: Machine, plan: LoopPlan): Machine {
  const { vehicle } = plan;
  const { actuator } = vehicle;
  if (actuator.engagesFrom !== 'rest') return { ...machine, p: machine.p.slice() };
  const direct = { ...actuator, resolution: 0, lag: 0, rateLimit: null, slack: 0 };
  const { p, lags } = buildMachine({ ...plan, vehicle: { ...vehicle, actuator: direct } });
  p[at.P_HOLD] = machine.p[at.P_HOLD];
  return { ...machine, p, lags };
}
