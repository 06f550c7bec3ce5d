import { fixed, NO_VALUE, shareText, withUnit } from '../quantity.ts';
import type { Spread, SpreadRow } from './histograms.ts';

/** Digits after the point that borders of classes need. */
function borderDigits(width: number): number {
  let digits = 0;
  while (digits < 4 && !isWhole((width / 2) * [1, 10, 100, 1000, 10_000][digits]!)) digits++;
  return digits;
}
const isWhole = (value: number): boolean => Math.abs(value - Math.round(value)) < 1e-9;

/** Class k of a spread, counted from its first: `−0.25 to 0.25`; the outermost as far as what they gather. */
export function classText({ width, from, cut, to }: Spread, k: number): string {
  const digits = borderDigits(width);
  const border = (n: number): string => fixed((from + n - 0.5) * width, digits);
  if (k === 0 && cut.low) return `below ${border(1)}`;
  if (from + k === to && cut.high) return `${border(k)} and above`;
  return `${border(k)} to ${border(k + 1)}`;
}

/** A share of the time; what is there but rounds to nothing is told as less than the last digit. */
export const timeShareText = (share: number): string =>
  share === 0 ? NO_VALUE : share < 0.0005 ? `< ${shareText(0.001, 1)}` : shareText(share, 1);

/** One candidate's spread in a sentence: its most frequent class. */
export function spreadSentence(spread: Spread, { candidate, shares }: SpreadRow): string {
  const most = shares.reduce((best, share, k) => (share > shares[best]! ? k : best), 0);
  return shares.some((share) => share > 0)
    ? `${candidate.name}: ${timeShareText(shares[most]!)} of the time at ${withUnit(classText(spread, most), spread.unit)}.`
    : `${candidate.name}: hold was never on.`;
}
