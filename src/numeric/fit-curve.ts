import { type LeastSquares, leastSquares } from './least-squares.ts';

/** A model with unknowns in it, against data. */
export interface CurveModel {
  /** Data less model, a number a sample, into `residual`; their derivatives of the model by each unknown into `columns`. */
  readonly evaluate: (
    unknowns: Float64Array,
    residual: Float64Array,
    columns: readonly Float64Array[],
  ) => void;
  readonly samples: number;
  /** Least value of each unknown. */
  readonly least: readonly number[];
}

/** A nonlinear least-squares fit. */
export interface CurveFit {
  /** `not_settled`: the steps did not become small; `dependent`: the data do not tell the unknowns apart. */
  readonly status: 'settled' | 'not_settled' | 'dependent';
  readonly unknowns: Float64Array;
  /** Of the model made linear at the end: its residuals are those of the curve. */
  readonly linear: LeastSquares;
  readonly columns: readonly Float64Array[];
}

const MOST_ROUNDS = 100;
const MOST_HALVINGS = 30;
const SETTLED = 1e-9;

/**
 * Least squares of a curve by Gauss-Newton steps, halved until the sum of squares falls (G. A. F. Seber, C. J. Wild,
 * Nonlinear Regression, 1989, section 14.1, from memory).
 *
 * @param start of the unknowns, from which the way leads down to the wanted minimum
 */
export function fitCurve(model: CurveModel, start: Float64Array): CurveFit {
  const { samples, least } = model;
  let unknowns = start.slice();
  const columns = Array.from(start, () => new Float64Array(samples));
  const residual = new Float64Array(samples);
  const scratch = Array.from(start, () => new Float64Array(samples));
  const trial = new Float64Array(samples);
  const squares = (values: Float64Array): number => values.reduce((sum, x) => sum + x * x, 0);
  model.evaluate(unknowns, residual, columns);
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const linear = leastSquares(columns, residual);
    if (linear.status === 'dependent') return { status: 'dependent', unknowns, linear, columns };
    const before = squares(residual);
    let share = 1;
    let next = unknowns;
    for (let halving = 0; halving < MOST_HALVINGS; halving++, share /= 2) {
      next = unknowns.map((x, j) => Math.max(x + share * linear.coefficients[j]!, least[j]!));
      model.evaluate(next, trial, scratch);
      if (squares(trial) <= before) break;
    }
    const settled = next.every((x, j) => Math.abs(x - unknowns[j]!) <= SETTLED * (1e-3 + Math.abs(x)));
    if (squares(trial) <= before) unknowns = next;
    model.evaluate(unknowns, residual, columns);
    if (settled || squares(trial) > before)
      return {
        status: 'settled',
        unknowns,
        linear: { ...leastSquares(columns, residual), residuals: residual.slice() },
        columns,
      };
  }
  return { status: 'not_settled', unknowns, linear: leastSquares(columns, residual), columns };
}
