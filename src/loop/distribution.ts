import type { Distribution } from './result.ts';

const LEAST = -32768;
const GREATEST = 32767;

/** A distribution while it grows, bin by bin. */
export interface DistributionRecorder {
  /** Adds the first `count` of some values to the open bin, a sample each; the last may be a share of a sample. */
  readonly add: (values: Float64Array, count: number, lastShare: number) => void;
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
  const perWidth = 1 / width;
  const start = new Uint32Array(bins + 1);
  const open = new Float32Array(GREATEST - LEAST + 1);
  const met = new Uint16Array(open.length);
  let meets = 0;
  let index = new Int16Array(4 * bins + 64);
  let samples = new Float32Array(index.length);
  let closed = 0;
  let entries = 0;
  const meet = (k: number, count: number): void => {
    if (open[k] === 0) met[meets++] = k;
    open[k] += count;
  };
  const add: DistributionRecorder['add'] = (values, count, lastShare) => {
    // Neighbours are mostly of one class: they are counted together.
    let here = -1;
    let alike = 0;
    for (let i = 0; i < count; i++) {
      const k = Math.min(Math.max(Math.floor(values[i] * perWidth), LEAST), GREATEST) - LEAST;
      if (k !== here) {
        if (alike > 0) meet(here, alike);
        here = k;
        alike = 0;
      }
      alike += i < count - 1 ? 1 : lastShare;
    }
    if (alike > 0) meet(here, alike);
  };
  const close = (): void => {
    if (entries + meets > index.length) {
      const size = Math.max(2 * index.length, entries + meets);
      index = enlarged(index, new Int16Array(size));
      samples = enlarged(samples, new Float32Array(size));
    }
    for (let m = 0; m < meets; m++) {
      const k = met[m];
      index[entries] = k + LEAST;
      samples[entries] = open[k];
      open[k] = 0;
      entries++;
    }
    meets = 0;
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
