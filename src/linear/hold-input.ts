import { Matrix } from 'ml-matrix';
import { matrixExponential } from '../numeric/matrix-exponential.ts';

/** x(t + h) = phi x(t) + gamma u while the input u is held. */
export interface HeldSystem {
  readonly phi: Matrix;
  readonly gamma: Matrix;
}

/**
 * Exact solution of dx/dt = A x + B u over a time with the input held, by the exponential of [A B; 0 0] (C. F. Van
 * Loan, IEEE Trans. Automatic Control 23 (1978) 395-404). With the sample time it is the zero-order-hold equivalent
 * (K. J. Astrom, B. Wittenmark, Computer-Controlled Systems).
 *
 * @param a n x n
 * @param b n x m
 * @param time [s], >= 0
 */
export function holdInput(a: Matrix, b: Matrix, time: number): HeldSystem {
  const n = a.rows;
  const m = b.columns;
  const whole = Matrix.zeros(n + m, n + m);
  whole.setSubMatrix(Matrix.mul(a, time), 0, 0);
  whole.setSubMatrix(Matrix.mul(b, time), 0, n);
  const result = matrixExponential(whole);
  return { phi: result.subMatrix(0, n - 1, 0, n - 1), gamma: result.subMatrix(0, n - 1, n, n + m - 1) };
}
