import type { Matrix } from 'ml-matrix';

/** A sweep that takes less than this off the norms is the last one. */
const WORTH = 0.95;
const SWEEPS = 100;

/**
 * A matrix with the same eigenvalues whose rows and columns are of like size: D^-1 A D with powers of 2 in D, so that
 * nothing is rounded (B. N. Parlett, C. Reinsch, Numerische Mathematik 13 (1969) 293-304). Without it a companion matrix of
 * poles from 1e-4 to 1e6 gives the small one to 1e-5 only.
 *
 * @param matrix square
 * @returns a new matrix
 */
export function balance(matrix: Matrix): Matrix {
  const a = matrix.clone();
  const n = a.rows;
  for (let sweep = 0, changed = true; changed && sweep < SWEEPS; sweep++) {
    changed = false;
    for (let i = 0; i < n; i++) {
      let column = 0;
      let row = 0;
      for (let j = 0; j < n; j++) {
        if (j === i) continue;
        column += Math.abs(a.get(j, i));
        row += Math.abs(a.get(i, j));
      }
      if (!(column > 0 && row > 0 && Number.isFinite(column + row))) continue;
      const before = column + row;
      let factor = 1;
      while (column < row / 2) {
        factor *= 2;
        column *= 2;
        row /= 2;
      }
      while (column >= row * 2) {
        factor /= 2;
        column /= 2;
        row *= 2;
      }
      if (factor === 1 || column + row >= WORTH * before) continue;
      changed = true;
      a.mulRow(i, 1 / factor);
      a.mulColumn(i, factor);
    }
  }
  return a;
}
