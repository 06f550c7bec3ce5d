import {
  BUS_COMMAND,
  BUS_FEEDFORWARD,
  BUS_INTEGRAL,
  BUS_LIMITED,
  BUS_MEASURED,
  BUS_MEMORY,
  BUS_PROPORTIONAL,
  BUS_REFERENCE,
} from './bus.ts';
import type { Controller } from './controller.ts';
import type { PiSetup } from './setup.ts';

/**
 * The sampled PI controller, as firmware runs it. With e = r - y at sample k and sat() the limit to [low, high]:
 *
 *   forward:   u = kp (b r - y) + I, then I += ki Ts e
 *   backward:  I += ki Ts e, then u = kp (b r - y) + I
 *
 * Anti-windup: `conditional` leaves the integral where it was while u is at or past a limit and e pushes further out
 * (under `backward` the increment is tried and, where the limit is reached, taken back before u is formed);
 * `back_calculation` adds (Ts / Tt) (sat(u) - u) to I after u has been issued.
 * Astrom and Hagglund, Advanced PID Control (2006), chapter 3 (chapter number from memory).
 *
 * BUS_INTEGRAL is the integral that is in u; the integral for the next sample is carried in BUS_MEMORY.
 */
export function piController(setup: PiSetup, low: number, high: number): Controller {
  const { antiWindup } = setup;
  const backward = setup.integration === 'backward';
  const conditional = antiWindup.kind === 'conditional';
  const tracking = antiWindup.kind === 'back_calculation' ? setup.sample / antiWindup.trackingTime : 0;
  // In a typed array, because numbers that a closure holds are boxed and checked at every sample.
  const constants = Float64Array.of(
    setup.kp,
    setup.setpointWeight,
    setup.ki * setup.sample,
    tracking,
    low,
    high,
  );

  const step = (bus: Float64Array): void => {
    const reference = bus[BUS_REFERENCE];
    const measured = bus[BUS_MEASURED];
    const least = constants[4];
    const most = constants[5];
    const error = reference - measured;
    const proportional = constants[0] * (constants[1] * reference - measured);
    let integral = bus[BUS_MEMORY];
    let next = integral + constants[2] * error;
    if (conditional) {
      const trial = proportional + (backward ? next : integral);
      if ((trial >= most && error > 0) || (trial <= least && error < 0)) next = integral;
    }
    if (backward) integral = next;
    const command = proportional + integral;
    let limited = command;
    if (command > most) limited = most;
    if (command < least) limited = least;
    bus[BUS_MEMORY] = next + constants[3] * (limited - command);
    bus[BUS_PROPORTIONAL] = proportional;
    bus[BUS_INTEGRAL] = integral;
    bus[BUS_FEEDFORWARD] = 0;
    bus[BUS_COMMAND] = command;
    bus[BUS_LIMITED] = limited;
  };
  const engage = (bus: Float64Array): void => {
    const proportional = setup.kp * (setup.setpointWeight * bus[BUS_REFERENCE] - bus[BUS_MEASURED]);
    bus[BUS_MEMORY] = bus[BUS_LIMITED] - proportional;
  };
  const { computingDelay, ramp } = setup;
  return { sample: setup.sample, computingDelay, ramp, integralAt: [BUS_MEMORY], engage, step };
}
