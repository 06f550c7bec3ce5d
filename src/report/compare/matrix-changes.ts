import type { Verdict } from '../model/verdicts.ts';
import type { MatrixCombination, ResultSummary } from './read-summary.ts';

/** A requirement of a candidate in one combination of the matrix, whose verdict is another one after. */
export interface MatrixChange {
  /** Load, wind, direction, gear and set speed, in words. */
  readonly combination: string;
  readonly id: string;
  readonly candidate: string;
  readonly fate: 'lost' | 'gained' | 'changed';
  readonly before: Verdict;
  readonly after: Verdict;
}

/** What became of the cells that both matrices have; null where one result has no matrix. */
export interface MatrixChanges {
  /** Combinations that both have, and verdicts in them. */
  readonly combinations: number;
  readonly verdicts: number;
  readonly changes: readonly MatrixChange[];
}

/** Combinations are matched by their load, wind, direction, gear and set speed, verdicts by requirement and candidate. */
export function matrixChanges(before: ResultSummary, after: ResultSummary): MatrixChanges | null {
  if (before.matrix === undefined || after.matrix === undefined) return null;
  const was = new Map(before.matrix.combinations.map((one) => [wordsOf(one), one]));
  const pairs = after.matrix.combinations.flatMap((is) => {
    const old = was.get(wordsOf(is));
    return old === undefined ? [] : [{ old, is }];
  });
  const cells = pairs.flatMap(({ old, is }) =>
    is.requirements.flatMap(({ id, candidate, verdict }) => {
      const same = old.requirements.find((one) => one.id === id && one.candidate === candidate);
      if (same === undefined) return [];
      return [{ combination: wordsOf(is), id, candidate, before: same.verdict, after: verdict }];
    }),
  );
  return {
    combinations: pairs.length,
    verdicts: cells.length,
    changes: cells.flatMap((cell): MatrixChange[] =>
      cell.before === cell.after ? [] : [{ ...cell, fate: fateOf(cell.before, cell.after) }],
    ),
  };
}

const fateOf = (before: Verdict, after: Verdict): MatrixChange['fate'] =>
  before === 'met' ? 'lost' : after === 'met' ? 'gained' : 'changed';

/** `two up, still air, there, gear 4, 60 km/h`: what the matrix calls the combination. */
function wordsOf({ load, wind, direction, gear, set_speed_kmh }: MatrixCombination): string {
  return [load, wind, direction, ...(gear === null ? [] : [`gear ${gear}`]), `${set_speed_kmh} km/h`].join(
    ', ',
  );
}
