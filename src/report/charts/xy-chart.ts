import { type Html, html } from '../html.ts';
import type { Paint } from '../paint.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  clip,
  clipped,
  drawing,
  segment,
  stroked,
  tenth,
  type Words,
} from './canvas.ts';
import { type KeyItem, keyRows, SIGN_WIDTH } from './key-row.ts';
import { linePath, type Point } from './paths.ts';

/** One set of points of a chart: measured ones as marks, computed ones as a line. */
export interface XySeries {
  readonly name: string;
  readonly mark: 'line' | 'dot' | 'ring' | 'cross';
  /** Index of a series of the palette. */
  readonly colour: number;
  readonly dash?: string;
  /** In the units of the axes; for a line, x does not decrease. */
  readonly points: readonly Point[];
}

export interface XyPlot {
  /** Quantities with units. */
  readonly x: string;
  readonly y: string;
  readonly series: readonly XySeries[];
  /** Height of the plot in user units. */
  readonly height: number;
  /** The y axis takes in zero. */
  readonly fromZero: boolean;
  /** The key stands below the drawing, for a file of its own; false where it is left out: the page has it. */
  readonly keyed?: boolean;
}

/** A plain chart of measured points and computed lines over one axis. */
export function xyChart(words: Words, plot: XyPlot, canvas: Canvas): Html {
  const { narrow, id } = canvas;
  const left = narrow ? 40 : 52;
  const box: Box = {
    left,
    top: 28,
    width: canvas.width - left - 12,
    height: narrow ? plot.height * 0.8 : plot.height,
  };
  const x = scaleOf(rangeOf(plot, 0, false), box.left, box.left + box.width);
  const y = scaleOf(rangeOf(plot, 1, plot.fromZero), box.top + box.height, box.top);
  const marks = plot.series.map((series) => {
    const stroke = canvas.paint.series[series.colour]!;
    const points = series.points.map(([a, b]): Point => [x(a), y(b)]);
    if (series.mark === 'line')
      return html`<g>${stroked(linePath(points), { stroke, width: 1.8, dash: series.dash ?? '' })}</g>`;
    return series.mark === 'dot'
      ? dots(points, stroke)
      : html`<g>${points.map((point) => markAt(point, series.mark, stroke))}</g>`;
  });
  const body = html`<defs>${clip(`${id}-c`, box)}</defs>${leftAxis(canvas, box, y, plot.y)}${clipped(`${id}-c`, html`${marks}`)}${bottomAxis(canvas, box, x, plot.x)}`;
  const bottom = box.top + box.height + BOTTOM_AXIS_HEIGHT;
  if (plot.keyed !== true) return drawing(canvas, bottom, words, body);
  const key = keyRows(plot.series.map(keyItem(canvas.paint)), left, bottom + 14, box.width, canvas.paint.ink);
  return drawing(canvas, bottom + key.height, words, html`${body}${key.body}`);
}

function rangeOf({ series }: XyPlot, axis: 0 | 1, fromZero: boolean): readonly [number, number] {
  let [low, high] = fromZero ? [0, 0] : [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const { points } of series)
    for (const point of points) {
      low = Math.min(low, point[axis]);
      high = Math.max(high, point[axis]);
    }
  if (!(high >= low)) return [0, 1];
  const margin = 0.04 * (high - low);
  return [low === 0 ? low : low - margin, high === 0 ? high : high + margin];
}

/** Many dots as one path of round caps: a record has hundreds. */
const dots = (points: readonly Point[], colour: string): Html =>
  html`<path d="${points.map(([x, y]) => `M${tenth(x)},${tenth(y)}h0`).join('')}" fill="none" stroke="${colour}" stroke-width="5.2" stroke-linecap="round"/>`;

/** A mark of three user units around a point; the shape is the second cue beside the colour. */
function markAt([x, y]: Point, mark: XySeries['mark'], colour: string): Html {
  const [cx, cy] = [tenth(x), tenth(y)];
  switch (mark) {
    case 'ring':
      return html`<circle cx="${cx}" cy="${cy}" r="3" fill="none" stroke="${colour}" stroke-width="1.3"/>`;
    case 'cross':
      return html`<path d="M${tenth(x - 3)},${tenth(y - 3)}l6,6m0,-6l-6,6" fill="none" stroke="${colour}" stroke-width="1.3"/>`;
    default:
      return html`<circle cx="${cx}" cy="${cy}" r="2.6" fill="${colour}"/>`;
  }
}

const keyItem =
  (paint: Paint) =>
  ({ name, mark, colour, dash = '' }: XySeries): KeyItem => {
    const stroke = paint.series[colour]!;
    return {
      sign: (x, y) =>
        mark === 'line'
          ? segment(x, y, x + SIGN_WIDTH, y, { stroke, width: 1.8, dash })
          : markAt([x + SIGN_WIDTH / 2, y], mark, stroke),
      text: name,
    };
  };

/** Key for people: mark and name of every series. */
export const xyKey = (series: readonly XySeries[], paint: Paint): Html =>
  html`<ul class="keys">${series.map((one) => {
    const stroke = paint.series[one.colour]!;
    const mark =
      one.mark === 'line'
        ? segment(1, 5, 27, 5, { stroke, width: 2.5, dash: one.dash ?? '' })
        : markAt([14, 5], one.mark, stroke);
    return html`<li><svg class="key" viewBox="0 0 28 10" width="28" height="10" aria-hidden="true">${mark}</svg> ${one.name}</li>`;
  })}</ul>`;
