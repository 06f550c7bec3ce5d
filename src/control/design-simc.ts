import { checkSpec } from '../vehicle/check-spec.ts';
import {
  type Designed,
  type DesignLoop,
  type DesignPoint,
  designLoop,
  figure,
  gainWords,
  notFeasible,
  promisedFigures,
  speedWords,
} from './design-point.ts';
import { halfRule, type LagAndDelay } from './half-rule.ts';
import type { Gains } from './sampled-loop.ts';
import { sensorDelay } from './sensor-delay.ts';

export interface SimcDemand extends DesignPoint {
  /** Time constant of the closed loop beside its delay [s], > 0; `tight`: as long as the delay. */
  readonly closedLoop: number | 'tight';
  /** `simc`: the integral time is cut short where the vehicle is nearly an integrator; `lambda`: it is the vehicle's lag. */
  readonly rule: 'simc' | 'lambda';
}

/** First order and dead time: the speed rises by `gain` m/s2 for a full throttle, at first. */
export interface DelayedLag extends LagAndDelay {
  readonly gain: number;
}

/**
 * PI gains for a lag with dead time, g = gain exp(-delay s) / (s + 1 / lag):
 *
 *     Kc = 1 / (gain (tc + delay)),  Ti = min(lag, 4 (tc + delay))
 *
 * (S. Skogestad, J. Process Control 13 (2003) 291-309, equations (21) and (23), numbers from memory); under `lambda` Ti
 * is the lag, whatever the delay (E. B. Dahlin 1968, from memory).
 */
export function simcGains(
  { gain, lag, delay }: DelayedLag,
  closedLoop: number,
  rule: SimcDemand['rule'],
): Gains {
  const kp = 1 / (gain * (closedLoop + delay));
  const integralTime = rule === 'lambda' ? lag : Math.min(lag, 4 * (closedLoop + delay));
  return { kp, ki: kp / integralTime };
}

/**
 * The vehicle at the point as one lag and one dead time, by the half rule: dead time and lag of the actuator, lag of the
 * drive and of a belt, filter and age of the sensor, computing delay, and half a sample of hold. A vehicle that runs
 * away by itself counts as an integrator.
 */
export function delayedLag({ point, model }: DesignLoop): DelayedLag {
  const { actuator, drive, sensor } = point.vehicle;
  const own = model.a < 0 ? -1 / model.a : Number.POSITIVE_INFINITY;
  const lags = [own, actuator.lag, drive.lag, model.belt?.lag ?? 0, sensor.filter];
  const delay = actuator.deadTime + sensorDelay(sensor, point.at) + point.computingDelay + point.sample / 2;
  const kept = halfRule(lags, delay);
  // The gain at rest stays as it is; of an integrator there is none, and the slope stays.
  const share = own === Number.POSITIVE_INFINITY ? 1 : own / kept.lag;
  return { ...kept, gain: model.b * (1 + sensor.scaleError) * share };
}

/**
 * PI gains from how fast the loop shall be beside its delay: SIMC, or lambda tuning.
 *
 * @param demand operating point, controller and what is asked of it
 * @returns gains, and what the linear loop promises with them
 * @throws InputError `out-of-range`; `design-not-feasible` where the drive does not hold the point, or lambda tuning
 *   meets a vehicle that is no lag
 */
export function designSimc(demand: SimcDemand): Designed {
  const { closedLoop, rule } = demand;
  if (closedLoop !== 'tight')
    checkSpec('design', [
      { key: 'design.closedLoop', value: closedLoop, unit: 's', least: 0, greatest: 1e4, above: true },
    ]);
  const design = designLoop(demand);
  const model = delayedLag(design);
  const time = closedLoop === 'tight' ? model.delay : closedLoop;
  if (rule === 'lambda' && model.lag === Number.POSITIVE_INFINITY)
    throw notFeasible(
      'the vehicle runs away from the operating point by itself: it has no lag that the integral time could be',
      speedWords(demand.at),
      'rule: simc',
    );
  const gains = simcGains(model, time, rule);
  // Of an integrator both poles lie at 1 / (2 (tc + delay)).
  const {
    damping: _,
    frequency: __,
    ...promised
  } = promisedFigures(design, gains, 0.5 / (time + model.delay), 1);
  const name = rule === 'simc' ? 'SIMC' : 'lambda tuning';
  const words =
    `Designed at ${speedWords(demand.at)} by ${name} for a closed loop of ${figure(time)} s beside an effective delay of ` +
    `${figure(model.delay)} s: ${gainWords(gains)}.`;
  const asked = { closedLoop: time };
  return {
    ...gains,
    record: { method: rule, speed: demand.at, asked, promised: { ...promised, delay: model.delay }, words },
  };
}
