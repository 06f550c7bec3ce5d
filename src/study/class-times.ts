import type { Distribution } from '../loop/result.ts';

/** Time in each class of a distribution, over some of its bins: class first + k has times[k]. */
export interface ClassTimes {
  readonly width: number;
  readonly first: number;
  /** [s] */
  readonly times: Float64Array;
}

/**
 * Brings the bins of a distribution together.
 *
 * @param chosen one a bin: 1 where the bin counts; null: all of them
 * @param magnitude true: classes of the magnitude, -1 counting as 0, -2 as 1
 */
export function classTimes(
  { width, sample, start, index, samples }: Distribution,
  chosen: Uint8Array | null = null,
  magnitude = false,
): ClassTimes {
  const classOf = (entry: number): number => (magnitude && index[entry] < 0 ? ~index[entry] : index[entry]);
  const overBins = (take: (entry: number) => void): void => {
    for (let i = 0; i + 1 < start.length; i++)
      if (chosen === null || chosen[i] === 1) for (let k = start[i]; k < start[i + 1]; k++) take(k);
  };
  let first = Number.POSITIVE_INFINITY;
  let last = Number.NEGATIVE_INFINITY;
  overBins((k) => {
    first = Math.min(first, classOf(k));
    last = Math.max(last, classOf(k));
  });
  if (!(first <= last)) return { width, first: 0, times: new Float64Array(0) };
  const times = new Float64Array(last - first + 1);
  overBins((k) => {
    times[classOf(k) - first] += sample * samples[k];
  });
  return { width, first, times };
}

/**
 * The value that a share of the time stays at or below, to the width of a class: linear within its class.
 *
 * @param share from 0 to 1
 * @returns in the unit of the distribution; null where there is no time
 */
export function quantileOf({ width, first, times }: ClassTimes, share: number): number | null {
  let whole = 0;
  for (const time of times) whole += time;
  if (!(whole > 0)) return null;
  let left = share * whole;
  for (let k = 0; k < times.length; k++) {
    if (times[k] > 0 && left <= times[k]) return (first + k + left / times[k]) * width;
    left -= times[k];
  }
  return (first + times.length) * width;
}
