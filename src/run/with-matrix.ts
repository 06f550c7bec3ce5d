import type { RequirementFinding } from '../study/findings.ts';
import type { CellOutcome, MatrixResult } from './matrix-result.ts';
import type { MatrixWork } from './matrix-work.ts';
import type { RunResult } from './run-result.ts';

/**
 * A run with its matrix.
 *
 * @param run of the case itself
 * @param work that is left to do, from the same case
 * @param outcomes of `runCell`, one a cell, in their order
 */
export function withMatrix(
  run: RunResult,
  { lists, direction, cells }: MatrixWork,
  outcomes: readonly CellOutcome[],
): RunResult {
  const matrix: MatrixResult = {
    lists,
    direction,
    cells: cells.map(({ combination, own }, i) => {
      const outcome = outcomes[i];
      if (outcome === undefined) throw new RangeError(`combination ${i + 1} was not run`);
      return { number: i + 1, combination, own, ...outcome };
    }),
  };
  const missed = matrix.cells.some(({ findings }) => findings.some(isMissed));
  return { ...run, matrix, status: missed ? 'requirement_not_met' : run.status };
}

/** What is not judged counts as not met. */
export const isMissed = ({ verdict }: RequirementFinding): boolean =>
  verdict === 'not met' || verdict === 'not judged';

/** The runs of a combination take this part of the time of the case itself, which has its studies too. */
const PART = 0.15;

/** Share of the whole work that is done when the case itself is. */
export const shareBeforeMatrix = (cells: number): number => 1 / (1 + PART * cells);

/** Share of the whole work that is done when so many combinations are, and what is said of it. */
export function shareOfMatrix({ cells }: Pick<MatrixWork, 'cells'>, done: number): number {
  const before = shareBeforeMatrix(cells.length);
  return before + ((1 - before) * done) / cells.length;
}
export const matrixWords = ({ cells }: Pick<MatrixWork, 'cells'>, done: number): string =>
  `combination ${Math.min(done + 1, cells.length)} of ${cells.length}`;
