import { type BandedQr, bandedQr, inverseBand, rotateIn, solveBandedQr } from './banded-qr.ts';
import { sin } from './elementary.ts';

/** Rows of the third-difference penalty: -1 3 -3 1. */
const BANDWIDTH = 4;

/** Measured points and the uniform grid to bring them to. */
export interface WhittakerInput {
  /** Places of the points, not decreasing, in grid spacings from the first knot: 0 .. knots - 1. */
  readonly places: Float64Array;
  /** One array of values (as long as `places`) for each quantity to smooth with the same weights. */
  readonly values: readonly Float64Array[];
  /** >= 0; zero leaves the point out. */
  readonly weights: Float64Array;
  /** Knots of the grid, at least 4. */
  readonly knots: number;
  /** Penalty on squared third differences of knot values. */
  readonly lambda: number;
}

export interface WhittakerFit {
  /** For each quantity, its values at the knots. */
  readonly smooth: readonly Float64Array[];
  readonly factor: BandedQr;
}

/**
 * Smooths by penalised least squares of third order: minimises sum w (y - z(x))^2 + lambda sum (D3 z)^2 over the values z
 * at the knots of a uniform grid, z(x) between knots linear. With points on the knots it is the Whittaker smoother
 * (P. H. C. Eilers, Anal. Chem. 75 (2003) 3631: from memory); points between knots keep their own place instead of
 * being resampled first. Quadratics come back exactly. Solved by Givens QR of [sqrt(W) B; sqrt(lambda) D3], linear in
 * points and knots. At least three points at different places need a positive weight, else the result is not finite.
 */
export function smoothWhittaker(input: WhittakerInput): WhittakerFit {
  const { places, values, weights, knots, lambda } = input;
  const sides = values.length;
  const factor = bandedQr(knots, BANDWIDTH, sides);
  const row = new Float64Array(BANDWIDTH);
  const right = new Float64Array(sides);
  const stiffness = Math.sqrt(lambda);
  const penalise = (first: number): void => {
    row[0] = -stiffness;
    row[1] = 3 * stiffness;
    row[2] = -3 * stiffness;
    row[3] = stiffness;
    right.fill(0);
    rotateIn(factor, first, row, right);
  };
  let penalised = 0;
  const lastRow = knots - 3;
  for (let i = 0; i < places.length; i++) {
    const weight = weights[i]!;
    if (weight <= 0) continue;
    const cell = Math.min(Math.floor(places[i]!), knots - 2);
    while (penalised <= cell && penalised < lastRow) penalise(penalised++);
    const t = places[i]! - cell;
    const root = Math.sqrt(weight);
    row[0] = root * (1 - t);
    row[1] = root * t;
    row[2] = 0;
    row[3] = 0;
    for (let k = 0; k < sides; k++) right[k] = root * values[k]![i]!;
    rotateIn(factor, cell, row, right);
  }
  while (penalised < lastRow) penalise(penalised++);
  return { smooth: values.map((_, k) => solveBandedQr(factor, k)), factor };
}

/** Covariances of the knot values for unit weight: element (i, i + j), j = 0 .. 3, stands at [4 i + j]. */
export function whittakerCovariance(fit: WhittakerFit): Float64Array {
  return inverseBand(fit.factor);
}

/**
 * The penalty whose gain is one half at a wavelength: lambda = (2 sin(pi / n))^-6 for n grid spacings to the wavelength.
 * A wave of `m` spacings passes with gain 1 / (1 + lambda (2 sin(pi / m))^6).
 *
 * @param spacings wavelength in grid spacings, > 2
 */
export function lambdaOfWavelength(spacings: number): number {
  const d = 2 * sin(Math.PI / spacings);
  const cube = d * d * d;
  return 1 / (cube * cube);
}
