import { Matrix, solve } from 'ml-matrix';

// Coefficients of the diagonal Pade approximant of order 13, and the largest 1-norm it takes without scaling.
const PADE = [
  64764752532480000, 32382376266240000, 7771770303897600, 1187353796428800, 129060195264000, 10559470521600,
  670442572800, 33522128640, 1323241920, 40840800, 960960, 16380, 182, 1,
] as const;
const LARGEST_NORM = 5.371920351148152;

/**
 * e^A by scaling, the diagonal Pade approximant of order 13 and squaring (N. J. Higham, SIAM J. Matrix Anal. Appl. 26
 * (2005) 1179-1193, algorithm 2.3).
 *
 * @param matrix square, of finite numbers
 * @returns a new matrix of the same size; relative error near the rounding error for matrices that are not far from normal
 */
export function matrixExponential(matrix: Matrix): Matrix {
  let halvings = 0;
  for (let norm = oneNorm(matrix); norm > LARGEST_NORM; norm /= 2) halvings++;
  let scale = 1;
  for (let i = 0; i < halvings; i++) scale /= 2;
  const a = Matrix.mul(matrix, scale);
  const a2 = a.mmul(a);
  const a4 = a2.mmul(a2);
  const a6 = a4.mmul(a2);
  const one = Matrix.eye(a.rows);
  const sum = (c6: number, c4: number, c2: number): Matrix =>
    Matrix.mul(a6, c6).add(Matrix.mul(a4, c4)).add(Matrix.mul(a2, c2));
  const odd = a6
    .mmul(sum(PADE[13], PADE[11], PADE[9]))
    .add(sum(PADE[7], PADE[5], PADE[3]))
    .add(Matrix.mul(one, PADE[1]));
  const u = a.mmul(odd);
  const v = a6
    .mmul(sum(PADE[12], PADE[10], PADE[8]))
    .add(sum(PADE[6], PADE[4], PADE[2]))
    .add(Matrix.mul(one, PADE[0]));
  let result = solve(Matrix.sub(v, u), Matrix.add(v, u));
  for (let i = 0; i < halvings; i++) result = result.mmul(result);
  return result;
}

function oneNorm(matrix: Matrix): number {
  let norm = 0;
  for (let j = 0; j < matrix.columns; j++) {
    let sum = 0;
    for (let i = 0; i < matrix.rows; i++) sum += Math.abs(matrix.get(i, j));
    if (sum > norm) norm = sum;
  }
  return norm;
}
