import type { LeastSquares } from '../numeric/least-squares.ts';

/** Covariance of coefficients whose rows come in independent groups. */
export interface ClusteredErrors {
  readonly covariance: readonly Float64Array[];
  /** Degrees of freedom of its standard errors: groups less what groups alone determine. */
  readonly degrees: number;
}

/**
 * Standard errors that hold whatever the colour of the residuals within a group: (X'X)^-1 (sum of u u') (X'X)^-1 with
 * u = X_g' r_g, the score of a group, widened by groups / (groups - taken) (K.-Y. Liang, S. L. Zeger, Biometrika 73
 * (1986) 13-22; the small-sample factor and Student's t with as many degrees of freedom as R. M. Bell and D. F.
 * McCaffrey, Survey Methodology 28 (2002) 169-181, find for groups that are alike: both from memory). Runs of a test
 * are such groups: gusts, a sensor's filter and the road colour the residuals of a run, but hardly link two of them.
 * Where all groups have the same X this is the scatter of the groups' own fits about their mean, and exact.
 *
 * @param columns of X
 * @param groups index of the group of each row, from 0
 * @param taken columns that differ between groups but not within one: 1 for what all share, 2 where groups of two
 *   kinds (there and back) have a coefficient for their difference
 */
export function clusteredErrors(
  columns: readonly Float64Array[],
  { residuals, inverse }: LeastSquares,
  groups: Int32Array,
  taken: number,
): ClusteredErrors {
  const count = groups.reduce((most, group) => Math.max(most, group), -1) + 1;
  const scores = Array.from({ length: count }, () => new Float64Array(columns.length));
  for (let i = 0; i < residuals.length; i++) {
    const score = scores[groups[i]!]!;
    for (let j = 0; j < columns.length; j++) score[j] = score[j]! + columns[j]![i]! * residuals[i]!;
  }
  // What each group pulls each coefficient by; the covariance is the sum of their products.
  const pulls = scores.map((score) =>
    inverse.map((row) => row.reduce((sum, x, j) => sum + x * score[j]!, 0)),
  );
  const degrees = count - taken;
  const covariance = columns.map((_, i) =>
    Float64Array.from(
      columns,
      (_, j) => pulls.reduce((sum, pull) => sum + pull[i]! * pull[j]!, 0) * (count / degrees),
    ),
  );
  return { covariance, degrees };
}
