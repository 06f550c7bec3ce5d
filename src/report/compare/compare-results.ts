import { bandOf, type FigureChange, figureChanges } from './figure-changes.ts';
import { type HillChanges, hillChanges } from './hill-changes.ts';
import { type InputChanges, inputChanges } from './input-changes.ts';
import { type MatrixChange, type MatrixChanges, matrixChanges } from './matrix-changes.ts';
import type { SeriesPair } from './read-series.ts';
import type { ResultSummary, SummaryCandidate } from './read-summary.ts';
import { type RequirementChange, requirementChanges } from './requirement-changes.ts';

/** Two results side by side. Plain data. */
export interface Comparison {
  readonly before: ResultSummary;
  readonly after: ResultSummary;
  readonly inputs: InputChanges;
  /** Candidates that both have, in the order of the result after. */
  readonly candidates: readonly CandidateChange[];
  readonly onlyBefore: readonly string[];
  readonly onlyAfter: readonly string[];
  readonly requirements: readonly RequirementChange[];
  readonly hills: HillChanges;
  readonly matrix: MatrixChanges | null;
}

export interface CandidateChange {
  readonly name: string;
  readonly locked: boolean;
  readonly before: SummaryCandidate;
  readonly after: SummaryCandidate;
  readonly figures: readonly FigureChange[];
  /** Gains of the controller that differ, by the key that has their unit. */
  readonly gains: readonly GainChange[];
}

export interface GainChange {
  readonly key: string;
  readonly before: number | string | null;
  readonly after: number | string | null;
}

/**
 * Compares two results: what went in, every figure of the candidates that both have, requirement by requirement, and
 * the hills by their place.
 *
 * @param series of the candidates that both have, by name
 */
export function compareResults(
  before: ResultSummary,
  after: ResultSummary,
  series: ReadonlyMap<string, SeriesPair>,
): Comparison {
  const bands = { before: bandOf(before), after: bandOf(after) };
  const namesOf = (result: ResultSummary) => result.candidates.map(({ name }) => name);
  const missingFrom = (result: ResultSummary, other: ResultSummary) =>
    namesOf(result).filter((name) => !namesOf(other).includes(name));
  return {
    before,
    after,
    inputs: inputChanges(before, after),
    candidates: after.candidates.flatMap((is) => {
      const was = before.candidates.find(({ name }) => name === is.name);
      if (was === undefined) return [];
      return [
        {
          name: is.name,
          locked: is.kind === 'locked' && was.kind === 'locked',
          before: was,
          after: is,
          figures: figureChanges(was, is, bands),
          gains: gainChanges(was.gains, is.gains),
        },
      ];
    }),
    onlyBefore: missingFrom(before, after),
    onlyAfter: missingFrom(after, before),
    requirements: requirementChanges(before, after),
    hills: hillChanges(before, after, series),
    matrix: matrixChanges(before, after),
  };
}

function gainChanges(before: SummaryCandidate['gains'], after: SummaryCandidate['gains']): GainChange[] {
  const plain = (gains: SummaryCandidate['gains'], key: string): GainChange['after'] => {
    const value = gains?.[key];
    return typeof value === 'number' || typeof value === 'string' ? value : null;
  };
  return [...new Set([...Object.keys(after ?? {}), ...Object.keys(before ?? {})])]
    .map((key) => ({ key, before: plain(before, key), after: plain(after, key) }))
    .filter(({ key, before: was, after: is }) => key !== 'design' && was !== is);
}

/** Names of the candidates that both results have, in the order of the result after. */
export const candidatesInBoth = (before: ResultSummary, after: ResultSummary): readonly string[] =>
  after.candidates
    .map(({ name }) => name)
    .filter((name) => before.candidates.some((one) => one.name === name));

/** Requirements that were met and no longer are. */
export const lostOf = ({ requirements }: Comparison): readonly RequirementChange[] =>
  requirements.filter(({ fate }) => fate === 'lost');

/** The same in the combinations of the matrix. */
export const lostInMatrix = ({ matrix }: Comparison): readonly MatrixChange[] =>
  matrix === null ? [] : matrix.changes.filter(({ fate }) => fate === 'lost');

/** Something that was met no longer is: what makes a comparison end with status 1. */
export const isWorse = (comparison: Comparison): boolean =>
  lostOf(comparison).length > 0 || lostInMatrix(comparison).length > 0;
