import { Matrix } from 'ml-matrix';
import { addComplex, type Complex, complex, expComplex, multiplyComplex } from '../numeric/complex.ts';
import { eigenvalues } from './eigenvalues.ts';
import { holdInput } from './hold-input.ts';
import { polynomialOfRoots } from './polynomial.ts';
import { resolventOf } from './resolvent.ts';
import type { TransferFunction } from './transfer-function.ts';

/** dx/dt = A x + b u(t - delay), y = c x + d u(t - delay). One input, one output. */
export interface StateSpace {
  /** n x n */
  readonly a: Matrix;
  /** n numbers each. */
  readonly b: readonly number[];
  readonly c: readonly number[];
  readonly d: number;
  /** [s], >= 0 */
  readonly delay: number;
}

/** x(k + 1) = phi x(k) + gamma u(k), y(k) = c x(k) + d u(k), every `sample` [s]. */
export interface SampledSystem {
  readonly phi: Matrix;
  readonly gamma: readonly number[];
  readonly c: readonly number[];
  readonly d: number;
  readonly sample: number;
}

/**
 * A transfer function in companion form.
 *
 * @throws RangeError where the numerator is of a higher degree
 */
export function stateSpaceOf({ numerator, denominator, delay }: TransferFunction): StateSpace {
  const below = denominator.slice(denominator.findIndex((c) => c !== 0));
  const above = numerator.slice(
    Math.max(
      0,
      numerator.findIndex((c) => c !== 0),
    ),
  );
  const n = below.length - 1;
  if (above.length > below.length) throw new RangeError('more zeros than poles: no state space');
  const lead = below[0]!;
  const padded = [...new Array<number>(n + 1 - above.length).fill(0), ...above].map((c) => c / lead);
  const monic = below.map((c) => c / lead);
  const d = padded[0]!;
  const a = Matrix.zeros(n, n);
  for (let j = 0; j < n; j++) {
    a.set(0, j, -monic[j + 1]!);
    if (j > 0) a.set(j, j - 1, 1);
  }
  const b = Array.from({ length: n }, (_, i) => (i === 0 ? 1 : 0));
  return { a, b, c: monic.slice(1).map((m, i) => padded[i + 1]! - d * m), d, delay };
}

/** The response at complex frequencies; null at a pole. */
export function responseOf({ a, b, c, d, delay }: StateSpace): (s: Complex) => Complex | null {
  const stateAt = resolventOf(a, b);
  return (s) => {
    const state = stateAt(s);
    if (state === null) return null;
    const value = output(c, d, state);
    return delay === 0 ? value : multiplyComplex(value, expComplex(complex(-delay * s.re, -delay * s.im)));
  };
}

/** The same of a sampled system, at places of the z plane. */
export function sampledResponseOf({ phi, gamma, c, d }: SampledSystem): (z: Complex) => Complex | null {
  const stateAt = resolventOf(phi, gamma);
  return (z) => {
    const state = stateAt(z);
    return state === null ? null : output(c, d, state);
  };
}

const output = (c: readonly number[], d: number, state: readonly Complex[]): Complex =>
  state.reduce((sum, { re, im }, i) => addComplex(sum, complex(c[i]! * re, c[i]! * im)), complex(d));

/** Terms of a numerator that are smaller than this beside what they are the difference of are 0. */
const CANCELLED = 1e-11;

/**
 * The transfer function by the recursion of Leverrier and Faddeev (F. R. Gantmacher, The Theory of Matrices, vol. 1,
 * chapter 4, from memory), with the denominator from the eigenvalues: c adj(s I - A) b / det(s I - A).
 */
export function transferFunctionOf({ a, b, c, d, delay }: StateSpace): TransferFunction {
  const n = a.rows;
  const denominator = polynomialOfRoots(eigenvalues(a));
  const numerator = [d];
  let vector = [...b];
  // adj(s I - A) b = sum of s^(n - 1 - k) v_k,  v_0 = b,  v_k = A v_(k-1) + p_k b.
  for (let k = 0; k < n; k++) {
    const terms = vector.map((value, i) => c[i]! * value);
    const sum = terms.reduce((total, term) => total + term, 0) + d * denominator[k + 1]!;
    const size = terms.reduce((total, term) => total + Math.abs(term), Math.abs(d * denominator[k + 1]!));
    numerator.push(Math.abs(sum) <= CANCELLED * size ? 0 : sum);
    const moved = vector;
    vector = vector.map((_, i) => {
      let next = denominator[k + 1]! * b[i]!;
      for (let j = 0; j < n; j++) next += a.get(i, j) * moved[j]!;
      return next;
    });
  }
  return { numerator, denominator, delay };
}

/**
 * The exact zero-order-hold equivalent of a system whose dead time is any length: whole samples wait in a queue, the
 * part of a sample splits the input over two of them (K. J. Astrom, B. Wittenmark, Computer-Controlled Systems, section on
 * systems with time delay, from memory).
 *
 * State: x, then the commands that are on their way, the oldest first.
 *
 * @param sample [s], > 0
 */
export function holdSystem({ a, b, c, d, delay }: StateSpace, sample: number): SampledSystem {
  const n = a.rows;
  const late = delay / sample;
  // A delay that is whole but for rounding is whole.
  const back = Math.ceil(late - 1e-9);
  const share = Math.max(0, back - late);
  const column = Matrix.columnVector(b);
  const whole = holdInput(a, column, sample);
  const after = holdInput(a, column, share * sample);
  // Over a sample the older command acts first, then for share the newer one.
  const newer = after.gamma.getColumn(0);
  const rest = holdInput(a, column, (1 - share) * sample);
  const older = after.phi.mmul(rest.gamma).getColumn(0);
  if (back === 0) return { phi: whole.phi, gamma: whole.gamma.getColumn(0), c, d, sample };
  const size = n + back;
  const phi = Matrix.zeros(size, size);
  phi.setSubMatrix(whole.phi, 0, 0);
  const gamma = new Array<number>(size).fill(0);
  for (let i = 0; i < n; i++) {
    phi.set(i, n, older[i]!);
    if (back > 1) phi.set(i, n + 1, newer[i]!);
    else gamma[i] = newer[i]!;
  }
  for (let k = 0; k + 1 < back; k++) phi.set(n + k, n + k + 1, 1);
  gamma[size - 1] = 1;
  const out = [...c, ...new Array<number>(back).fill(0)];
  // At the sample itself the older command is still in force.
  out[n] = d;
  return { phi, gamma, c: out, d: 0, sample };
}
