import { tickStep } from 'd3';
import { cellOf } from '../../numeric/interpolate.ts';
import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { binCurve } from '../model/bin-curves.ts';
import { errorClass, errorClasses } from '../model/error-classes.ts';
import type { PlanMap } from '../model/plan-map.ts';
import type { CandidateView, View } from '../model/view.ts';
import type { Paint } from '../paint.ts';
import { fixed, lengthText, stretchText } from '../quantity.ts';
import {
  type Box,
  type Canvas,
  drawing,
  type LineLook,
  label,
  segment,
  stroked,
  tenth,
  textWidth,
} from './canvas.ts';
import type { Point } from './paths.ts';

/** Line widths by class: what is far off is thick, what is too fast beyond the band has a casing; so the classes differ without colour. */
const WIDTHS = [6, 4.5, 3, 2.2, 3, 4.5, 6] as const;

const UNFIT_DASH = '2 3';

/** The route from above, coloured by the speed error of one candidate: worst of each stretch of the drawing. */
export function planChart(view: View, candidate: CandidateView, map: PlanMap, canvas: Canvas): Html {
  const { paint, narrow } = canvas;
  const keyWidth = narrow ? 0 : 225;
  const width = canvas.width - 32 - keyWidth;
  const [across, up] = [spanOf(map.east), spanOf(map.north)];
  // As high as the route needs at full width, within what fits a screen and holds the key.
  const wanted = ((width - 40) * (up[1] - up[0])) / Math.max(1, across[1] - across[0]) + 100;
  const height = Math.round(Math.min(narrow ? 320 : 460, Math.max(narrow ? 160 : 220, wanted)));
  const box: Box = { left: 16, top: 16, width, height: height - 32 };
  const place = placed(map, box);
  const bins = candidate.result.bins;
  const curve = binCurve(bins, 'error');
  const { road } = view.result;
  const step = Math.max(1, Math.floor(road.size / 1500));
  const paths: Point[][][] = WIDTHS.map(() => []);
  let bin = 0;
  let before = -1;
  let knot = 0;
  while (knot < road.size - 1) {
    const next = Math.min(road.size - 1, knot + step);
    const [from, to] = [road.distance[knot]!, road.distance[next]!];
    while (bin < bins.size && bins.edge[bin + 1]! <= from) bin++;
    if (bin >= bins.size) break;
    let worst = 0;
    for (let i = bin; i < bins.size && bins.edge[i]! < to; i++) {
      if (Math.abs(curve.low[i]!) > Math.abs(worst)) worst = curve.low[i]!;
      if (Math.abs(curve.high[i]!) > Math.abs(worst)) worst = curve.high[i]!;
    }
    const index = errorClass(worst, view.result.band);
    if (index !== before) paths[index]!.push([place.point(knot)]);
    const open = paths[index]!;
    open[open.length - 1]!.push(place.point(next));
    before = index;
    knot = next;
  }
  const d = (points: readonly Point[]) => planPath(points);
  const all: Point[] = [];
  for (let i = 0; i < road.size; i += step) all.push(place.point(i));
  all.push(place.point(road.size - 1));
  const coloured = paths.map((runs, index) => {
    const path = runs.map(d).join('');
    return html`${index > 4 && edges((look) => stroked(path, look), index, paint)}${stroked(path, { stroke: paint.diverging[index]!, width: WIDTHS[index]! })}`;
  });
  const order = [3, 2, 4, 1, 5, 0, 6].map((index) => coloured[index]!);
  const words = {
    title: `The route in plan, coloured by the speed error of ${candidate.name}`,
    desc: `North is up. ${lengthText(view.length)} from start to end. Thick: far from the set speed; with edges: too fast.`,
  };
  return drawing(
    canvas,
    height,
    words,
    html`${stroked(d(all), { stroke: paint.muted, width: 1 })}${order}${unfitStretches(view, place, canvas)}${places(view, place, canvas)}${northArrow(canvas, box)}${scaleBar(canvas, box, place.scale)}${!narrow && key(view, canvas)}`,
  );
}

/** A thin line on both sides, apart from the colour by a gap: seen on light and dark. */
const edges = (draw: (look: LineLook) => Html | null, index: number, paint: Paint): Html =>
  html`${draw({ stroke: paint.ink, width: WIDTHS[index]! + 4.4 })}${draw({ stroke: paint.page, width: WIDTHS[index]! + 2.4 })}`;

/** Where speed hold does not belong: a dotted line over the route. */
function unfitStretches({ result: { road, bends } }: View, { point }: Placed, { paint }: Canvas): Html {
  return html`${(bends?.unfit ?? []).map((stretch) => {
    const points: Point[] = [];
    for (let i = cellOf(road.distance, stretch.from); i < road.size; i++) {
      points.push(point(i));
      if (road.distance[i]! >= stretch.to) break;
    }
    return html`<g><title>${`speed hold does not belong, ${stretchText(stretch.from, stretch.to)}`}</title>${stroked(planPath(points), { stroke: paint.page, width: 3.2 })}${stroked(planPath(points), { stroke: paint.ink, width: 2.6, dash: UNFIT_DASH })}</g>`;
  })}`;
}

interface Placed {
  readonly point: (knot: number) => Point;
  /** User units per metre. */
  readonly scale: number;
}

function spanOf(values: Float64Array): readonly [number, number] {
  let [low, high] = [values[0]!, values[0]!];
  for (const value of values) {
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  return [low, high];
}

function placed(map: PlanMap, box: Box): Placed {
  const [west, east] = spanOf(map.east);
  const [south, north] = spanOf(map.north);
  // Room for the scale bar below and the arrow above.
  const inner = { width: box.width - 40, height: box.height - 50 };
  const scale = Math.min(inner.width / Math.max(1, east - west), inner.height / Math.max(1, north - south));
  const left = box.left + (box.width - (east - west) * scale) / 2;
  const top = box.top + 6 + (inner.height - (north - south) * scale) / 2;
  return {
    scale,
    point: (knot) => [left + (map.east[knot]! - west) * scale, top + (north - map.north[knot]!) * scale],
  };
}

/** A path whose x may turn back: every point that moves by more than a third of a unit. */
function planPath(points: readonly Point[]): string {
  let [px, py] = [Number.NaN, Number.NaN];
  return points
    .filter(([x, y], i) => {
      const far = !(Math.abs(x - px) + Math.abs(y - py) < 0.3) || i === points.length - 1;
      if (far) [px, py] = [x, y];
      return far;
    })
    .map(([x, y], i) => `${i === 0 ? 'M' : 'L'}${tenth(x)},${tenth(y)}`)
    .join('');
}

/** Start, end, and the numbers of the hills, beside the route: across its direction, on the upper side. */
function places(view: View, place: Placed, { paint }: Canvas): Html {
  const { road, hills } = view.result;
  const taken: Point[] = [];
  const mark = (knot: number, text: string): Html | null => {
    const [x, y] = place.point(knot);
    const [x0, y0] = place.point(Math.max(0, knot - 20));
    const [x1, y1] = place.point(Math.min(road.size - 1, knot + 20));
    const length = Math.sqrt((x1 - x0) * (x1 - x0) + (y1 - y0) * (y1 - y0));
    const side = x1 - x0 >= 0 ? 1 : -1;
    const across: Point = length > 0 ? [(side * (y1 - y0)) / length, (-side * (x1 - x0)) / length] : [0, -1];
    const reach = 9 + textWidth(text, 11) * 0.5 * Math.abs(across[0]) + 6 * Math.abs(across[1]);
    const [left, top] = [x + across[0] * reach, y + across[1] * reach + 4];
    if (taken.some(([a, b]) => Math.abs(a - left) < 30 && Math.abs(b - top) < 14)) return null;
    taken.push([left, top]);
    return html`<circle cx="${tenth(x)}" cy="${tenth(y)}" r="2.5" fill="${paint.ink}"/>${label(left, top, text, { anchor: 'middle', size: 11, bold: true, fill: paint.ink })}`;
  };
  return html`${mark(0, 'start')}${mark(road.size - 1, 'end')}${hills.map((hill) => mark(cellOf(road.distance, (hill.from + hill.to) / 2), String(hill.number)))}`;
}

function northArrow({ paint }: Canvas, box: Box): Html {
  const [x, y] = [box.left + 12, box.top + 8];
  return html`<path d="M${x},${y}L${x + 7},${y + 24}L${x},${y + 18}L${x - 7},${y + 24}Z" fill="${paint.ink}"/>${label(x, y + 38, 'N', { anchor: 'middle', bold: true, fill: paint.ink })}`;
}

function scaleBar({ paint }: Canvas, box: Box, scale: number): Html {
  const length = tickStep(0, Math.max(1, box.width / 3 / scale), 2);
  const [x, y] = [box.left + 6, box.top + box.height - 2];
  const text = length < 1000 ? `${fixed(length)} m` : `${fixed(toKm(length))} km`;
  const end = x + length * scale;
  return html`${segment(x, y, end, y, { stroke: paint.ink, width: 2 })}${segment(x, y - 5, x, y + 1, { stroke: paint.ink, width: 2 })}${segment(end, y - 5, end, y + 1, { stroke: paint.ink, width: 2 })}${label(end + 6, y + 2, text, { fill: paint.ink })}`;
}

function key(view: View, { paint, width }: Canvas): Html {
  const left = width - 222;
  const classes = errorClasses(view);
  const unfit = (view.result.bends?.unfit.length ?? 0) > 0;
  const below = 48 + classes.length * 22;
  return html`${label(left, 26, `speed error / ${view.speed.axis}`, { bold: true, fill: paint.ink })}${classes.map(
    ({ index, words }) => {
      const y = 48 + index * 22;
      return html`${index > 4 && edges((look) => segment(left, y - 4, left + 30, y - 4, look), index, paint)}${segment(left, y - 4, left + 30, y - 4, { stroke: paint.diverging[index]!, width: WIDTHS[index]! })}${label(left + 38, y, words, { size: 11, fill: paint.ink })}`;
    },
  )}${unfit && html`${segment(left, below - 4, left + 30, below - 4, { stroke: paint.ink, width: 2.6, dash: UNFIT_DASH })}${label(left + 38, below, 'speed hold does not belong', { size: 11, fill: paint.ink })}`}`;
}
