import type { Estimate } from '../../identify/estimate.ts';
import { digitsFor, fixed, signed, withUnit } from '../quantity.ts';

/** Half of the width of the 95 % interval. */
export const halfWidth = ({ low, high }: Estimate): number => (high - low) / 2;

/** Digits after the point that two significant digits of the interval leave; where there is none, four of the value. */
const digitsOf = (estimate: Estimate): number => {
  const half = halfWidth(estimate);
  return half > 0 ? Math.max(0, digitsFor(half, 2)) : digitsFor(estimate.value, 4);
};

/** `0.580 ± 0.021 m²`, with as many digits as the interval supports; ± is half of the 95 % interval. */
export function plusMinus(estimate: Estimate, unit: string): string {
  const digits = digitsOf(estimate);
  return withUnit(`${fixed(estimate.value, digits)}\u00a0±\u00a0${fixed(halfWidth(estimate), digits)}`, unit);
}

/** Value, standard error and interval as cells of a table. */
export function estimateCells(estimate: Estimate, isSigned = false): readonly [string, string, string] {
  const digits = Math.min(digitsOf(estimate) + 1, 6);
  const text = isSigned ? signed : fixed;
  return [
    text(estimate.value, digits),
    fixed(estimate.standardError, digits),
    `${text(estimate.low, digits)} to ${text(estimate.high, digits)}`,
  ];
}
