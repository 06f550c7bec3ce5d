import type { Distribution } from '../loop/result.ts';
import { classTimes } from './class-times.ts';

/** Time in classes centred on whole multiples of a width: class k covers [(k - 1/2) width, (k + 1/2) width). */
export interface Histogram {
  readonly width: number;
  /** Number of the first class; then one after the other. */
  readonly first: number;
  /** [s] */
  readonly times: Float64Array;
}

/**
 * A histogram of all bins of a record, in a unit of the reader's. A fine class of the record counts where its middle lies,
 * so that the classes sum to the time that the distribution has.
 *
 * @param toUnit from SI, increasing
 * @param width of a class in that unit; a multiple of two fine classes loses nothing at its borders
 */
export function histogramOf(
  distribution: Distribution,
  toUnit: (value: number) => number,
  width: number,
): Histogram {
  const fine = classTimes(distribution);
  const classOf = (k: number): number =>
    Math.floor(toUnit((fine.first + k + 0.5) * fine.width) / width + 0.5);
  const { length } = fine.times;
  if (length === 0) return { width, first: 0, times: new Float64Array(0) };
  const first = classOf(0);
  const times = new Float64Array(classOf(length - 1) - first + 1);
  fine.times.forEach((time, k) => {
    times[classOf(k) - first] += time;
  });
  return { width, first, times };
}

/** The same with what lies outside of classes [from, to] in those two. */
export function gathered({ width, first, times }: Histogram, from: number, to: number): Histogram {
  const inside = new Float64Array(to - from + 1);
  times.forEach((time, k) => {
    inside[Math.min(Math.max(first + k, from), to) - from] += time;
  });
  return { width, first: from, times: inside };
}
