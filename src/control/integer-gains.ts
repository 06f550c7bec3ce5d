import type { IntegerSetup } from './setup.ts';

/** Gains of a controller in whole numbers. */
export interface IntegerGains {
  /** Counts in the code, rounded to nearest. */
  readonly kp: number;
  readonly ki: number;
  /** What they amount to [1/(m/s)], [1/(m/s)/s]. */
  readonly kpInForce: number;
  readonly kiInForce: number;
}

/**
 * Counts of the gains: Kp = kp (throttle counts / speed counts) divisor; Ki = ki Ts times the same, and times the
 * fineness of the integral where increments are summed.
 */
export function integerGains(setup: IntegerSetup): IntegerGains {
  const { throttleScale, speedScale, gainDivisor, integralDivisor, sample } = setup;
  const perGain = (throttleScale / speedScale) * gainDivisor;
  const perIntegralGain = perGain * sample * (setup.integralOf === 'increments' ? integralDivisor : 1);
  const kp = Math.floor(setup.kp * perGain + 0.5);
  const ki = Math.floor(setup.ki * perIntegralGain + 0.5);
  return { kp, ki, kpInForce: kp / perGain, kiInForce: ki / perIntegralGain };
}
