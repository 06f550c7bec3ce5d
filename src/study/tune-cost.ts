import { figureRow } from './figure-table.ts';
import type { Figure, FigureValues, Replayed } from './findings.ts';
import { isNone } from './findings.ts';
import { endedEarly, type FigureContext, measureFigure } from './measure-figure.ts';

/** A figure of the table and what one of its units weighs. */
export interface CostTerm {
  readonly figure: string;
  readonly weight: number;
}

/**
 * The cost of a run: the sum of its figures over the whole road, each times its weight; a figure of which more is better
 * counts negatively.
 *
 * @param values of the figures, in the unit of the table
 */
export function costOf(terms: readonly CostTerm[], values: FigureValues): Figure {
  let cost = 0;
  for (const { figure, weight } of terms) {
    const value = values[figure];
    if (value === undefined) return { none: `no figure ${figure}` };
    if (isNone(value)) return value;
    cost += (figureRow(figure)?.better === 'higher' ? -weight : weight) * value;
  }
  return cost;
}

/** The cost of one run, without the figures that are not in it; Infinity where it has none, or ended before the end of the road. */
export function costOfRun(
  terms: readonly CostTerm[],
  replayed: Replayed,
  context: FigureContext,
  band: number,
): number {
  if (endedEarly(replayed, 'all')) return Number.POSITIVE_INFINITY;
  const values = Object.fromEntries(
    terms.flatMap(({ figure }) => {
      const row = figureRow(figure);
      return row === undefined ? [] : [[figure, measureFigure(row, replayed, context, 'all', band).value]];
    }),
  );
  const cost = costOf(terms, values);
  return isNone(cost) ? Number.POSITIVE_INFINITY : cost;
}
