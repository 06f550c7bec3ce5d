/**
 * The triangular factor of a tall banded matrix, built row by row.
 * Element (i, i + j) of R stands at `factor[i * bandwidth + j]`, j = 0 .. bandwidth - 1; `right` holds Q'b, `sides` numbers a row.
 */
export interface BandedQr {
  /** Unknowns. */
  readonly size: number;
  /** Elements of a row of R: one more than its superdiagonals. */
  readonly bandwidth: number;
  /** Right-hand sides solved together. */
  readonly sides: number;
  readonly factor: Float64Array;
  readonly right: Float64Array;
}

/** An empty factor for `size` unknowns, rows `bandwidth` wide and `sides` right-hand sides; rows come by `rotateIn`. */
export function bandedQr(size: number, bandwidth: number, sides: number): BandedQr {
  return {
    size,
    bandwidth,
    sides,
    factor: new Float64Array(size * bandwidth),
    right: new Float64Array(size * sides),
  };
}

/**
 * Adds one equation to the least-squares system by Givens rotations (Golub and Van Loan, Matrix Computations, 4th ed.,
 * section 5.2.5: from memory), which never form the normal equations and so keep the digits that a banded Cholesky
 * factorisation loses on fine grids.
 *
 * Linear time needs the rows in order of their first column: a row then meets at most `bandwidth` rows of R.
 *
 * @param qr changed in place
 * @param first column of row[0], 0 <= first; elements that would stand past the last column must be zero
 * @param row `bandwidth` coefficients; destroyed
 * @param right `sides` right-hand sides; destroyed
 */
export function rotateIn(qr: BandedQr, first: number, row: Float64Array, right: Float64Array): void {
  const { size, bandwidth, sides, factor } = qr;
  const last = bandwidth - 1;
  for (let i = first; i < size; i++) {
    const below = row[0]!;
    if (below !== 0) {
      const at = i * bandwidth;
      const above = factor[at]!;
      if (above === 0) {
        for (let j = 0; j < bandwidth; j++) factor[at + j] = row[j]!;
        for (let k = 0; k < sides; k++) qr.right[i * sides + k] = right[k]!;
        return;
      }
      const length = Math.sqrt(above * above + below * below);
      const c = above / length;
      const s = below / length;
      factor[at] = length;
      for (let j = 1; j < bandwidth; j++) {
        const a = factor[at + j]!;
        const b = row[j]!;
        factor[at + j] = c * a + s * b;
        row[j] = c * b - s * a;
      }
      for (let k = 0; k < sides; k++) {
        const a = qr.right[i * sides + k]!;
        const b = right[k]!;
        qr.right[i * sides + k] = c * a + s * b;
        right[k] = c * b - s * a;
      }
    }
    let rest = false;
    for (let j = 0; j < last; j++) {
      row[j] = row[j + 1]!;
      if (row[j] !== 0) rest = true;
    }
    row[last] = 0;
    if (!rest) return;
  }
}

/** Solves R x = Q'b for the right-hand side `side` by back substitution; `size` values. A zero on the diagonal gives non-finite values. */
export function solveBandedQr(qr: BandedQr, side: number): Float64Array {
  const { size, bandwidth, sides, factor, right } = qr;
  const x = new Float64Array(size);
  for (let i = size - 1; i >= 0; i--) {
    let sum = right[i * sides + side]!;
    const end = Math.min(bandwidth, size - i);
    for (let j = 1; j < end; j++) sum -= factor[i * bandwidth + j]! * x[i + j]!;
    x[i] = sum / factor[i * bandwidth]!;
  }
  return x;
}

/**
 * The band of (R'R)^-1, the covariance of the solution for unit weight, in linear time: element (i, i + j) stands at
 * [i * bandwidth + j]. Backward recursion R Z = R^-T (Takahashi, Fagan and Chen 1973; for smoothing splines Hutchinson
 * and de Hoog, Numer. Math. 47 (1985) 99-106: both from memory).
 */
export function inverseBand(qr: BandedQr): Float64Array {
  const { size, bandwidth, factor } = qr;
  const z = new Float64Array(size * bandwidth);
  for (let i = size - 1; i >= 0; i--) {
    const at = i * bandwidth;
    const end = Math.min(bandwidth, size - i);
    const pivot = factor[at]!;
    for (let j = end - 1; j >= 0; j--) {
      let sum = j === 0 ? 1 / pivot : 0;
      for (let k = 1; k < end; k++) {
        const low = Math.min(k, j);
        sum -= factor[at + k]! * z[(i + low) * bandwidth + Math.abs(k - j)]!;
      }
      z[at + j] = sum / pivot;
    }
  }
  return z;
}
