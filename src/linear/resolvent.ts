import { LuDecomposition, Matrix } from 'ml-matrix';
import { type Complex, complex } from '../numeric/complex.ts';

/**
 * (z I - A)^-1 b: the state of a sampled system driven by z^k, or of a continuous one by e^(z t). Solved as a real
 * system of twice the size.
 *
 * @param a n x n
 * @param b n numbers
 * @returns n numbers; null where z is an eigenvalue of A to rounding
 */
export function resolvent(a: Matrix, b: ArrayLike<number>, z: Complex): readonly Complex[] | null {
  const n = a.rows;
  const whole = Matrix.zeros(2 * n, 2 * n);
  const right = Matrix.zeros(2 * n, 1);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const re = (i === j ? z.re : 0) - a.get(i, j);
      whole.set(i, j, re);
      whole.set(n + i, n + j, re);
    }
    whole.set(i, n + i, -z.im);
    whole.set(n + i, i, z.im);
    right.set(i, 0, b[i]!);
  }
  const decomposition = new LuDecomposition(whole);
  if (decomposition.isSingular()) return null;
  const x = decomposition.solve(right);
  return Array.from({ length: n }, (_, i) => complex(x.get(i, 0), x.get(n + i, 0)));
}
