import type { Complex } from '../numeric/complex.ts';
import { exp, log } from '../numeric/elementary.ts';

/** A frequency response on a grid. Equal lengths. */
export interface ResponseScan {
  /** [rad/s], rising. */
  readonly frequency: Float64Array;
  readonly re: Float64Array;
  readonly im: Float64Array;
}

/**
 * Frequencies in equal steps of their logarithm, both ends included to the bit.
 *
 * @param from [rad/s], > 0
 * @param to [rad/s], > from
 * @param steps how many; one point more comes back
 */
export function logarithmicGrid(from: number, to: number, steps: number): Float64Array {
  const start = log(from);
  const width = (log(to) - start) / steps;
  return Float64Array.from({ length: steps + 1 }, (_, i) => {
    if (i === 0) return from;
    return i === steps ? to : exp(start + i * width);
  });
}

/** The response at every frequency of a grid: what Bode and Nyquist charts draw. */
export function scanResponse(
  response: (frequency: number) => Complex,
  frequency: Float64Array,
): ResponseScan {
  const re = new Float64Array(frequency.length);
  const im = new Float64Array(frequency.length);
  for (let i = 0; i < frequency.length; i++) {
    const value = response(frequency[i]!);
    re[i] = value.re;
    im[i] = value.im;
  }
  return { frequency, re, im };
}
