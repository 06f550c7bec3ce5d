import { log } from '../numeric/elementary.ts';
import { decay } from './lags.ts';
import {
  G_MOVED_ACTUATOR,
  G_MOVED_DRIVE,
  G_MOVED_MEAN,
  G_MOVED_PLATE,
  P_ACTUATOR_LAG,
  P_DRIVE_LAG,
  P_LAG_EQUAL,
  P_LAG_WEIGHT,
  P_PLAY,
  P_RATE,
  P_RATE_GAP,
  P_STEP,
} from './layout.ts';

/** A gap or a play smaller than this, in throttle, is none. */
const NO_GAP = 1e-12;

/**
 * Time in which the actuator takes up a play on its way to the command: on a ramp, or by its lag; Infinity where the
 * command lies within the play.
 *
 * @param gap between actuator and command, >= 0
 * @param left play still to take up, > 0
 * @param rate of the ramp [1/s]; 0: the lag rules
 */
export function takeUpTime(ta: number, gap: number, left: number, rate: number): number {
  if (rate > 0) return left / rate;
  return gap - left > NO_GAP ? ta * log(gap / (gap - left)) : Number.POSITIVE_INFINITY;
}

/**
 * Actuator, plate behind the slack, throttle after a whole step, and the mean throttle, in closed form: a ramp at the
 * greatest rate, then, once the gap is small enough, the lag; within each the plate rests until the play is taken up.
 * The mean of the throttle is that of the plate less what the drive's lag stores: integral x = integral plate - td (x1 - x0).
 */
export function actuatorStep(
  p: Float64Array,
  lags: Float64Array,
  u: number,
  x: number,
  y: number,
  plate: number,
): void {
  const ta = p[P_ACTUATOR_LAG];
  const td = p[P_DRIVE_LAG];
  const step = p[P_STEP];
  const way = u < y ? -1 : 1;
  const lead = way * p[P_PLAY];
  let xe = x;
  let ye = y;
  let plateEnd = plate;
  let area = 0;
  let rest = step;
  // At most three parts: before and behind the play's end, before and behind the ramp's.
  for (let part = 0; rest > 0 && part < 3; part++) {
    const gap = way * (u - ye);
    const ramp = gap - p[P_RATE_GAP] > NO_GAP;
    const left = way * (plateEnd + lead - ye);
    const carried = left <= NO_GAP;
    let time = ramp ? Math.min(rest, (gap - p[P_RATE_GAP]) / p[P_RATE]) : rest;
    if (!carried) time = Math.min(time, takeUpTime(ta, gap, left, ramp ? p[P_RATE] : 0));
    if (part === 2) time = rest;
    const slow = decay(td, time);
    const quick = decay(ta, time);
    const moved = ramp ? way * p[P_RATE] * time : (u - ye) * (1 - quick);
    if (!carried) {
      xe = plateEnd + (xe - plateEnd) * slow;
      area += plateEnd * time;
    } else if (ramp) {
      const start = ye - lead - way * p[P_RATE] * td;
      xe = start + moved + (xe - start) * slow;
      area += (ye - lead + 0.5 * moved) * time;
    } else {
      const pull = p[P_LAG_WEIGHT] * (quick - slow) + p[P_LAG_EQUAL] * time * slow;
      xe = u - lead + (xe - u + lead) * slow + (ye - u) * pull;
      area += (u - lead) * time - ta * moved;
    }
    ye += moved;
    if (carried) plateEnd = ye - lead;
    rest -= time;
  }
  lags[G_MOVED_MEAN] = (area - td * (xe - x)) / step;
  lags[G_MOVED_DRIVE] = xe;
  lags[G_MOVED_ACTUATOR] = ye;
  lags[G_MOVED_PLATE] = plateEnd;
}
