import type { Warning } from '../problems/warning.ts';
import type { Demand } from '../study/findings.ts';
import { toKmh, toPct } from '../units/convert.ts';
import type { SpeedSensor, Vehicle } from '../vehicle/vehicle.ts';
import type { CandidateResult } from './run-result.ts';

/** Travel of the throttle over the road beyond which it is never still: five times from end to end and back in a kilometre [%/km]. */
const MOST_TRAVEL = 1000;
/** Share of the throttle's range that one step of the sensor may move it by. */
const MOST_PER_STEP = 0.05;

/** Throttles that are never still: that travel far on the way, or that jump with each step of the measured speed. */
export function chatterWarnings(
  { name, controller, figures }: CandidateResult,
  { sensor }: Vehicle,
  { setSpeed }: Demand,
): readonly Warning[] {
  const warnings: Warning[] = [];
  const travel = figures.throttle_travel_pct_per_km;
  if (typeof travel === 'number' && travel > MOST_TRAVEL)
    warnings.push({
      code: 'throttle-travels',
      message: `The throttle of ${name} is never still: it travels ${travel.toFixed(0)} % a kilometre; more than ${MOST_TRAVEL} %, five times from end to end and back, is told.`,
    });
  const fastest = setSpeed.reduce((most, speed) => Math.max(most, speed), 0);
  const step = stepOfSensor(sensor, fastest);
  const jump = controller.kind === 'locked' ? 0 : controller.kp * step;
  if (jump > MOST_PER_STEP)
    warnings.push({
      code: 'throttle-chatters',
      message: `The throttle of ${name} chatters: each step of the speed sensor (${toKmh(step).toFixed(2)} km/h) moves it by ${toPct(jump).toFixed(1)} % through the proportional gain; more than ${toPct(MOST_PER_STEP)} % is told.`,
    });
  return warnings;
}

/**
 * Least step of the measured speed [m/s]: one pulse more or less in the window, or one tick of the clock in a period;
 * 0 without pulses. Filters spread it over time and take nothing off it.
 *
 * @param speed at which the period is timed [m/s]
 */
function stepOfSensor({ pulses, scaleError }: SpeedSensor, speed: number): number {
  if (pulses === null) return 0;
  const { reading, spacing } = pulses;
  const step =
    reading.kind === 'counted' ? spacing / reading.window : (speed * speed * reading.clock) / spacing;
  return (1 + scaleError) * step;
}
