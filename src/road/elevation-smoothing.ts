import { medianOf, runningMedian, windowsWithin } from '../numeric/running-median.ts';
import {
  lambdaOfWavelength,
  smoothWhittaker,
  type WhittakerFit,
  whittakerCovariance,
} from '../numeric/whittaker.ts';
import type { MaskedStretch } from './road.ts';

/** Hampel's threshold, in estimated standard deviations, and the biweight's (95 % efficient on normal noise). */
const HAMPEL_LIMIT = 3;
const BIWEIGHT_LIMIT = 4.685;
/** From a median absolute deviation to a standard deviation of normal noise. */
const NORMAL_SCALE = 1.4826;
/** An outlier keeps this share of its weight, so that the next round can take it back. */
const LEAST_WEIGHT = 1e-8;
const ROUNDS = 12;
const SETTLED = 0.01;
/** Outliers are judged against their neighbours within this distance [m], and against this many at least on each side. */
const NEIGHBOURHOOD = 50;
const LEAST_NEIGHBOURS = 3;

export interface ElevationInput {
  /** Places of the points [m], ascending from 0. */
  readonly distance: Float64Array;
  /** [m] */
  readonly elevation: Float64Array;
  readonly masks: readonly MaskedStretch[];
  /** Spacing [m] and number of the knots, at least 4, which reach from 0 to the last point or past it. */
  readonly grid: number;
  readonly knots: number;
  /** Wavelength at which the gain is one half [m]. */
  readonly wavelength: number;
  /** Smallest believable scale of the noise [m]. */
  readonly noiseFloor: number;
}

export interface SmoothElevation {
  /** At the knots: elevation [m], grade, and the grade's s.d. for unit noise of the elevation [1/m]. */
  readonly elevation: Float64Array;
  readonly grade: Float64Array;
  readonly gradeSdPerNoise: Float64Array;
  /** The same s.d. far from ends, gaps and masks: the least along the road. */
  readonly leastGradeSdPerNoise: number;
  /** S.d. of the noise of a knot's elevation, from the residuals [m]. */
  readonly noiseSd: number;
  readonly lambda: number;
  /** Indices of points that the robust weights shut out. */
  readonly outliers: readonly number[];
}

/**
 * Robust penalised smoothing of third order, with the grade and its uncertainty from one factor.
 *
 * Points weigh as the length they stand for, so that a wavelength means the same at any spacing; points in a mask weigh
 * nothing and are bridged. Outliers start from Hampel's filter on the raw elevation (three scaled median deviations,
 * over distance), then Tukey's biweight is iterated on residuals from which the running median is taken: a spike leaves
 * its neighbours, a hill that the smoother cannot follow does not, and keeps its weight. The noise is estimated from
 * the residuals' means by cell, so that ten correlated points a cell do not count as ten.
 *
 * At least three points outside of masks, else the result is not finite.
 */
export function smoothElevation(input: ElevationInput): SmoothElevation {
  const { distance, elevation, grid, knots } = input;
  const size = distance.length;
  const lambda = lambdaOfWavelength(Math.max(input.wavelength / grid, 2));
  const places = distance.map((x) => Math.min(x / grid, knots - 1));
  const base = lengthWeights(distance, grid, input.masks);
  const weights = startWeights(input, base);
  let fit = smoothWhittaker({ places, values: [elevation], weights, knots, lambda });
  let residual = residualOf(fit, places, elevation);
  const trust = new Float64Array(size).fill(1);
  const windows = windowsWithin(distance, NEIGHBOURHOOD, LEAST_NEIGHBOURS);
  for (let round = 0; round < ROUNDS; round++) {
    const local = runningMedian(residual, windows.first, windows.last).median;
    const apart = residual.map((r, i) => Math.abs(r - local[i]!));
    const scale = Math.max(NORMAL_SCALE * medianOf(apart.filter((_, i) => base[i]! > 0)), input.noiseFloor);
    let change = 0;
    for (let i = 0; i < size; i++) {
      const next = biweight(apart[i]! / (BIWEIGHT_LIMIT * scale));
      change = Math.max(change, Math.abs(next - trust[i]!));
      trust[i] = next;
      weights[i] = base[i]! * next;
    }
    if (change < SETTLED && round > 0) break;
    fit = smoothWhittaker({ places, values: [elevation], weights, knots, lambda });
    residual = residualOf(fit, places, elevation);
  }
  const covariance = whittakerCovariance(fit);
  const smooth = fit.smooth[0]!;
  const gradeSdPerNoise = gradeSdOf(covariance, knots, grid);
  const outliers: number[] = [];
  for (let i = 0; i < size; i++) if (base[i]! > 0 && trust[i] === LEAST_WEIGHT) outliers.push(i);
  return {
    elevation: smooth,
    grade: gradeOf(smooth, grid),
    gradeSdPerNoise,
    leastGradeSdPerNoise: gradeSdPerNoise.reduce(
      (least, sd) => Math.min(least, sd),
      Number.POSITIVE_INFINITY,
    ),
    noiseSd: noiseOf(
      residual,
      places,
      base.map((weight, i) => (trust[i] === LEAST_WEIGHT ? 0 : weight)),
      weights,
      covariance,
      knots,
    ),
    lambda,
    outliers,
  };
}

/** Slope at the knots of a uniform grid: central differences, at the ends the slope of the parabola through three knots. */
export function gradeOf(elevation: Float64Array, grid: number): Float64Array {
  const last = elevation.length - 1;
  const grade = new Float64Array(last + 1);
  for (let i = 1; i < last; i++) grade[i] = (elevation[i + 1]! - elevation[i - 1]!) / (2 * grid);
  grade[0] = (4 * elevation[1]! - 3 * elevation[0]! - elevation[2]!) / (2 * grid);
  grade[last] = (3 * elevation[last]! - 4 * elevation[last - 1]! + elevation[last - 2]!) / (2 * grid);
  return grade;
}

/** S.d. of `gradeOf` for a covariance band of unit noise. */
function gradeSdOf(covariance: Float64Array, knots: number, grid: number): Float64Array {
  const at = (i: number, j: number): number => covariance[4 * i + j]!;
  const sd = new Float64Array(knots);
  const last = knots - 1;
  for (let i = 1; i < last; i++) sd[i] = at(i + 1, 0) - 2 * at(i - 1, 2) + at(i - 1, 0);
  const end = (near: number, middle: number, far: number, a: number, b: number, c: number): number =>
    9 * near + 16 * middle + far - 24 * a + 6 * b - 8 * c;
  sd[0] = end(at(0, 0), at(1, 0), at(2, 0), at(0, 1), at(0, 2), at(1, 1));
  sd[last] = end(
    at(last, 0),
    at(last - 1, 0),
    at(last - 2, 0),
    at(last - 1, 1),
    at(last - 2, 2),
    at(last - 2, 1),
  );
  return sd.map((variance) => Math.sqrt(Math.max(0, variance)) / (2 * grid));
}

/** Half the way to both neighbours, in grid spacings; a gap counts no more than the usual spacing; masked points weigh nothing. */
function lengthWeights(distance: Float64Array, grid: number, masks: readonly MaskedStretch[]): Float64Array {
  const steps = distance.slice(1).map((x, i) => x - distance[i]!);
  const most = Math.max(4 * medianOf(steps), grid);
  const last = distance.length - 1;
  return distance.map((x, i) => {
    if (masks.some((mask) => x >= mask.from && x <= mask.to)) return 0;
    const before = Math.min(steps[i === 0 ? 0 : i - 1]!, most);
    const after = Math.min(steps[i === last ? last - 1 : i]!, most);
    return (before + after) / (2 * grid);
  });
}

function startWeights(input: ElevationInput, base: Float64Array): Float64Array {
  const { distance, elevation, noiseFloor } = input;
  const { first, last } = windowsWithin(distance, NEIGHBOURHOOD, LEAST_NEIGHBOURS);
  const { median, deviation } = runningMedian(elevation, first, last);
  return base.map((weight, i) => {
    const scale = Math.max(NORMAL_SCALE * deviation[i]!, noiseFloor);
    return Math.abs(elevation[i]! - median[i]!) > HAMPEL_LIMIT * scale ? weight * LEAST_WEIGHT : weight;
  });
}

function biweight(u: number): number {
  if (u >= 1) return LEAST_WEIGHT;
  const root = 1 - u * u;
  return Math.max(root * root, LEAST_WEIGHT);
}

function residualOf(fit: WhittakerFit, places: Float64Array, elevation: Float64Array): Float64Array {
  const smooth = fit.smooth[0]!;
  return elevation.map((z, i) => {
    const cell = Math.min(Math.floor(places[i]!), smooth.length - 2);
    return z - smooth[cell]! - (smooth[cell + 1]! - smooth[cell]!) * (places[i]! - cell);
  });
}

/**
 * Weighted sum of squared cell means of the residuals, over the cells less the degrees of freedom that the fit took.
 * Points not shut out count in full (`lengths`): with the fit's own weights the biweight would make noise look smaller.
 */
function noiseOf(
  residual: Float64Array,
  places: Float64Array,
  lengths: Float64Array,
  weights: Float64Array,
  covariance: Float64Array,
  knots: number,
): number {
  const weight = new Float64Array(knots);
  const moment = new Float64Array(knots);
  let taken = 0;
  for (let i = 0; i < residual.length; i++) {
    const cell = Math.min(Math.floor(places[i]!), knots - 2);
    const t = places[i]! - cell;
    const nearest = t < 0.5 ? cell : cell + 1;
    weight[nearest]! += lengths[i]!;
    moment[nearest]! += lengths[i]! * residual[i]!;
    const spread =
      (1 - t) * (1 - t) * covariance[4 * cell]! +
      2 * t * (1 - t) * covariance[4 * cell + 1]! +
      t * t * covariance[4 * cell + 4]!;
    taken += weights[i]! * spread;
  }
  let cells = 0;
  let sum = 0;
  for (let k = 0; k < knots; k++) {
    if (weight[k]! <= 1e-6) continue;
    cells++;
    sum += (moment[k]! * moment[k]!) / weight[k]!;
  }
  return Math.sqrt(sum / Math.max(cells - taken, 1));
}
