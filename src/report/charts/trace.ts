import { type Html, html } from '../html.ts';
import { type Column, columnsOf } from '../model/columns.ts';
import type { CandidateView } from '../model/view.ts';
import { type Box, type Canvas, filled, stroked } from './canvas.ts';
import { envelopePath, linePath, type Point } from './paths.ts';

/** Columns of this many user units carry a line that swings too fast to be drawn, and the swing that makes it one [heights of the plot]. */
const COLUMN = 4;
const TOO_FAST = 10;

const lookOf = (candidate: CandidateView, { paint }: Canvas) => ({
  stroke: paint.series[candidate.colour]!,
  width: 1.5,
  dash: candidate.dash,
});

/** A candidate's line; where it swings too fast for that, the band from least to greatest. */
export function trace(
  points: readonly Point[],
  candidate: CandidateView,
  box: Box,
  canvas: Canvas,
): Html | null {
  const look = lookOf(candidate, canvas);
  const inside = points.map(([x, y]): Point => [x, withinPlot(y, box)]);
  if (travelOf(inside) <= TOO_FAST * box.height) return stroked(linePath(points), look);
  const columns = swingsOf(inside, box);
  const high = columns.map((column): Point => [column.at, column.high]);
  const low = columns.map((column): Point => [column.at, column.low]);
  const edge = { ...look, width: 0.8 };
  return html`${filled(envelopePath(low, high), look.stroke, 0.28)}${stroked(linePath(high), edge)}${stroked(linePath(low), edge)}`;
}

/** Far outside a plot nothing is seen: a hair outside its edge stands for it. */
const withinPlot = (y: number, box: Box): number =>
  Math.min(Math.max(y, box.top - 2), box.top + box.height + 2);

/** Way of a line up and down [user units]. */
function travelOf(points: readonly Point[]): number {
  let travel = 0;
  for (let i = 1; i < points.length; i++) {
    const step = Math.abs(points[i]![1] - points[i - 1]![1]);
    if (Number.isFinite(step)) travel += step;
  }
  return travel;
}

/** Columns with the extremes of themselves and of both neighbours: a swing is wider than one column. */
function swingsOf(points: readonly Point[], box: Box): readonly Omit<Column, 'mean'>[] {
  const at = points.map(([x]) => x);
  const values = points.map(([, y]) => y);
  const columns = columnsOf(
    { size: points.length, at, low: values, mean: values, high: values },
    box.left,
    COLUMN,
  );
  return columns.map(({ at }, i) => {
    const near = columns.slice(Math.max(0, i - 1), i + 2);
    return {
      at,
      low: Math.min(...near.map(({ low }) => low)),
      high: Math.max(...near.map(({ high }) => high)),
    };
  });
}
