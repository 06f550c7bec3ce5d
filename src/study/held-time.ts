import type { BinRecord } from '../loop/result.ts';

/** Time with hold on in a bin [s]: what sums and extremes of the error are taken over. */
export const heldTime = ({ time, timeOff }: Pick<BinRecord, 'time' | 'timeOff'>, i: number): number =>
  time[i] - timeOff[i];

/** Time mean of the error in a bin over the time with hold on [m/s]; null where there is none. */
export function meanErrorIn(
  bins: Pick<BinRecord, 'time' | 'timeOff' | 'errorMean' | 'errorMin' | 'errorMax'>,
  i: number,
): number | null {
  const held = heldTime(bins, i);
  if (held > 0) return bins.errorMean[i] / held;
  // A bin that no sample starts in has the error of the sample that passes over it.
  return bins.time[i] > 0 ? null : (bins.errorMin[i] + bins.errorMax[i]) / 2;
}
