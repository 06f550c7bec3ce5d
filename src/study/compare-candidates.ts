import type { FigureValues, Replayed } from './findings.ts';
import { type FigureContext, figureValues } from './measure-figure.ts';

/** A candidate's figures over the whole road and over what can be held. */
export interface CandidateFigures {
  readonly candidate: string;
  readonly all: FigureValues;
  readonly holdable: FigureValues;
}

/**
 * Candidates side by side: every figure of the table, over the whole road and over its holdable part.
 *
 * @param band half-width of the band of `within_band_pct` [m/s]; must be among the plans' bands
 * @returns one entry a candidate, in the order of `replayed`
 */
export function compareCandidates(
  replayed: readonly Replayed[],
  context: FigureContext,
  band: number,
): CandidateFigures[] {
  return replayed.map((candidate) => ({
    candidate: candidate.name,
    all: figureValues(candidate, context, 'all', band),
    holdable: figureValues(candidate, context, 'holdable', band),
  }));
}
