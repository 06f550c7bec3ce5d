import type { Actuator, SpeedSensor } from './vehicle.ts';

/** The throttle is the command. */
export const IDEAL_ACTUATOR: Actuator = {
  deadTime: 0,
  resolution: 0,
  travel: null,
  lag: 0,
  rateLimit: null,
  slack: 0,
};

/** The measured speed is the true speed. */
export const IDEAL_SENSOR: SpeedSensor = { pulses: null, scaleError: 0, noise: null, filter: 0, delay: 0 };
