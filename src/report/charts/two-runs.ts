import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { type Curve, columnsOf, unbrokenRuns } from '../model/columns.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, type Scale, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  clip,
  clipped,
  drawing,
  filled,
  rectangle,
  segment,
  stroked,
} from './canvas.ts';
import { BREAK, envelopePath, linePath, type Point } from './paths.ts';

/** Columns of two user units, as in the lanes of a report. */
const COLUMN = 2;
const GAP = 38;

/** Lane of two curves over the same distance. */
export interface TwoCurves {
  readonly name: string;
  readonly before: Curve;
  readonly after: Curve;
  /** [value of a curve] -> unit of the axis */
  readonly of: (value: number) => number;
  readonly domain: readonly [number, number];
  readonly height: number;
  /** Half-width of a band around zero, in the unit of the axis; null: none. */
  readonly band: number | null;
}

/** How the run before and the run after are drawn: by colour and by dash. */
export const beforeLook = { colour: 0, dash: '5 3' } as const;
export const afterLook = { colour: 1, dash: '' } as const;

/**
 * One candidate in two runs: lanes under one another over the same distance, before and after in each.
 *
 * @param length of the longer road [m]
 */
export function twoRunsChart(
  words: { readonly title: string; readonly desc: string },
  lanes: readonly TwoCurves[],
  length: number,
  canvas: Canvas,
): Html {
  const { narrow, id } = canvas;
  const left = narrow ? 40 : 52;
  const width = canvas.width - left - 12;
  let top = 26;
  const drawn = lanes.map((lane, i) => {
    const box: Box = { left, top, width, height: narrow ? Math.round(lane.height * 0.8) : lane.height };
    top += box.height + GAP;
    return oneLane(lane, length, { ...canvas, id: `${id}-${i}` }, box, i === lanes.length - 1);
  });
  return drawing(canvas, top - GAP + BOTTOM_AXIS_HEIGHT, words, html`${drawn}`);
}

function oneLane(lane: TwoCurves, length: number, canvas: Canvas, box: Box, last: boolean): Html {
  const { paint, id } = canvas;
  const x = scaleOf([0, toKm(length)], box.left, box.left + box.width);
  const y = scaleOf(lane.domain, box.top + box.height, box.top);
  const column = length / (box.width / COLUMN);
  const band =
    lane.band === null ? null : { ...box, top: y(lane.band), height: y(-lane.band) - y(lane.band) };
  const marks = (curve: Curve, look: typeof beforeLook | typeof afterLook) =>
    curveMarks(curve, lane, paint.series[look.colour]!, look.dash, x, y, column);
  return html`<defs>${clip(`${id}-c`, box)}</defs>${band !== null && clipped(`${id}-c`, rectangle(band, paint.band))}${leftAxis(canvas, box, y, lane.name)}${clipped(`${id}-c`, html`${marks(lane.before, beforeLook)}${marks(lane.after, afterLook)}`)}${endMark(lane.before, length, x, box, canvas)}${endMark(lane.after, length, x, box, canvas)}${bottomAxis(canvas, box, x, last ? 'distance / km' : null)}`;
}

function curveMarks(
  curve: Curve,
  lane: TwoCurves,
  stroke: string,
  dash: string,
  x: Scale,
  y: Scale,
  column: number,
): Html {
  const runs = unbrokenRuns(curve).map((run) => columnsOf(run, 0, column));
  const points = (pick: 'low' | 'mean' | 'high'): Point[] =>
    runs.flatMap((run, i): Point[] => [
      ...(i === 0 ? [] : [BREAK]),
      ...run.map((one): Point => [x(toKm(one.at)), y(lane.of(one[pick]))]),
    ]);
  const spread = runs.flat().some(({ low, high }) => high > low);
  return html`<g>${spread && filled(envelopePath(points('low'), points('high')), stroke, 0.2)}${stroked(linePath(points('mean')), { stroke, width: 1.5, dash })}</g>`;
}

/** Where a run ended well before the end of the longer road. */
function endMark(curve: Curve, length: number, x: Scale, box: Box, { paint }: Canvas): Html | null {
  const end = curve.size === 0 ? 0 : curve.at[curve.size - 1]!;
  if (end >= length * 0.99) return null;
  const at = x(toKm(end));
  return segment(at, box.top, at, box.top + box.height, { stroke: paint.warn, width: 1.5, dash: '3 2' });
}
