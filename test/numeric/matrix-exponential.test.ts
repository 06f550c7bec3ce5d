import { Matrix } from 'ml-matrix';
import { describe, expect, test } from 'vitest';
import { matrixExponential } from '../../src/numeric/matrix-exponential.ts';
import { expectClose } from '../compare.ts';

const flat = (matrix: Matrix): number[] => matrix.to1DArray();

describe('matrixExponential', () => {
  test('of a rotation by one radian is sine and cosine', () => {
    const result = matrixExponential(
      new Matrix([
        [0, -1],
        [1, 0],
      ]),
    );
    expectClose(flat(result), [Math.cos(1), -Math.sin(1), Math.sin(1), Math.cos(1)], 1e-15);
  });
  test('of a nilpotent matrix ends after its powers', () => {
    const result = matrixExponential(
      new Matrix([
        [0, 3, 0],
        [0, 0, 4],
        [0, 0, 0],
      ]),
    );
    expectClose(flat(result), [1, 3, 6, 0, 1, 4, 0, 0, 1], 1e-14);
  });
  test('of a defective matrix with norm far above 1 keeps its digits', () => {
    // exp([[a, 1], [0, a]]) = e^a [[1, 1], [0, 1]]
    const result = matrixExponential(
      new Matrix([
        [-30, 1],
        [0, -30],
      ]),
    );
    const e = Math.exp(-30);
    expectClose(
      flat(result).map((x) => x / e),
      [1, 1, 0, 1],
      2e-13,
    );
  });
  test('of Moler and Van Loan’s example has the digits that they print', () => {
    // C. Moler, C. Van Loan, SIAM Review 20 (1978) 801, example 2 (from memory); exact values from its eigenvalues -1, -17.
    const result = matrixExponential(
      new Matrix([
        [-49, 24],
        [-64, 31],
      ]),
    );
    expectClose(flat(result), [-0.735759, 0.551819, -1.471518, 1.103638], 5e-7);
  });
  test('times that of the negative is the identity over random matrices', () => {
    let seed = 5;
    const random = () => {
      seed = (seed * 1103515245 + 12345) % 2147483648;
      return (4 * seed) / 2147483648 - 2;
    };
    for (let trial = 0; trial < 50; trial++) {
      const n = 1 + (trial % 5);
      const a = new Matrix(Array.from({ length: n }, () => Array.from({ length: n }, random)));
      const product = matrixExponential(a).mmul(matrixExponential(Matrix.mul(a, -1)));
      expect(Matrix.sub(product, Matrix.eye(n)).norm('frobenius')).toBeLessThan(1e-10);
    }
  });
});
