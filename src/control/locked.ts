import {
  BUS_COMMAND,
  BUS_FEEDFORWARD,
  BUS_INTEGRAL,
  BUS_LIMITED,
  BUS_LOCK,
  BUS_PROPORTIONAL,
} from './bus.ts';
import type { Controller } from './controller.ts';

/** A throttle held where it is locked (BUS_LOCK), within [low, high]. It looks at nothing. */
export function lockedController(low: number, high: number): Controller {
  return {
    sample: null,
    computingDelay: 0,
    ramp: null,
    integralAt: [],
    engage: () => undefined,
    step: (bus) => {
      const command = bus[BUS_LOCK];
      bus[BUS_PROPORTIONAL] = 0;
      bus[BUS_INTEGRAL] = 0;
      bus[BUS_FEEDFORWARD] = command;
      bus[BUS_COMMAND] = command;
      bus[BUS_LIMITED] = command > high ? high : Math.max(command, low);
    },
  };
}
