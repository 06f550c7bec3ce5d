/** One pixel column of a curve: its place and the least, mean and greatest value in it. */
export interface Column {
  readonly at: number;
  readonly low: number;
  readonly mean: number;
  readonly high: number;
}

/** A curve with its spread, value by value; `at` does not decrease. */
export interface Curve {
  readonly size: number;
  readonly at: ArrayLike<number>;
  readonly low: ArrayLike<number>;
  readonly mean: ArrayLike<number>;
  readonly high: ArrayLike<number>;
}

/**
 * Brings a curve to the columns of a picture: every value falls into one column, whose extremes are the extremes of
 * its values, so that no peak is lost however long the road is. The mean is that of the values. Columns without a
 * value are left out, and so are values that are not finite.
 *
 * @param from start of the picture, in the unit of `at`
 * @param width width of a column, same unit, above 0
 */
export function columnsOf(curve: Curve, from: number, width: number): readonly Column[] {
  const columns: Column[] = [];
  let open = Number.NaN;
  let count = 0;
  let at = 0;
  let sum = 0;
  let low = 0;
  let high = 0;
  const close = () => {
    if (count > 0) columns.push({ at: at / count, low, mean: sum / count, high });
  };
  for (let i = 0; i < curve.size; i++) {
    const [l, m, h] = [curve.low[i]!, curve.mean[i]!, curve.high[i]!];
    if (!(Number.isFinite(l) && Number.isFinite(m) && Number.isFinite(h))) continue;
    const column = Math.floor((curve.at[i]! - from) / width);
    if (column !== open) {
      close();
      open = column;
      count = 0;
      at = 0;
      sum = 0;
      low = l;
      high = h;
    }
    count++;
    at += curve.at[i]!;
    sum += m;
    low = Math.min(low, l);
    high = Math.max(high, h);
  }
  close();
  return columns;
}

/** The parts of a curve between values whose mean is not finite. */
export function unbrokenRuns({ size, at, low, mean, high }: Curve): readonly Curve[] {
  const runs: Curve[] = [];
  let from = 0;
  const part = (values: ArrayLike<number>, to: number) =>
    Array.from({ length: to - from }, (_, i) => values[from + i]!);
  for (let i = 0; i <= size; i++) {
    if (i < size && Number.isFinite(mean[i]!)) continue;
    if (i > from)
      runs.push(
        from === 0 && i === size
          ? { size, at, low, mean, high }
          : { size: i - from, at: part(at, i), low: part(low, i), mean: part(mean, i), high: part(high, i) },
      );
    from = i + 1;
  }
  return runs;
}

/** Places and values of a line that keeps every peak: of each column its least and greatest value, the nearer to the one before first. */
export function peaksOf(curve: Curve, width: number): readonly (readonly [at: number, value: number])[] {
  const peaks: (readonly [number, number])[] = [];
  for (const { at, low, high } of columnsOf(curve, 0, width)) {
    const last = peaks.at(-1)?.[1] ?? low;
    const [first, second] = Math.abs(low - last) <= Math.abs(high - last) ? [low, high] : [high, low];
    peaks.push([at, first]);
    if (second !== first) peaks.push([at, second]);
  }
  return peaks;
}

/** Every value of a curve as a column of its own, but for those that are not finite: for a picture finer than they are. */
export function everyValue(curve: Curve): readonly Column[] {
  const columns: Column[] = [];
  for (let i = 0; i < curve.size; i++) {
    const column = { at: curve.at[i]!, low: curve.low[i]!, mean: curve.mean[i]!, high: curve.high[i]! };
    if (Number.isFinite(column.low + column.mean + column.high)) columns.push(column);
  }
  return columns;
}

/** A curve without spread. */
export const plainCurve = (at: ArrayLike<number>, values: ArrayLike<number>): Curve => ({
  size: Math.min(at.length, values.length),
  at,
  low: values,
  mean: values,
  high: values,
});

/** Least and greatest finite value of several curves; null where there is none. */
export function extentOf(curves: readonly Curve[]): readonly [number, number] | null {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const curve of curves)
    for (let i = 0; i < curve.size; i++) {
      if (curve.low[i]! < low && Number.isFinite(curve.low[i]!)) low = curve.low[i]!;
      if (curve.high[i]! > high && Number.isFinite(curve.high[i]!)) high = curve.high[i]!;
    }
  return low <= high ? [low, high] : null;
}
