import { EigenvalueDecomposition, type Matrix } from 'ml-matrix';
import { type Complex, complex, logComplex } from '../numeric/complex.ts';
import { balance } from './balance.ts';

/**
 * Eigenvalues of a real square matrix (balanced, then Hessenberg form and QR steps), conjugates next to each other. An
 * m-fold eigenvalue is only good to the m-th root of the rounding error; the mean of the m is good.
 */
export function eigenvalues(matrix: Matrix): readonly Complex[] {
  const { realEigenvalues, imaginaryEigenvalues } = new EigenvalueDecomposition(balance(matrix));
  return realEigenvalues.map((re, i) => complex(re, imaginaryEigenvalues[i]!));
}

/**
 * Poles in the s plane that belong to poles of a sampled system, s = log(z) / h, in rising order of |s|. Poles at z = 0
 * (pure delays) have no place there and are left out.
 *
 * @param sample h [s]
 */
export function continuousPoles(poles: readonly Complex[], sample: number): readonly Complex[] {
  const size = (s: Complex): number => s.re * s.re + s.im * s.im;
  return poles
    .filter((z) => size(z) > 1e-16)
    .map((z) => {
      const s = logComplex(z);
      return complex(s.re / sample, s.im / sample);
    })
    .sort((p, q) => size(p) - size(q));
}
