import type { Distribution } from './result.ts';

const LEAST = -32768;
const GREATEST = 32767;

/** A distribution while it grows, bin by bin. */
export interface DistributionRecorder {
  /** Adds a value to the open bin, for so many samples (a share of one at the end of a run). */
  readonly add: (value: number, samples: number) => void;
  readonly close: () => void;
  readonly finish: () => Distribution;
}

/**
 * Counts by fine classes, of which each bin keeps those that it met: a bin of a few dozen samples has at most as many.
 *
 * @param bins how many there will be at most
 * @param width of a class, in the unit of the value; above 0
 * @param sample time of a sample [s]
 */
export function distributionRecorder(bins: number, width: number, sample: number): DistributionRecorder {
  const start = new Uint32Array(bins + 1);
  const open = new Float32Array(GREATEST - LEAST + 1);
  const met: number[] = [];
  let index = new Int16Array(8 * bins + 64);
  let samples = new Float32Array(index.length);
  let closed = 0;
  let entries = 0;
  const add = (value: number, count: number): void => {
    const k = Math.min(Math.max(Math.floor(value / width), LEAST), GREATEST) - LEAST;
    if (open[k] === 0) met.push(k);
    open[k] += count;
  };
  const close = (): void => {
    if (entries + met.length > index.length) {
      const size = Math.max(2 * index.length, entries + met.length);
      index = enlarged(index, new Int16Array(size));
      samples = enlarged(samples, new Float32Array(size));
    }
    for (const k of met) {
      index[entries] = k + LEAST;
      samples[entries] = open[k];
      open[k] = 0;
      entries++;
    }
    met.length = 0;
    start[++closed] = entries;
  };
  const finish = (): Distribution => ({
    width,
    sample,
    start: start.slice(0, closed + 1),
    index: index.slice(0, entries),
    samples: samples.slice(0, entries),
  });
  return { add, close, finish };
}

function enlarged<T extends Int16Array | Float32Array>(from: T, into: T): T {
  into.set(from);
  return into;
}
