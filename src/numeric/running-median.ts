/** Median and median absolute deviation of the values in a window that moves along them. */
export interface RunningMedian {
  readonly median: Float64Array;
  /** Median of |value - median| over the same window; times 1.4826 it estimates a normal standard deviation. */
  readonly deviation: Float64Array;
}

/** Median of finite values; the mean of the middle two for an even count; NaN for none. */
export function medianOf(values: Float64Array): number {
  if (values.length === 0) return Number.NaN;
  return middle(values.slice().sort(), values.length);
}

/**
 * Running median and deviation over windows that move forward: the window of value i is values[first[i]] ..
 * values[last[i] - 1], with `first` and `last` not decreasing and last[i] > first[i]. Values must be finite.
 * The window is kept sorted, so a step costs its own length at most.
 */
export function runningMedian(values: Float64Array, first: Int32Array, last: Int32Array): RunningMedian {
  const size = values.length;
  const median = new Float64Array(size);
  const deviation = new Float64Array(size);
  let widest = 1;
  for (let i = 0; i < size; i++) widest = Math.max(widest, last[i]! - first[i]!);
  const sorted = new Float64Array(widest + 1);
  let count = 0;
  let from = 0;
  let to = 0;
  for (let i = 0; i < size; i++) {
    for (; from < first[i]! && from < to; from++) {
      const at = lowerBound(sorted, count, values[from]!);
      sorted.copyWithin(at, at + 1, count--);
    }
    if (to < first[i]!) {
      from = first[i]!;
      to = from;
    }
    for (; to < last[i]!; to++) {
      const at = lowerBound(sorted, count, values[to]!);
      sorted.copyWithin(at + 1, at, count++);
      sorted[at] = values[to]!;
    }
    median[i] = middle(sorted, count);
    deviation[i] = middleDistance(sorted, count, median[i]!);
  }
  return { median, deviation };
}

/** Windows of every place within `reach` of place i, but at least `least` neighbours on each side where there are so many. */
export function windowsWithin(
  places: Float64Array,
  reach: number,
  least: number,
): { readonly first: Int32Array; readonly last: Int32Array } {
  const size = places.length;
  const first = new Int32Array(size);
  const last = new Int32Array(size);
  let from = 0;
  let to = 0;
  for (let i = 0; i < size; i++) {
    while (places[from]! < places[i]! - reach) from++;
    while (to < size && places[to]! <= places[i]! + reach) to++;
    first[i] = Math.min(from, Math.max(0, i - least));
    last[i] = Math.max(to, Math.min(size, i + least + 1));
  }
  return { first, last };
}

function middle(sorted: Float64Array, count: number): number {
  const half = count >> 1;
  return count % 2 === 1 ? sorted[half]! : (sorted[half - 1]! + sorted[half]!) / 2;
}

/** Median distance from `centre`: walks outwards from it on both sides until half of the values are passed. */
function middleDistance(sorted: Float64Array, count: number, centre: number): number {
  const half = count >> 1;
  let left = lowerBound(sorted, count, centre) - 1;
  let right = left + 1;
  let previous = 0;
  let distance = 0;
  for (let k = 0; k <= half; k++) {
    previous = distance;
    const below = left >= 0 ? centre - sorted[left]! : Number.POSITIVE_INFINITY;
    const above = right < count ? sorted[right]! - centre : Number.POSITIVE_INFINITY;
    if (below <= above) {
      distance = below;
      left--;
    } else {
      distance = above;
      right++;
    }
  }
  return count % 2 === 1 ? distance : (previous + distance) / 2;
}

/** First index of the sorted part whose value is not below `value`. */
function lowerBound(sorted: Float64Array, count: number, value: number): number {
  let low = 0;
  let high = count;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (sorted[mid]! < value) low = mid + 1;
    else high = mid;
  }
  return low;
}
