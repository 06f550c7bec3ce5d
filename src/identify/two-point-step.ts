import type { StepNumbers, StepRecord } from './step-test.ts';

/** Shares of the whole response that a first-order lag has behind it after a third of its time constant and after all of it. */
const THIRD = 0.283;
const WHOLE = 0.632;
/** Part of the record, at its end, whose mean stands for where the speed settles. */
const TAIL = 0.1;

/** Where a response starts and ends. */
export interface StepLevels {
  readonly before: number;
  readonly after: number;
}

export function stepLevels({ time, speed }: StepRecord): StepLevels {
  const end = time[time.length - 1]! * (1 - TAIL);
  const mean = (of: (t: number) => boolean): number => {
    const chosen = speed.filter((_, i) => of(time[i]!));
    return chosen.reduce((sum, v) => sum + v, 0) / chosen.length;
  };
  return { before: mean((t) => t < 0), after: mean((t) => t >= end) };
}

/**
 * Gain, time constant and delay by two points: T = 1.5 (t63 - t28), L = t63 - T, with the times at which 28.3 and 63.2 %
 * of the response are behind it (C. L. Smith, Digital Computer Process Control, 1972, from memory). Between samples on a
 * straight line.
 */
export function twoPointStep(record: StepRecord): StepNumbers<number> {
  const { before, after } = stepLevels(record);
  const t28 = crossing(record, before + THIRD * (after - before), after > before);
  const t63 = crossing(record, before + WHOLE * (after - before), after > before);
  const timeConstant = 1.5 * (t63 - t28);
  return {
    gain: (after - before) / (record.to - record.from),
    timeConstant,
    delay: t63 - timeConstant,
  };
}

/** Mean of the first and the last time at which the speed passes a level after the step: noise moves them apart evenly. */
function crossing({ time, speed }: StepRecord, level: number, up: boolean): number {
  let first = Number.NaN;
  let last = Number.NaN;
  for (let i = 1; i < time.length; i++) {
    if (time[i]! <= 0) continue;
    const [a, b] = [speed[i - 1]!, speed[i]!];
    if (!(up ? a < level && b >= level : a > level && b <= level)) continue;
    const at = time[i - 1]! + ((level - a) / (b - a)) * (time[i]! - time[i - 1]!);
    if (Number.isNaN(first)) first = at;
    last = at;
  }
  return (first + last) / 2;
}
