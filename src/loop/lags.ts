import { exp } from '../numeric/elementary.ts';
import {
  G_ACTUATOR,
  G_DRIVE,
  G_DRIVE_HALF,
  G_FILTER,
  G_FILTER_BEGIN,
  G_FILTER_END,
  G_FILTER_RISE,
  G_PULL,
  G_PULL_HALF,
  G_RAMPED_ACTUATOR,
  G_RAMPED_DRIVE,
  G_RAMPED_MEAN,
  P_ACTUATOR_LAG,
  P_DRIVE_LAG,
  P_FILTER,
  P_LAG_EQUAL,
  P_LAG_WEIGHT,
  P_RATE,
  P_RATE_GAP,
  P_STEP,
} from './layout.ts';

/** Filter's lag over step beyond which the speed over the step is taken as a line. */
const LONGEST_FILTER = 1000;

/**
 * Writes a row of decays over a time h and its half: with the command u held, actuator y (lag ta), throttle x (lag td)
 *
 *     y(h) = u + (y - u) e^(-h/ta)
 *     x(h) = u + (x - u) e^(-h/td) + (y - u) pull(h)
 *     pull = ta / (ta - td) (e^(-h/ta) - e^(-h/td)), or h/td e^(-h/td) where the two lags are equal.
 */
export function lagFactors(p: Float64Array, lags: Float64Array, row: number, h: number): void {
  const weight = p[P_LAG_WEIGHT];
  const equal = p[P_LAG_EQUAL];
  const half = 0.5 * h;
  const ya = decay(p[P_ACTUATOR_LAG], half);
  const xd = decay(p[P_DRIVE_LAG], half);
  lags[row + G_DRIVE_HALF] = xd;
  lags[row + G_PULL_HALF] = weight * (ya - xd) + equal * half * xd;
  lags[row + G_DRIVE] = xd * xd;
  lags[row + G_PULL] = weight * (ya * ya - xd * xd) + equal * h * xd * xd;
  lags[row + G_ACTUATOR] = ya * ya;
  if (p[P_FILTER] > 0) filterFactors(p[P_FILTER], lags, row, h);
}

/**
 * The sensor's filter z, lag tf, behind a speed v(t) that is the cubic through speed and acceleration at both ends:
 * z(h) = P(h) + (z - P(0)) e^(-h/tf) with P = v - tf dv/dt + tf^2 d2v/dt2 - tf^3 d3v/dt3, sorted by z - v, by the rise
 * of v and by both accelerations. Where h is so short that these powers cancel, v is taken as a line.
 */
function filterFactors(tf: number, lags: Float64Array, row: number, h: number): void {
  const kept = decay(tf, h);
  const r = tf / h;
  lags[row + G_FILTER] = kept;
  if (r < LONGEST_FILTER) {
    const square = r * r;
    const cube = square * r;
    lags[row + G_FILTER_RISE] = 1 - 6 * square + 12 * cube - kept * (6 * square + 12 * cube);
    lags[row + G_FILTER_BEGIN] = h * (2 * square - 6 * cube + kept * (r + 4 * square + 6 * cube));
    lags[row + G_FILTER_END] = h * (4 * square - r - 6 * cube + kept * (2 * square + 6 * cube));
  } else {
    lags[row + G_FILTER_RISE] = h > 0 ? 1 - r * (1 - kept) : 0;
    lags[row + G_FILTER_BEGIN] = 0;
    lags[row + G_FILTER_END] = 0;
  }
}

/**
 * Actuator and throttle after a whole step that begins at the rate limit, and the mean throttle by Simpson's rule: two
 * halves, each a ramp at the greatest rate, then, once the gap is small enough, the lags.
 */
export function rampedStep(p: Float64Array, lags: Float64Array, u: number, x: number, y: number): void {
  const ta = p[P_ACTUATOR_LAG];
  const td = p[P_DRIVE_LAG];
  const half = 0.5 * p[P_STEP];
  let xe = x;
  let ye = y;
  let middle = x;
  for (let side = 0; side < 2; side++) {
    const slope = u > ye ? p[P_RATE] : -p[P_RATE];
    const ramp = Math.min(Math.max(0, (Math.abs(u - ye) - p[P_RATE_GAP]) / p[P_RATE]), half);
    const start = ye - slope * td;
    xe = start + slope * ramp + (xe - start) * (ramp > 0 ? decay(td, ramp) : 1);
    ye += slope * ramp;
    const rest = half - ramp;
    if (rest > 0) {
      const kept = decay(ta, rest);
      const slow = decay(td, rest);
      xe = u + (xe - u) * slow + (ye - u) * (p[P_LAG_WEIGHT] * (kept - slow) + p[P_LAG_EQUAL] * rest * slow);
      ye = u + (ye - u) * kept;
    }
    if (side === 0) middle = xe;
  }
  lags[G_RAMPED_MEAN] = (x + 4 * middle + xe) * (1 / 6);
  lags[G_RAMPED_DRIVE] = xe;
  lags[G_RAMPED_ACTUATOR] = ye;
}

/** e^(-time / lag), 0 without a lag. */
export function decay(lag: number, time: number): number {
  return lag > 0 ? exp(-time / lag) : 0;
}
