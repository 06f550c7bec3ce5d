import { Matrix, QrDecomposition } from 'ml-matrix';

/** A linear least-squares fit. */
export interface LeastSquares {
  /** `dependent`: a column is, to rounding, made of the others, and no number below means anything. */
  readonly status: 'solved' | 'dependent';
  readonly coefficients: Float64Array;
  /** Right-hand side less what the coefficients give, a number a row. */
  readonly residuals: Float64Array;
  /** (X'X)^-1, row by row: times the variance of the residuals it is the covariance where these are independent. */
  readonly inverse: readonly Float64Array[];
}

/** Smallest diagonal element of R, of columns of length 1, that is told from a dependence. */
const LEAST_DIAGONAL = 1e-10;

/**
 * Least squares by Householder QR of columns scaled to length 1, so that units do not matter and no normal equations
 * lose digits (G. H. Golub, C. F. Van Loan, Matrix Computations, 4th ed., section 5.3, from memory).
 *
 * @param columns of X, all as long as `right`, not fewer rows than columns
 * @param right y
 */
export function leastSquares(columns: readonly Float64Array[], right: Float64Array): LeastSquares {
  const lengths = columns.map((column) => Math.sqrt(column.reduce((sum, x) => sum + x * x, 0)));
  const size = columns.length;
  const rows = right.length;
  const matrix = new Matrix(rows, size);
  for (let j = 0; j < size; j++)
    for (let i = 0; i < rows; i++) matrix.set(i, j, columns[j]![i]! / (lengths[j]! || 1));
  const qr = new QrDecomposition(matrix);
  const upper = qr.upperTriangularMatrix;
  if (columns.some((_, j) => !(Math.abs(upper.get(j, j)) > LEAST_DIAGONAL)))
    return {
      status: 'dependent',
      coefficients: new Float64Array(size),
      residuals: right.slice(),
      inverse: columns.map(() => new Float64Array(size)),
    };
  const scaled = qr.solve(Matrix.columnVector(right));
  const coefficients = Float64Array.from(lengths, (length, j) => scaled.get(j, 0) / length);
  const residuals = right.map((y, i) =>
    columns.reduce((left, column, j) => left - column[i]! * coefficients[j]!, y),
  );
  return { status: 'solved', coefficients, residuals, inverse: inverseOf(upper, lengths) };
}

/** R^-1 R^-T, with the scale of the columns taken out. */
function inverseOf(upper: Matrix, lengths: readonly number[]): readonly Float64Array[] {
  const size = lengths.length;
  const inverse = lengths.map(() => new Float64Array(size));
  for (let j = 0; j < size; j++)
    for (let i = j; i >= 0; i--) {
      let sum = i === j ? 1 : 0;
      for (let k = i + 1; k <= j; k++) sum -= upper.get(i, k) * inverse[k]![j]!;
      inverse[i]![j] = sum / upper.get(i, i);
    }
  return inverse.map((row, i) =>
    Float64Array.from(lengths, (length, j) => {
      let sum = 0;
      for (let k = Math.max(i, j); k < size; k++) sum += row[k]! * inverse[j]![k]!;
      return sum / (lengths[i]! * length);
    }),
  );
}
