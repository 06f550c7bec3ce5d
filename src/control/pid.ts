import type { Vehicle } from '../vehicle/vehicle.ts';
import { BITE_DEAD_BAND, BITE_INTEGRAL_CAP, BITE_SIGN_TEST } from './bites.ts';
import {
  BUS_COMMAND,
  BUS_FEEDFORWARD,
  BUS_INTEGRAL,
  BUS_LIMITED,
  BUS_MEASURED,
  BUS_PROPORTIONAL,
  BUS_REFERENCE,
} from './bus.ts';
import type { Controller } from './controller.ts';
import {
  INTEGRAL,
  LAST_FEEDFORWARD,
  LAST_KD,
  LAST_KP,
  LAST_SHAPE,
  LAST_SLIP,
  OBSERVED_FORCE,
  OBSERVED_THROTTLE,
} from './memory.ts';
import {
  pidParts,
  W_ERROR,
  W_KD,
  W_KI,
  W_KP,
  W_LEAST,
  W_MOST,
  W_REST,
  W_SHAPE,
  W_SLIP,
} from './pid-parts.ts';
import type { IntegralRule, PidSetup } from './setup.ts';

/**
 * The PID family (see PidSetup, pid-parts.ts) over a range of the command.
 *
 * Bumpless: the integral, in throttle, takes over what a change of gains would have made of the parts P and D of the
 * sample before, so that positional and velocity form are the same controller while no limit is reached.
 */
export function pidController(setup: PidSetup, low: number, high: number, vehicle: Vehicle): Controller {
  const { sample, computingDelay, ramp } = setup;
  const timing = { sample, computingDelay, ramp };
  return setup.form.kind === 'velocity'
    ? { ...timing, ...velocityForm(setup, low, high, vehicle) }
    : { ...timing, ...positionalForm(setup, setup.form.antiWindup, low, high, vehicle) };
}

type Law = Pick<Controller, 'engage' | 'integralAt' | 'step'>;

/** An observer sums up too; what a schedule makes of the integral hangs on the gains of the sample before. */
const OBSERVED = [OBSERVED_FORCE, OBSERVED_THROTTLE];
const LAST_GAINS = [LAST_KP, LAST_KD, LAST_SHAPE, LAST_SLIP];

/** True where the dead band does not keep the integral still, though it should. */
const runsInside = ({ deadBand, ki }: PidSetup): number =>
  deadBand?.integratesInside === true && ki > 0 ? deadBand.halfWidth : 0;

/** Counts a sample in which the integral runs on inside the dead band. */
function countInside(bus: Float64Array, halfWidth: number): void {
  const error = bus[BUS_REFERENCE] - bus[BUS_MEASURED];
  if (error !== 0 && error < halfWidth && error > -halfWidth) bus[BITE_DEAD_BAND] += 1;
}

/**
 * u = P + D + I + feedforward. The integral at a limit, with `next` its value for the next sample (`forward`) or for
 * this one (`backward`):
 *
 *     none, conditional, back_calculation            as in pi.ts
 *     sign_test  next = I where u is at a limit and u e >= 0
 *     clamping   next within [low - (u - I), high - (u - I)]
 *     cap        next within [-cap, cap], of `summed_error` within ki times that
 */
function positionalForm(
  setup: PidSetup,
  rule: IntegralRule,
  low: number,
  high: number,
  vehicle: Vehicle,
): Law {
  const parts = pidParts(setup, low, high, vehicle);
  const { work } = parts;
  const backward = setup.integration === 'backward';
  const conditional = rule.kind === 'conditional';
  const bySign = rule.kind === 'sign_test';
  const clamped = rule.kind === 'clamping';
  const capped = rule.kind === 'cap';
  const summed = rule.kind === 'cap' && rule.of === 'summed_error';
  const scheduled = setup.schedule !== null;
  const inside = runsInside(setup) > 0;
  const constants = Float64Array.of(
    low,
    high,
    rule.kind === 'back_calculation' ? setup.sample / rule.trackingTime : 0,
    rule.kind === 'cap' ? rule.cap : 0,
    1 / setup.sample,
    runsInside(setup),
  );

  const step = (bus: Float64Array): void => {
    parts.begin(bus);
    const least = work[W_LEAST];
    const most = work[W_MOST];
    const rest = work[W_REST];
    const error = work[W_ERROR];
    let integral = bus[INTEGRAL];
    if (scheduled)
      integral +=
        (bus[LAST_KP] - work[W_KP]) * bus[LAST_SHAPE] - (bus[LAST_KD] - work[W_KD]) * bus[LAST_SLIP];
    let next = integral + work[W_KI] * error;
    if (conditional || bySign) {
      const trial = rest + (backward ? next : integral);
      const outwards = (trial >= most && error > 0) || (trial <= least && error < 0);
      if (conditional) {
        if (outwards) next = integral;
      } else if (trial >= most || trial <= least) {
        const stops = error !== 0 && trial * error >= 0;
        if (stops !== outwards && work[W_KI] !== 0) bus[BITE_SIGN_TEST] += 1;
        if (stops) next = integral;
      }
    } else if (clamped) {
      if (next > constants[1] - rest) next = constants[1] - rest;
      if (next < constants[0] - rest) next = constants[0] - rest;
    } else if (capped) {
      const cap = summed ? constants[3] * work[W_KI] * constants[4] : constants[3];
      const free = next;
      if (next > cap) next = cap;
      if (next < -cap) next = -cap;
      if (summed && next !== free) bus[BITE_INTEGRAL_CAP] += 1;
    }
    if (inside) countInside(bus, constants[5]);
    if (backward) integral = next;
    const command = rest + integral;
    let limited = command;
    if (command > most) limited = most;
    if (command < least) limited = least;
    bus[INTEGRAL] = next + constants[2] * (limited - command);
    bus[BUS_INTEGRAL] = integral;
    bus[BUS_COMMAND] = command;
    bus[BUS_LIMITED] = limited;
    if (scheduled) parts.keep(bus);
  };
  const engage = (bus: Float64Array): void => {
    parts.engage(bus);
    bus[INTEGRAL] = bus[BUS_LIMITED] - work[W_REST];
  };
  const integralAt = [INTEGRAL, ...(scheduled ? LAST_GAINS : []), ...OBSERVED];
  return { integralAt, engage, step };
}

/**
 * u = sat(u of the sample before + du): no integral is remembered, so that none winds up, and a rate limit is met from
 * where the command really is. BUS_INTEGRAL is what the other parts leave of the command.
 */
function velocityForm(setup: PidSetup, low: number, high: number, vehicle: Vehicle): Law {
  const parts = pidParts(setup, low, high, vehicle);
  const { work } = parts;
  const backward = setup.integration === 'backward';
  const inside = runsInside(setup) > 0;
  const constants = Float64Array.of(runsInside(setup));

  const step = (bus: Float64Array): void => {
    parts.begin(bus);
    const added = bus[BUS_FEEDFORWARD];
    const increment = work[W_KI] * work[W_ERROR];
    const command =
      bus[BUS_LIMITED] +
      (work[W_KP] * (work[W_SHAPE] - bus[LAST_SHAPE]) - work[W_KD] * (work[W_SLIP] - bus[LAST_SLIP])) +
      (backward ? increment : bus[INTEGRAL]) +
      (added - bus[LAST_FEEDFORWARD]);
    let limited = command;
    if (command > work[W_MOST]) limited = work[W_MOST];
    if (command < work[W_LEAST]) limited = work[W_LEAST];
    if (inside) countInside(bus, constants[0]);
    bus[INTEGRAL] = increment;
    bus[LAST_FEEDFORWARD] = added;
    bus[BUS_INTEGRAL] = command - bus[BUS_PROPORTIONAL] - added;
    bus[BUS_COMMAND] = command;
    bus[BUS_LIMITED] = limited;
    parts.keep(bus);
  };
  const engage = (bus: Float64Array): void => {
    parts.engage(bus);
    bus[INTEGRAL] = 0;
    bus[LAST_FEEDFORWARD] = bus[BUS_FEEDFORWARD];
  };
  // The command of the sample before is its integral, with what has been added to it since.
  const integralAt = [BUS_LIMITED, INTEGRAL, LAST_FEEDFORWARD, ...LAST_GAINS, ...OBSERVED];
  return { integralAt, engage, step };
}
