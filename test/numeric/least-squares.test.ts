import { describe, expect, test } from 'vitest';
import { leastSquares } from '../../src/numeric/least-squares.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { expectClose } from '../compare.ts';

describe('leastSquares', () => {
  test('fits the line of Anscombe: 3.00 + 0.500 x, standard errors 1.125 and 0.118', () => {
    // F. J. Anscombe, Graphs in Statistical Analysis, American Statistician 27 (1973) 17-21, first set; figures as printed there.
    const x = Float64Array.of(10, 8, 13, 9, 11, 14, 6, 4, 12, 7, 5);
    const y = Float64Array.of(8.04, 6.95, 7.58, 8.81, 8.33, 9.96, 7.24, 4.26, 10.84, 4.82, 5.68);
    const fit = leastSquares([x.map(() => 1), x], y);
    expect(fit.status).toBe('solved');
    expectClose(fit.coefficients, [3.0, 0.5], 0.005);
    const variance = fit.residuals.reduce((sum, r) => sum + r * r, 0) / 9;
    expectClose(Math.sqrt(variance * fit.inverse[1]![1]!), 0.118, 0.0005);
    expectClose(Math.sqrt(variance * fit.inverse[0]![0]!), 1.125, 0.0005);
  });

  test('gives back the coefficients of exact data, whatever the units, and leaves residuals across the columns', () => {
    const random = seededStream(3);
    for (let round = 0; round < 40; round++) {
      const scales = [1, 1e6, 1e-5];
      const columns = scales.map((scale) => Float64Array.from({ length: 12 }, () => scale * random.normal()));
      const truth = scales.map((scale) => random.normal() / scale);
      const exact = columns[0]!.map((_, i) =>
        columns.reduce((y, column, j) => y + column[i]! * truth[j]!, 0),
      );
      const fit = leastSquares(columns, exact);
      scales.forEach((scale, j) => {
        expectClose(fit.coefficients[j]! * scale, truth[j]! * scale, 1e-12);
      });
      const noisy = leastSquares(
        columns,
        exact.map((y) => y + random.normal()),
      );
      for (const [j, column] of columns.entries())
        expectClose(column.reduce((sum, x, i) => sum + x * noisy.residuals[i]!, 0) / scales[j]!, 0, 1e-11);
    }
  });

  test('gives the inverse of the normal equations', () => {
    const columns = [Float64Array.of(1, 1, 1, 1), Float64Array.of(0, 1, 2, 5)];
    const { inverse } = leastSquares(columns, Float64Array.of(1, 2, 3, 4));
    // X'X = [[4, 8], [8, 30]], its determinant 56
    expectClose(inverse[0]!, [30 / 56, -8 / 56], 1e-15);
    expectClose(inverse[1]!, [-8 / 56, 4 / 56], 1e-15);
  });

  test('says so where a column is made of the others, or is nothing', () => {
    const x = Float64Array.of(1, 2, 3, 4);
    for (const column of [x.map((a) => 2 * a), new Float64Array(4), x.map(() => Number.NaN)])
      expect(leastSquares([x, column], x).status).toBe('dependent');
  });
});
