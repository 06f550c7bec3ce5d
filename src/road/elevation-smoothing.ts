import { medianOf, runningMedian, windowsWithin } from '../numeric/running-median.ts';
import { gradientAtKnots, gradientSdAtKnots } from '../numeric/uniform-gradient.ts';
import {
  lambdaOfWavelength,
  smoothWhittaker,
  type WhittakerFit,
  whittakerCovariance,
} from '../numeric/whittaker.ts';

/** Hampel's threshold, in estimated standard deviations. */
const HAMPEL_LIMIT = 3;
/**
 * Where the weights begin to fall and where they reach nothing, in standard deviations: Tukey's biweight behind a flat
 * core. The plain biweight with the same limit makes the grade of clean data 2.9 % worse (white noise), this 0.2 %.
 */
const CORE_LIMIT = 2.5;
const OUTLIER_LIMIT = 4.685;
/** From a median absolute deviation to a standard deviation of normal noise. */
const NORMAL_SCALE = 1.4826;
/** An outlier keeps this share of its weight, so that the next round can take it back. */
const LEAST_WEIGHT = 1e-8;
const ROUNDS = 12;
const SETTLED = 0.01;
/** Outliers are judged against their neighbours within this distance [m], and against this many at least on each side. */
const NEIGHBOURHOOD = 50;
const LEAST_NEIGHBOURS = 3;
/** A point can only be an outlier with so many neighbours on both sides within this many wavelengths: else it is all there is. */
const NEIGHBOURS_WITHIN = 2;

export interface ElevationInput {
  /** Places of the measured points [m], ascending, >= 0; what is masked or not the file's own is not among them. */
  readonly distance: Float64Array;
  /** [m] */
  readonly elevation: Float64Array;
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
 * Points weigh as the length they stand for, so that a wavelength means the same at any spacing; where there are none,
 * the third differences bridge. Outliers start from Hampel's filter on the raw elevation (three scaled median
 * deviations, over distance), then a biweight is iterated on residuals from which the running median is taken: a
 * spike leaves its neighbours, a hill that the smoother cannot follow does not, and keeps its weight. The noise is
 * estimated from the residuals' means by cell, so that ten correlated points a cell do not count as ten. Points too few or
 * too sparse to be judged by their neighbours are all believed.
 *
 * With fewer than three points the result is not finite.
 */
export function smoothElevation(input: ElevationInput): SmoothElevation {
  const { distance, elevation, grid, knots } = input;
  const size = distance.length;
  const lambda = lambdaOfWavelength(Math.max(input.wavelength / grid, 2));
  const places = distance.map((x) => Math.min(x / grid, knots - 1));
  const base = lengthWeights(distance, grid);
  const judged = judgedPoints(distance, NEIGHBOURS_WITHIN * input.wavelength);
  const weights = startWeights(input, base, judged);
  let fit = smoothWhittaker({ places, values: [elevation], weights, knots, lambda });
  let residual = residualOf(fit, places, elevation);
  const trust = new Float64Array(size).fill(1);
  const windows = windowsWithin(distance, NEIGHBOURHOOD, LEAST_NEIGHBOURS);
  const apart = new Float64Array(size);
  for (let round = 0; round < ROUNDS; round++) {
    const local = runningMedian(residual, windows.first, windows.last).median;
    for (let i = 0; i < size; i++) apart[i] = Math.abs(residual[i]! - local[i]!);
    const scale = Math.max(NORMAL_SCALE * medianOf(apart), input.noiseFloor);
    let change = 0;
    for (let i = 0; i < size; i++) {
      const next = judged[i] === 1 ? trustIn(apart[i]! / scale) : 1;
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
  const gradeSdPerNoise = gradientSdAtKnots(covariance, grid);
  const outliers: number[] = [];
  for (let i = 0; i < size; i++) if (trust[i] === LEAST_WEIGHT) outliers.push(i);
  return {
    elevation: smooth,
    grade: gradientAtKnots(smooth, grid),
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

/** Half the way to both neighbours, in grid spacings; a gap counts as the usual spacing. */
function lengthWeights(distance: Float64Array, grid: number): Float64Array {
  const steps = distance.slice(1).map((x, i) => x - distance[i]!);
  const usual = medianOf(steps);
  const most = Math.max(4 * usual, grid);
  const last = distance.length - 1;
  return distance.map((_, i) => {
    const before = steps[i === 0 ? 0 : i - 1]!;
    const after = steps[i === last ? last - 1 : i]!;
    return ((before > most ? usual : before) + (after > most ? usual : after)) / (2 * grid);
  });
}

/** 1 where a point has enough neighbours on both sides to be judged by; near an end, as many more on the other side. */
function judgedPoints(distance: Float64Array, reach: number): Uint8Array {
  const last = distance.length - 1;
  return Uint8Array.from(distance, (x, i) => {
    const before = Math.min(LEAST_NEIGHBOURS, i);
    const after = Math.min(LEAST_NEIGHBOURS, last - i);
    const low = i - before - (LEAST_NEIGHBOURS - after);
    const high = i + after + (LEAST_NEIGHBOURS - before);
    return low >= 0 && high <= last && x - distance[low]! <= reach && distance[high]! - x <= reach ? 1 : 0;
  });
}

function startWeights(input: ElevationInput, base: Float64Array, judged: Uint8Array): Float64Array {
  const { distance, elevation, noiseFloor } = input;
  const { first, last } = windowsWithin(distance, NEIGHBOURHOOD, LEAST_NEIGHBOURS);
  const { median, deviation } = runningMedian(elevation, first, last);
  return base.map((weight, i) => {
    const scale = Math.max(NORMAL_SCALE * deviation[i]!, noiseFloor);
    return judged[i] === 1 && Math.abs(elevation[i]! - median[i]!) > HAMPEL_LIMIT * scale
      ? weight * LEAST_WEIGHT
      : weight;
  });
}

function trustIn(deviations: number): number {
  if (deviations <= CORE_LIMIT) return 1;
  if (deviations >= OUTLIER_LIMIT) return LEAST_WEIGHT;
  const u = (deviations - CORE_LIMIT) / (OUTLIER_LIMIT - CORE_LIMIT);
  return Math.max((1 - u * u) * (1 - u * u), LEAST_WEIGHT);
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
 * Points not shut out count in full (`lengths`): with the fit's own weights the noise would look smaller.
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
