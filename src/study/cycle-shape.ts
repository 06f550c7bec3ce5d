import type { SpeedTrace } from '../loop/trace-speeds.ts';
import { chainsOf, type Turning, turningsOf } from './cycle-swings.ts';
import type { Stretch } from './findings.ts';

/** An oscillation of the speed error, whatever keeps it going. */
export interface Oscillation extends Stretch {
  /** [s] */
  readonly period: number;
  readonly turns: number;
  /** Half of peak to peak, the median of its swings [m/s]. */
  readonly amplitude: number;
}

/** Periods that are looked for [s]. */
export const SHORTEST_PERIOD = 2;
export const LONGEST_PERIOD = 25;
/** Turns that make an oscillation. */
export const LEAST_TURNS = 4;
/** Longest time between a peak and the next trough [s]: a little more than half of the longest period, for a cycle that is not symmetrical. */
export const LONGEST_SWING = 0.65 * LONGEST_PERIOD;
/** Spacing of the samples that are looked at [s]. */
const SPACING = 0.1;
/** Autocorrelation at the period of something that repeats itself. */
const LEAST_CORRELATION = 0.5;
/** The period lies within these multiples of the mean time between peaks. */
const NEAR = { least: 0.6, most: 1.6 };

/**
 * Oscillations of the speed error: at least four turns, swings of twice the amplitude or more, and an autocorrelation
 * that has a peak of at least one half at a period of 2 to 25 s (Box, Jenkins and Reinsel, Time Series Analysis, on the
 * correlogram of a periodic series, from memory). The error is looked at ten times a second, and what is slower than
 * the oscillation is taken out by a moving mean over one period before it is correlated.
 *
 * @param trace speeds of every sample
 * @param least amplitude [m/s]
 */
export function oscillationsIn(trace: SpeedTrace, least: number): Oscillation[] {
  const { time, distance, error } = decimated(trace);
  const turnings = turningsOf(error, error, 2 * least);
  return chainsOf(turnings, time, LONGEST_SWING, 2 * LEAST_TURNS + 1).flatMap((chain) => {
    const first = chain[0];
    const last = chain[chain.length - 1];
    const span = time[last.at] - time[first.at];
    const step = span / (last.at - first.at);
    const guess = (2 * span) / (chain.length - 1);
    const period = step * periodOf(error.subarray(first.at, last.at + 1), guess / step);
    if (!(period >= SHORTEST_PERIOD && period <= LONGEST_PERIOD)) return [];
    return [
      {
        from: distance[first.at],
        to: distance[last.at],
        period,
        turns: Math.round(span / period),
        amplitude: medianSwing(chain) / 2,
      },
    ];
  });
}

interface Decimated {
  readonly time: Float64Array;
  readonly distance: Float64Array;
  readonly error: Float64Array;
}

function decimated({ size, time, distance, speed, setSpeed }: SpeedTrace): Decimated {
  const sample = size > 1 ? time[1] - time[0] : SPACING;
  const group = Math.max(1, Math.round(SPACING / sample));
  const count = Math.floor(size / group);
  const error = new Float64Array(count);
  const every = (column: Float64Array): Float64Array =>
    Float64Array.from({ length: count }, (_, i) => column[i * group]);
  for (let i = 0; i < count; i++) {
    let sum = 0;
    for (let k = i * group; k < (i + 1) * group; k++) sum += speed[k] - setSpeed[k];
    error[i] = sum / group;
  }
  return { time: every(time), distance: every(distance), error };
}

/** Period in samples by the highest autocorrelation near a guess, refined by a parabola; 0: nothing repeats itself. */
function periodOf(error: Float64Array, guess: number): number {
  const wave = withoutDrift(error, Math.round(guess));
  const least = Math.max(1, Math.floor(NEAR.least * guess));
  const most = Math.min(Math.ceil(NEAR.most * guess), wave.length - 2);
  const correlation = new Float64Array(Math.max(0, most - least + 1));
  let best = 0;
  for (let i = 0; i < correlation.length; i++) {
    correlation[i] = correlationAt(wave, least + i);
    if (correlation[i] > correlation[best]) best = i;
  }
  // Highest at an end is no peak.
  if (!(best > 0 && best < correlation.length - 1 && correlation[best] >= LEAST_CORRELATION)) return 0;
  const before = correlation[best - 1];
  const behind = correlation[best + 1];
  const bend = before - 2 * correlation[best] + behind;
  return least + best + (bend < 0 ? (before - behind) / (2 * bend) : 0);
}

function correlationAt(wave: Float64Array, lag: number): number {
  let product = 0;
  let early = 0;
  let late = 0;
  for (let i = lag; i < wave.length; i++) {
    product += wave[i - lag] * wave[i];
    early += wave[i - lag] * wave[i - lag];
    late += wave[i] * wave[i];
  }
  return early > 0 && late > 0 ? product / Math.sqrt(early * late) : 0;
}

/** What is left of a signal above its moving mean over about `width` samples; at the ends the mean of what there is. */
function withoutDrift(signal: Float64Array, width: number): Float64Array {
  const n = signal.length;
  const sums = new Float64Array(n + 1);
  for (let i = 0; i < n; i++) sums[i + 1] = sums[i] + signal[i];
  const half = Math.max(1, width >> 1);
  return signal.map((x, i) => {
    const from = Math.max(0, Math.min(i - half, n - 2 * half));
    const to = Math.min(n, from + 2 * half);
    return x - (sums[to] - sums[from]) / (to - from);
  });
}

function medianSwing(chain: readonly Turning[]): number {
  const swings = Float64Array.from({ length: chain.length - 1 }, (_, i) =>
    Math.abs(chain[i + 1].value - chain[i].value),
  ).sort();
  return swings[swings.length >> 1];
}
