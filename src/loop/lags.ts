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
  P_ACTUATOR_LAG,
  P_DRIVE_LAG,
  P_DRIVE_MEAN,
  P_FILTER,
  P_LAG_EQUAL,
  P_LAG_WEIGHT,
  P_PULL_MEAN,
  P_SAMPLE,
  P_STEP,
  P_STEPS,
} from './layout.ts';

/** Filter's lag over step beyond which the speed over the step is taken as a line. */
const LONGEST_FILTER = 1000;

/** Step over the shortest lag below which Simpson's rule over the throttle is right to 1e-12. */
const SHORT = 0.01;

/**
 * Writes a row of decays over a time h and its middle: with the command u held, actuator y (lag ta), throttle x (lag td)
 *
 *     y(h) = u + (y - u) e^(-h/ta)
 *     x(h) = u + (x - u) e^(-h/td) + (y - u) pull(h)
 *     pull = ta / (ta - td) (e^(-h/ta) - e^(-h/td)), or h/td e^(-h/td) where the two lags are equal.
 *
 * The value in the middle is the one with which Simpson's rule gives the mean throttle exactly: (6 mean - start - end) / 4.
 * It is that at h/2 to the fourth order of h/lag, and it takes the error of a jump of the command out of the speed.
 */
export function lagFactors(p: Float64Array, lags: Float64Array, row: number, h: number): void {
  const ta = p[P_ACTUATOR_LAG];
  const td = p[P_DRIVE_LAG];
  const weight = p[P_LAG_WEIGHT];
  const equal = p[P_LAG_EQUAL];
  const half = 0.5 * h;
  const ya = decay(ta, half);
  const xd = decay(td, half);
  const actuator = ya * ya;
  const drive = xd * xd;
  const pull = weight * (actuator - drive) + equal * h * drive;
  lags[row + G_DRIVE] = drive;
  lags[row + G_PULL] = pull;
  lags[row + G_ACTUATOR] = actuator;
  if ((ta > 0 && h < SHORT * ta) || (td > 0 && h < SHORT * td) || h === 0) {
    lags[row + G_DRIVE_HALF] = xd;
    lags[row + G_PULL_HALF] = weight * (ya - xd) + equal * half * xd;
  } else {
    const driveMean = (td * (1 - drive)) / h;
    const pullMean = weight * ((ta * (1 - actuator)) / h - driveMean) + equal * td * (driveMean - drive);
    lags[row + G_DRIVE_HALF] = 0.25 * (6 * driveMean - 1 - drive);
    lags[row + G_PULL_HALF] = 0.25 * (6 * pullMean - pull);
  }
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

/** e^(-time / lag), 0 without a lag. */
export function decay(lag: number, time: number): number {
  return lag > 0 ? exp(-time / lag) : 0;
}

/** Puts a number of steps a sample in hand: the step, decays over a whole one, and their means over it. */
export function loadSteps(p: Float64Array, lags: Float64Array, steps: number): void {
  if (p[P_STEPS] === steps) return;
  const step = p[P_SAMPLE] / steps;
  p[P_STEPS] = steps;
  p[P_STEP] = step;
  lagFactors(p, lags, 0, step);
  const td = p[P_DRIVE_LAG];
  const actuator = (p[P_ACTUATOR_LAG] * (1 - lags[G_ACTUATOR])) / step;
  const drive = (td * (1 - lags[G_DRIVE])) / step;
  p[P_DRIVE_MEAN] = drive;
  p[P_PULL_MEAN] = p[P_LAG_WEIGHT] * (actuator - drive) + p[P_LAG_EQUAL] * td * (drive - lags[G_DRIVE]);
}
