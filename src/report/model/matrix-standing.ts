import type { MatrixCell, MatrixResult } from '../../run/matrix-result.ts';
import type { RequirementFinding } from '../../study/findings.ts';
import type { Verdict } from './verdicts.ts';

/** What weighs most in a matrix first: what is not judged counts as not met, but is not known to be. */
export const BY_WEIGHT: readonly Verdict[] = ['not met', 'not judged', 'too close to call', 'met'];

/** One finding with the combination that it is of. */
export interface CellFinding {
  readonly cell: MatrixCell;
  /** Index into the findings of the cell. */
  readonly index: number;
  readonly finding: RequirementFinding;
}

/** All of what one requirement asks of one candidate, combination by combination. */
export interface MatrixRow {
  /** Index into the findings of every cell. */
  readonly index: number;
  readonly findings: readonly CellFinding[];
}

/** A row for each requirement and candidate that it speaks of, in the order of the run itself. */
export function matrixRows({ cells }: MatrixResult): readonly MatrixRow[] {
  return (cells[0]?.findings ?? []).map((_, index) => ({
    index,
    findings: cells.map((cell) => ({ cell, index, finding: cell.findings[index]! })),
  }));
}

/** The finding that weighs most; of equals the one with the least margin, as a share of its limit, or whose run ended first. */
export function worstOf(findings: readonly CellFinding[]): CellFinding | null {
  return findings.reduce<CellFinding | null>(
    (worst, one) => (worst === null || isWorse(one, worst) ? one : worst),
    null,
  );
}

function isWorse(one: CellFinding, other: CellFinding): boolean {
  const weights = BY_WEIGHT.indexOf(one.finding.verdict) - BY_WEIGHT.indexOf(other.finding.verdict);
  if (weights !== 0) return weights < 0;
  const [mine, its] = [shareOfLimit(one.finding), shareOfLimit(other.finding)];
  return mine < its || (mine === its && endOf(one) < endOf(other));
}

/** Where a run ended before the end of what is asked; infinite where it did not [m]. */
export function endOf({ cell, finding }: CellFinding): number {
  if (typeof finding.margin === 'number') return Number.POSITIVE_INFINITY;
  const run = cell.runs.find(({ candidate }) => candidate === finding.candidate);
  return run === undefined || run.status === 'completed' ? Number.POSITIVE_INFINITY : run.endDistance;
}

/** A run that ended early has no margin, and less than any. */
function shareOfLimit({ margin, requirement }: RequirementFinding): number {
  if (typeof margin !== 'number') return Number.NEGATIVE_INFINITY;
  const limit = Math.abs(requirement.atLeast ?? requirement.atMost ?? 1);
  return margin / (limit > 0 ? limit : 1);
}

/** How one candidate stands over all combinations. */
export interface MatrixStanding {
  readonly candidate: string;
  /** Combinations by the verdict that weighs most in each. */
  readonly counts: Readonly<Record<Verdict, number>>;
  readonly combinations: number;
  /** Where it is worst. */
  readonly worst: CellFinding;
}

/** One for each candidate that a requirement speaks of, in the order of the requirements. */
export function matrixStandings(matrix: MatrixResult): readonly MatrixStanding[] {
  const rows = matrixRows(matrix);
  const names = [...new Set(rows.map(({ findings }) => findings[0]!.finding.candidate))];
  return names.flatMap((candidate) => {
    const own = rows.filter(({ findings }) => findings[0]!.finding.candidate === candidate);
    const counts: Record<Verdict, number> = {
      met: 0,
      'not met': 0,
      'too close to call': 0,
      'not judged': 0,
    };
    const worsts = matrix.cells.map((_, i) => worstOf(own.map(({ findings }) => findings[i]!))!);
    for (const { finding } of worsts) counts[finding.verdict]++;
    const worst = worstOf(worsts);
    return worst === null ? [] : [{ candidate, counts, combinations: matrix.cells.length, worst }];
  });
}
