import type { Words } from '../charts/canvas.ts';
import { type XyPlot, xyChart, xyKey } from '../charts/xy-chart.ts';
import { type Html, html } from '../html.ts';
import { PAGE_PAINT } from '../paint.ts';
import { chartFigure } from '../sections/chart-figure.ts';

/** A chart over one axis, for the page and as a file of its own. */
export interface XyFigure {
  readonly id: string;
  readonly words: Words;
  readonly plot: XyPlot;
  readonly caption: string;
}

/** Charts that share the key of the first: the others have some of its series. */
export const xyFigures = (figures: readonly XyFigure[]): Html =>
  html`${figures.map(
    ({ id, words, plot, caption }, i) =>
      html`${i === 0 && xyKey(plot.series, PAGE_PAINT)}
${chartFigure(id, (canvas) => xyChart(words, plot, canvas), caption)}`,
  )}`;
