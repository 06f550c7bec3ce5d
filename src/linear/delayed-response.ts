import { Matrix, solve } from 'ml-matrix';
import { matrixExponential } from '../numeric/matrix-exponential.ts';
import { holdInput } from './hold-input.ts';

/**
 * A loop at rest into which constant pushes come at time 0, with dead time in its feedback:
 *
 *     dx/dt = A x + b w(t - delay) + push,   w = feedback x + reference,   w = 0 before time 0
 */
export interface DelayedLoop {
  /** n x n */
  readonly a: Matrix;
  /** n numbers each. */
  readonly b: readonly number[];
  readonly push: readonly number[];
  readonly feedback: readonly number[];
  readonly reference: number;
  /** [s], >= 0 */
  readonly delay: number;
}

/** Nodes through which w is interpolated. */
const NODES = 6;

/**
 * One state of the loop at every `spacing` from time 0. Without dead time the solution is exact. With it, it goes by the
 * method of steps (R. Bellman, K. L. Cooke, Differential-Difference Equations (1963), chapter 3, from memory): a whole
 * number of spacings makes a dead time, within which w has no corner and is a polynomial of degree 5 through the six
 * nearest samples, and that polynomial is integrated exactly; the error falls with the 6th power of the spacing.
 *
 * @param output place in the state
 * @param duration [s]
 * @param spacing [s], > 0; with dead time the next shorter one of which at least 6 make one
 */
export function respondDelayed(
  loop: DelayedLoop,
  output: number,
  duration: number,
  spacing: number,
): { readonly values: Float64Array; readonly spacing: number } {
  const { delay } = loop;
  if (delay === 0) return respondAtOnce(loop, output, duration, spacing);
  const perDelay = Math.max(NODES, Math.ceil(delay / spacing - 1e-9));
  const step = delay / perDelay;
  const { a, push, feedback, reference } = loop;
  const n = a.rows;
  const { phi, gamma } = holdInput(a, Matrix.columnVector(push), step);
  const weights = Array.from({ length: NODES - 1 }, (_, offset) => stepWeights(loop, step, offset));
  const count = Math.ceil(duration / step - 1e-9);
  const values = new Float64Array(count + 1);
  const w = new Float64Array(count + 1);
  let x = new Float64Array(n);
  let next = new Float64Array(n);
  w[0] = reference;
  for (let k = 0; k < count; k++) {
    // The dead time before: within its segment, whose ends are corners of w.
    const from = k - perDelay;
    const inSegment = from - Math.floor(from / perDelay) * perDelay;
    const offset = Math.min(Math.max(inSegment, 0), perDelay - 1);
    const first = Math.min(Math.max(offset - 2, 0), perDelay + 1 - NODES);
    const weight = weights[offset - first]!;
    for (let i = 0; i < n; i++) {
      let sum = gamma.get(i, 0);
      for (let j = 0; j < n; j++) sum += phi.get(i, j) * x[j]!;
      if (from >= 0) for (let j = 0; j < NODES; j++) sum += weight.get(i, j) * w[from - offset + first + j]!;
      next[i] = sum;
    }
    [x, next] = [next, x];
    values[k + 1] = x[output]!;
    w[k + 1] = x.reduce((sum, value, j) => sum + feedback[j]! * value, reference);
  }
  return { values, spacing: step };
}

/** What each of the six samples adds to the state over a step that begins at the sample `offset`. */
function stepWeights({ a, b }: DelayedLoop, step: number, offset: number): Matrix {
  const n = a.rows;
  // A chain of integrators makes the polynomial from its derivatives at the beginning of the step.
  const chain = Matrix.zeros(n + NODES, n + NODES);
  chain.setSubMatrix(Matrix.mul(a, step), 0, 0);
  b.forEach((value, i) => {
    chain.set(i, n, value * step);
  });
  for (let p = 0; p + 1 < NODES; p++) chain.set(n + p, n + p + 1, 1);
  const byDerivative = matrixExponential(chain).subMatrix(0, n - 1, n, n + NODES - 1);
  const vandermonde = Matrix.zeros(NODES, NODES);
  for (let j = 0; j < NODES; j++)
    for (let p = 0, term = 1; p < NODES; p++) {
      vandermonde.set(j, p, term);
      term *= (j - offset) / (p + 1);
    }
  return byDerivative.mmul(solve(vandermonde, Matrix.eye(NODES)));
}

function respondAtOnce(
  { a, b, push, feedback, reference }: DelayedLoop,
  output: number,
  duration: number,
  spacing: number,
): { readonly values: Float64Array; readonly spacing: number } {
  const n = a.rows;
  const closed = a.clone();
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) closed.set(i, j, a.get(i, j) + b[i]! * feedback[j]!);
  const constant = Matrix.columnVector(push.map((value, i) => value + b[i]! * reference));
  const { phi, gamma } = holdInput(closed, constant, spacing);
  const count = Math.ceil(duration / spacing - 1e-9);
  const values = new Float64Array(count + 1);
  let x = Matrix.zeros(n, 1);
  for (let k = 1; k <= count; k++) {
    x = phi.mmul(x).add(gamma);
    values[k] = x.get(output, 0);
  }
  return { values, spacing };
}
