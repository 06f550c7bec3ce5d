import { figureRow } from './figure-table.ts';
import type { Figure, Replayed, Where } from './findings.ts';
import { isNone } from './findings.ts';
import { endedEarly, type FigureContext, figureValue } from './measure-figure.ts';

/** A figure of the table, the part of the road that it is taken over, and what one of its units weighs. */
export interface CostTerm {
  readonly figure: string;
  readonly where: Where;
  readonly weight: number;
}

/**
 * The cost of a run: the sum of its figures, each times its weight; a figure of which more is better counts negatively.
 *
 * @param terms with figures of the table, in the unit of the table
 * @param band half-width for figures that take one [m/s]
 * @returns none, with its reason, where the run ended before the end of the road or a figure has no value
 */
export function costOf(
  terms: readonly CostTerm[],
  replayed: Replayed,
  context: FigureContext,
  band: number,
): Figure {
  if (endedEarly(replayed, 'all')) return { none: 'the run ended early' };
  let cost = 0;
  for (const { figure, where, weight } of terms) {
    const row = figureRow(figure);
    if (row === undefined) return { none: `no figure ${figure}` };
    const value = figureValue(row, replayed, context, where, band);
    if (isNone(value)) return value;
    cost += (row.better === 'higher' ? -weight : weight) * value;
  }
  return cost;
}
