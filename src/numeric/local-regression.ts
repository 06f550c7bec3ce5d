import { medianOf } from './running-median.ts';

/** A smooth curve through scattered values: value and slope at each abscissa. */
export interface LocalFit {
  readonly value: Float64Array;
  readonly slope: Float64Array;
}

/** Points that a window has at least, where there are so many. */
const FEWEST = 5;
/** Rounds that look for outliers, and the residual that has half the weight of none, in median deviations (95 % efficient for normal scatter). */
const ROUNDS = 4;
const HALF = 2.385 * 1.4826;

/**
 * Robust locally weighted regression by parabolas: at each abscissa a parabola is fitted to the points within the window,
 * tricube weights over the distance (W. S. Cleveland, "Robust Locally Weighted Regression and Smoothing Scatterplots", J. Am.
 * Stat. Assoc. 74 (1979), from memory; the window is one of width instead of one of count) and Cauchy weights over the
 * residuals of the round before (P. W. Holland and R. E. Welsch, Commun. Stat. A6 (1977), from memory), which never take a
 * whole window away. A parabola and its slope come back exactly, whatever the spacing.
 *
 * @param x strictly increasing
 * @param y as long as x, finite
 * @param reach half-width of the window, in the unit of x, above 0: it grows where fewer than five points are within, and at
 *   the ends to the whole width on the one side that is left
 * @param grain least residual that may have half the weight, in the unit of y, 0 or more: exact values bend as well
 * @returns one value and slope a point; a single point has slope 0; two points the line through them
 */
export function localRegression(x: Float64Array, y: Float64Array, reach: number, grain: number): LocalFit {
  const size = x.length;
  const value = y.slice();
  const slope = new Float64Array(size);
  const trust = new Float64Array(size).fill(1);
  const width = widths(x, reach);
  for (let round = 0; ; round++) {
    fitAll(x, y, width, trust, value, slope);
    if (round === ROUNDS) return { value, slope };
    const off = Float64Array.from({ length: size }, (_, i) => Math.abs(y[i]! - value[i]!));
    const half = Math.max(HALF * medianOf(off), grain);
    if (!(half > 0)) return { value, slope };
    for (let i = 0; i < size; i++) {
      const r = off[i]! / half;
      trust[i] = 1 / (1 + r * r);
    }
  }
}

/** Half-width of the window of each point: wide enough for five of them, the outermost with a weight above 0; at the ends as wide in all as elsewhere. */
function widths(x: Float64Array, reach: number): Float64Array {
  const size = x.length;
  const most = Math.min(FEWEST, size);
  let first = 0;
  return Float64Array.from(x, (at, i) => {
    // The window of the nearest points moves forward with the point.
    while (first + most < size && (first + most <= i || x[first + most]! - at < at - x[first]!)) first++;
    const span = Math.max(at - x[first]!, x[first + most - 1]! - at);
    const toEnd = Math.min(at - x[0]!, x[size - 1]! - at);
    return Math.max(reach, 2 * reach - toEnd, span * 1.001);
  });
}

function fitAll(
  x: Float64Array,
  y: Float64Array,
  width: Float64Array,
  trust: Float64Array,
  value: Float64Array,
  slope: Float64Array,
): void {
  const size = x.length;
  for (let i = 0; i < size; i++) {
    const [at, h] = [x[i]!, width[i]!];
    let from = i;
    while (from > 0 && at - x[from - 1]! < h) from--;
    // Moments of u = (x - at) / h and of y about its own value: small numbers.
    let [s0, s1, s2, s3, s4, t0, t1, t2] = [0, 0, 0, 0, 0, 0, 0, 0];
    for (let k = from; k < size && x[k]! - at < h; k++) {
      const u = (x[k]! - at) / h;
      const a = Math.abs(u);
      const c = 1 - a * a * a;
      const w = c * c * c * trust[k]!;
      const z = y[k]! - y[i]!;
      s0 += w;
      s1 += w * u;
      s2 += w * u * u;
      s3 += w * u * u * u;
      s4 += w * u * u * u * u;
      t0 += w * z;
      t1 += w * u * z;
      t2 += w * u * u * z;
    }
    const [a, b] = parabola(s0, s1, s2, s3, s4, t0, t1, t2);
    value[i] = y[i]! + a;
    slope[i] = b / h;
  }
}

/** Value and slope at 0 of the weighted parabola by its normal equations; of the line, or the mean, where the points are too few for it. */
function parabola(
  s0: number,
  s1: number,
  s2: number,
  s3: number,
  s4: number,
  t0: number,
  t1: number,
  t2: number,
): readonly [value: number, slope: number] {
  const m0 = s2 * s4 - s3 * s3;
  const m1 = s1 * s4 - s2 * s3;
  const m2 = s1 * s3 - s2 * s2;
  const det = s0 * m0 - s1 * m1 + s2 * m2;
  if (det > 1e-9 * s0 * s2 * s4) {
    const a = (t0 * m0 - s1 * (t1 * s4 - t2 * s3) + s2 * (t1 * s3 - t2 * s2)) / det;
    const b = (s0 * (t1 * s4 - t2 * s3) - t0 * m1 + s2 * (s1 * t2 - s2 * t1)) / det;
    return [a, b];
  }
  const line = s0 * s2 - s1 * s1;
  if (line > 1e-9 * s0 * s2) return [(t0 * s2 - t1 * s1) / line, (s0 * t1 - s1 * t0) / line];
  return s0 > 0 ? [t0 / s0, 0] : [0, 0];
}
