import type { Matrix } from 'ml-matrix';
import { type Complex, complex } from '../numeric/complex.ts';

/**
 * (z I - A)^-1 b at one complex frequency after the other: the state of a sampled system driven by z^k, or of a continuous
 * one by e^(z t). Complex Gaussian elimination with partial pivoting (G. H. Golub, C. F. Van Loan, Matrix Computations,
 * section 3.4, section number from memory), over flat arrays that are used again.
 *
 * @param a n x n
 * @param b n numbers
 * @returns a function of z that gives n numbers, or null where z is an eigenvalue of A to rounding
 */
export function resolventOf(a: Matrix, b: ArrayLike<number>): (z: Complex) => readonly Complex[] | null {
  const n = a.rows;
  const minus = Float64Array.from(a.to1DArray(), (value) => -value);
  const re = new Float64Array(n * n);
  const im = new Float64Array(n * n);
  const xRe = new Float64Array(n);
  const xIm = new Float64Array(n);
  const solve = (): boolean => {
    for (let k = 0; k < n; k++) {
      if (!pivot(re, im, xRe, xIm, n, k)) return false;
      const size = re[k * n + k]! * re[k * n + k]! + im[k * n + k]! * im[k * n + k]!;
      const invRe = re[k * n + k]! / size;
      const invIm = -im[k * n + k]! / size;
      for (let i = k + 1; i < n; i++) {
        const at = i * n + k;
        const fRe = re[at]! * invRe - im[at]! * invIm;
        const fIm = re[at]! * invIm + im[at]! * invRe;
        if (fRe === 0 && fIm === 0) continue;
        for (let j = k + 1; j < n; j++) {
          re[i * n + j]! -= fRe * re[k * n + j]! - fIm * im[k * n + j]!;
          im[i * n + j]! -= fRe * im[k * n + j]! + fIm * re[k * n + j]!;
        }
        xRe[i]! -= fRe * xRe[k]! - fIm * xIm[k]!;
        xIm[i]! -= fRe * xIm[k]! + fIm * xRe[k]!;
      }
    }
    for (let i = n - 1; i >= 0; i--) {
      let sumRe = xRe[i]!;
      let sumIm = xIm[i]!;
      for (let j = i + 1; j < n; j++) {
        sumRe -= re[i * n + j]! * xRe[j]! - im[i * n + j]! * xIm[j]!;
        sumIm -= re[i * n + j]! * xIm[j]! + im[i * n + j]! * xRe[j]!;
      }
      const dRe = re[i * n + i]!;
      const dIm = im[i * n + i]!;
      const size = dRe * dRe + dIm * dIm;
      xRe[i] = (sumRe * dRe + sumIm * dIm) / size;
      xIm[i] = (sumIm * dRe - sumRe * dIm) / size;
    }
    return true;
  };
  return (z) => {
    re.set(minus);
    im.fill(0);
    for (let i = 0; i < n; i++) {
      re[i * n + i]! += z.re;
      im[i * n + i] = z.im;
      xRe[i] = b[i]!;
      xIm[i] = 0;
    }
    return solve() ? Array.from(xRe, (value, i) => complex(value, xIm[i]!)) : null;
  };
}

/** Brings the largest entry of column k on the diagonal; false where all of them are 0. */
function pivot(
  re: Float64Array,
  im: Float64Array,
  xRe: Float64Array,
  xIm: Float64Array,
  n: number,
  k: number,
): boolean {
  let best = k;
  let most = 0;
  for (let i = k; i < n; i++) {
    const size = Math.abs(re[i * n + k]!) + Math.abs(im[i * n + k]!);
    if (size > most) {
      most = size;
      best = i;
    }
  }
  if (most === 0) return false;
  if (best === k) return true;
  for (let j = k; j < n; j++) {
    swap(re, best * n + j, k * n + j);
    swap(im, best * n + j, k * n + j);
  }
  swap(xRe, best, k);
  swap(xIm, best, k);
  return true;
}

function swap(values: Float64Array, i: number, j: number): void {
  const kept = values[i]!;
  values[i] = values[j]!;
  values[j] = kept;
}

/** The same at one frequency. */
export function resolvent(a: Matrix, b: ArrayLike<number>, z: Complex): readonly Complex[] | null {
  return resolventOf(a, b)(z);
}
