import type { NumberField } from '../../case/number-fields.ts';

/** Where a number can be dragged to: the part of its range that is near it. */
export interface DragRange {
  readonly low: number;
  readonly high: number;
  readonly step: number;
}

/** A range this many times as wide as its value is dragged over whole. */
const WIDE = 12;
const STEPS = 200;
/** A value below this share of its range says nothing of how far it may go. */
const NOTHING = 1e-9;

/**
 * The whole range where it is of the value's own size; else from 0, or from as far below, to three times the value,
 * within what is allowed. Ends are multiples of a step of 1, 2 or 5 times a power of ten.
 */
export function dragRange(
  { least, most, whole }: Pick<NumberField, 'least' | 'most' | 'whole'>,
  value: number,
): DragRange {
  const span = most - least;
  const size = Math.abs(value);
  const isNothing = size < NOTHING * span;
  const reach = 2 * size + (isNothing || least < 0 ? span / 20 : 0);
  const [from, to] =
    span <= WIDE * size || (whole && span <= STEPS)
      ? [least, most]
      : [Math.max(least, least < 0 ? value - reach : 0), Math.min(most, value + reach)];
  const step = niceStep((to - from) / STEPS, whole);
  const low = rounded(Math.ceil(from / step - 1e-9) * step);
  const high = rounded(Math.floor(to / step + 1e-9) * step);
  return { low: Math.max(low, least), high: Math.min(high, most), step };
}

/** Without the noise of binary fractions. */
export const rounded = (value: number): number => Number(value.toPrecision(12));

function niceStep(coarse: number, whole: boolean): number {
  if (whole && coarse <= 1) return 1;
  const power = Number(`1e${Number(coarse.toExponential().split('e')[1])}`);
  const step = [1, 2, 5, 10].find((factor) => factor * power >= coarse * 0.999) ?? 10;
  return rounded(step * power);
}
