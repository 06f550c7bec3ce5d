import { studentQuantile } from '../numeric/student-t.ts';

/** Share of intervals that hold the truth when the model and its noise are as assumed. */
export const CONFIDENCE = 0.95;

/** A number that was measured: its value, its standard error, and the ends of its 95 % interval, all in one unit. */
export interface Estimate {
  readonly value: number;
  readonly standardError: number;
  readonly low: number;
  readonly high: number;
}

/**
 * The interval of an estimate: value and so many standard errors on either side, by Student's t.
 *
 * @param degrees of freedom that the standard error was found with, > 0
 */
export function estimateOf(value: number, standardError: number, degrees: number): Estimate {
  const half = studentQuantile(CONFIDENCE, degrees) * standardError;
  return { value, standardError, low: value - half, high: value + half };
}

/** True where zero lies outside of the interval: the data tell the number from nothing. */
export const isTold = ({ low, high }: Estimate): boolean => low > 0 || high < 0;

/** An estimate in another unit. */
export const scaledEstimate = (estimate: Estimate, factor: number): Estimate => ({
  value: estimate.value * factor,
  standardError: estimate.standardError * Math.abs(factor),
  low: Math.min(estimate.low * factor, estimate.high * factor),
  high: Math.max(estimate.low * factor, estimate.high * factor),
});
