import { gainsAt } from './gain-schedule.ts';
import type { Gains, LoopTiming } from './sampled-loop.ts';
import type { ControllerSetup } from './setup.ts';

/** A controller that is linear around the set speed: gains there, in a gear at a measured speed [m/s]. */
export interface LinearController extends LoopTiming {
  readonly gainsAt: (gear: number, speed: number) => Gains;
}

/**
 * What a controller is for small errors around the set speed, or why it is nothing linear. Limits of range and rate and
 * what they do to the integral do not count, nor does feedforward of what the error does not change. A schedule counts
 * by its gains at the place: what its slope over the speed multiplies is the error, which is small.
 */
export function linearController(setup: ControllerSetup): LinearController | { readonly none: string } {
  switch (setup.kind) {
    case 'locked':
      return { none: 'no feedback' };
    case 'pi':
      return {
        sample: setup.sample,
        computingDelay: setup.computingDelay,
        integration: setup.integration,
        gainsAt: () => setup,
      };
    case 'integer':
      return { none: 'whole numbers: what rounding does depends on the size of the error' };
    case 'pid': {
      if (setup.deadBand !== null) return { none: 'the dead band opens the loop for small errors' };
      if (setup.observerFilter !== null)
        return { none: 'the observer closes a loop of its own through its model of the vehicle' };
      if (setup.feedforward?.grade?.kind === 'accelerometer')
        return { none: 'the accelerometer closes a loop of its own' };
      const { schedule, derivativeFilter } = setup;
      const gears = 1 + Math.max(0, ...(schedule?.rows.map(({ gear }) => gear ?? 0) ?? []));
      return {
        sample: setup.sample,
        computingDelay: setup.computingDelay,
        integration: setup.integration,
        gainsAt: (gear, speed) => {
          const out = new Float64Array(3);
          gainsAt(setup, schedule, Math.max(gears, gear + 1))(gear, speed, out);
          return { kp: out[0], ki: out[1], kd: out[2], derivativeFilter };
        },
      };
    }
  }
}
