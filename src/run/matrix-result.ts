import type { Combination, MatrixList } from '../case/matrix-of.ts';
import type { RunStatus } from '../loop/plan.ts';
import type { FigureValues, RequirementFinding } from '../study/findings.ts';

/** Every combination of a case's matrix, judged by its requirements. Plain data. */
export interface MatrixResult {
  /** The lists that the case gives, in the order of the combinations: the last one changes fastest. */
  readonly lists: readonly MatrixList[];
  /** Which way the case itself drives the road. */
  readonly direction: Combination['direction'];
  readonly cells: readonly MatrixCell[];
}

/** One combination after its runs. */
export interface MatrixCell extends CellOutcome {
  /** From 1, in order. */
  readonly number: number;
  readonly combination: Combination;
  /** It is the case itself. */
  readonly own: boolean;
}

/** What the runs of one combination found. */
export interface CellOutcome {
  /** Why it could not be run; null: it was. */
  readonly reason: string | null;
  /** Each requirement for each candidate that it speaks of, in the order of those of the run itself. */
  readonly findings: readonly RequirementFinding[];
  /** One a finding: the run around the place where it was worst; null where nothing was run. */
  readonly pictures: readonly (CellPicture | null)[];
  /** Every candidate; none where nothing was run. */
  readonly runs: readonly CellRun[];
}

export interface CellRun {
  readonly candidate: string;
  readonly status: RunStatus;
  /** Where it ended, horizontal distance [m]. */
  readonly endDistance: number;
  /** Time within the band of the run itself, rms and worst errors, all over the whole road. */
  readonly figures: FigureValues;
}

/** Speed error around a place, by distance bin. */
export interface CellPicture {
  /**
   * Where the figure was worst; of a figure without a place where the error was greatest, of a run that ended before
   * the end of what is asked where it ended. Horizontal distance [m].
   */
  readonly at: number;
  /** Middles of the bins [m]; least, mean and greatest error in each [m/s]. */
  readonly distance: Float64Array;
  readonly low: Float64Array;
  readonly mean: Float64Array;
  readonly high: Float64Array;
}
