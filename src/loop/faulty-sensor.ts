import { BUS_MEASURED } from '../control/bus.ts';
import type { Controller } from '../control/controller.ts';
import * as at from './layout.ts';
import type { SensorFault } from './plan.ts';

/** Kinds of a fault; s[FAULT] is 1 + the place in it. */
export const FAULTS: readonly SensorFault['shows'][] = ['nothing', 'last_value', 'double'];

/** A controller, of any kind, to which a sensor with faults tells the speed. */
export function withFaultySensor(inner: Controller): Controller {
  const step = (bus: Float64Array): void => {
    const fault = bus[at.FAULT];
    if (fault === 1) bus[BUS_MEASURED] = 0;
    else if (fault === 2) bus[BUS_MEASURED] = bus[at.FAULT_VALUE];
    else if (fault === 3) bus[BUS_MEASURED] *= 2;
    inner.step(bus);
  };
  return { ...inner, step };
}
