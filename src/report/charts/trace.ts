import type { Html } from '../html.ts';
import { html } from '../html.ts';
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

/** A candidate's line; where it swings too fast for that, the band from least to greatest with its middle. */
export function trace(
  points: readonly Point[],
  candidate: CandidateView,
  box: Box,
  canvas: Canvas,
): Html | null {
  const look = lookOf(candidate, canvas);
  if (travelOf(points, box) <= TOO_FAST * box.height) return stroked(linePath(points), look);
  const at = points.map(([x]) => x);
  const values = points.map(([, y]) => y);
  const columns = columnsOf(
    { size: points.length, at, low: values, mean: values, high: values },
    box.left,
    COLUMN,
  );
  const line = (pick: (column: Column) => number): Point[] =>
    columns.map((column) => [column.at, pick(column)]);
  return html`${filled(
    envelopePath(
      line(({ high }) => high),
      line(({ low }) => low),
    ),
    look.stroke,
    0.28,
  )}${stroked(linePath(line(({ low, high }) => (low + high) / 2)), look)}`;
}

/** Way of a line up and down inside a plot [user units]. */
function travelOf(points: readonly Point[], box: Box): number {
  const inside = (y: number): number => Math.min(Math.max(y, box.top), box.top + box.height);
  let travel = 0;
  for (let i = 1; i < points.length; i++) {
    const step = Math.abs(inside(points[i]![1]) - inside(points[i - 1]![1]));
    if (Number.isFinite(step)) travel += step;
  }
  return travel;
}
