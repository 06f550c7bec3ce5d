import { exp } from '../numeric/elementary.ts';
import { BUS_FEEDFORWARD, BUS_GEAR, BUS_LIMITED, BUS_MEASURED } from './bus.ts';
import type { ModelPart } from './feedforward.ts';
import { OBSERVED_FORCE, OBSERVED_MEASURED, OBSERVED_THROTTLE, SLOPE } from './memory.ts';
import type { VehicleModel } from './vehicle-model.ts';

/**
 * Disturbance observer: what the model cannot explain of the motion, in throttle, is taken back. With the filter
 * Q(z): x <- kept x + (1 - kept) input, kept = exp(-Ts / Tq), at sample k
 *
 *     f = Q[me (y(k) - y(k - 1)) / Ts + F(y) + m G]    force that the motion needs
 *     w = Q[u(k - 1)]                                  throttle that was given, limited
 *     added = w - T(f)                                 both are equal where the model holds
 *
 * K. Ohnishi's scheme of an inverse model behind a low-pass (from memory). G is the grade that the feedforward reckons
 * with already, 0 without one. Lags between throttle and motion are not in the model: Tq must be longer than they are.
 */
export function disturbanceObserver(
  filter: number,
  model: VehicleModel,
  sample: number,
  knowsGrade: boolean,
): ModelPart {
  const constants = Float64Array.of(exp(-sample / filter), 1 / sample, knowsGrade ? model.mass : 0);

  const { out, movedMass } = model;

  const step = (bus: Float64Array): void => {
    const gear = bus[BUS_GEAR];
    const measured = bus[BUS_MEASURED];
    const kept = constants[0];
    model.drag(measured);
    const pull = movedMass[gear | 0] * (measured - bus[OBSERVED_MEASURED]) * constants[1];
    const force = pull + out[0] + constants[2] * bus[SLOPE];
    const filtered = force + kept * (bus[OBSERVED_FORCE] - force);
    const given = bus[BUS_LIMITED];
    const throttle = given + kept * (bus[OBSERVED_THROTTLE] - given);
    bus[OBSERVED_MEASURED] = measured;
    bus[OBSERVED_FORCE] = filtered;
    bus[OBSERVED_THROTTLE] = throttle;
    model.throttle(gear, measured, filtered);
    bus[BUS_FEEDFORWARD] += throttle - out[0];
  };
  const engage = (bus: Float64Array): void => {
    const measured = bus[BUS_MEASURED];
    model.drag(measured);
    bus[OBSERVED_MEASURED] = measured;
    bus[OBSERVED_FORCE] = out[0] + constants[2] * bus[SLOPE];
    bus[OBSERVED_THROTTLE] = bus[BUS_LIMITED];
  };
  return { engage, step };
}
