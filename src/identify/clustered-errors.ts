import type { LeastSquares } from '../numeric/least-squares.ts';

/** Errors of coefficients whose rows come in independent groups. */
export interface ClusteredErrors {
  readonly covariance: readonly Float64Array[];
  /** Degrees of freedom of the standard error of each coefficient. */
  readonly degrees: Float64Array;
}

/**
 * Standard errors that hold whatever the colour of the residuals within a group: (X'X)^-1 (sum of u u') (X'X)^-1 with
 * u = X_g' r_g, the score of a group (K.-Y. Liang, S. L. Zeger, Biometrika 73 (1986) 13-22, from memory). Runs of a test are
 * such groups: gusts, a sensor's filter and the road colour the residuals of a run, but hardly link two of them. Groups
 * may be of two kinds that have a coefficient for their difference (runs there and back): what n groups of a kind give is
 * widened by n / (n - 1), and the degrees of freedom are those of B. L. Welch, Biometrika 34 (1947) 28-35 (from memory).
 * Where all groups have the same X this is the scatter of the groups' own fits about the mean of their kind, and exact.
 *
 * @param columns of X
 * @param groups index of the group of each row, from 0
 * @param kinds 0 or 1 for each group, two or more of each kind that there is; all 0: groups of one kind
 */
export function clusteredErrors(
  columns: readonly Float64Array[],
  { residuals, inverse }: LeastSquares,
  groups: Int32Array,
  kinds: Int32Array,
): ClusteredErrors {
  const scores = Array.from(kinds, () => new Float64Array(columns.length));
  for (let i = 0; i < residuals.length; i++) {
    const score = scores[groups[i]!]!;
    for (let j = 0; j < columns.length; j++) score[j] = score[j]! + columns[j]![i]! * residuals[i]!;
  }
  // What each group pulls each coefficient by; the covariance is the sum of their products.
  const pulls = scores.map((score) =>
    inverse.map((row) => row.reduce((sum, x, j) => sum + x * score[j]!, 0)),
  );
  const parts = [0, 1].map((kind) => {
    const own = pulls.filter((_, g) => kinds[g] === kind);
    const widened = own.length / Math.max(1, own.length - 1);
    return {
      count: own.length,
      covariance: columns.map((_, i) =>
        columns.map((__, j) => widened * own.reduce((sum, pull) => sum + pull[i]! * pull[j]!, 0)),
      ),
    };
  });
  const total = (i: number, j: number): number =>
    parts.reduce((sum, { covariance }) => sum + covariance[i]![j]!, 0);
  return {
    covariance: columns.map((_, i) => Float64Array.from(columns, (__, j) => total(i, j))),
    degrees: Float64Array.from(columns, (_, i) => {
      const all = total(i, i);
      const lost = parts.reduce((sum, { count, covariance }) => {
        const own = covariance[i]![i]!;
        return count > 1 ? sum + (own * own) / (count - 1) : sum;
      }, 0);
      return lost > 0 ? (all * all) / lost : Math.max(1, kinds.length - 1);
    }),
  };
}
