import type { Gains } from '../../control/sampled-loop.ts';
import { type Html, html } from '../html.ts';
import { fixed } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  clip,
  clipped,
  drawing,
  filled,
  label,
  segment,
  stroked,
  textWidth,
  type Words,
} from './canvas.ts';
import { decadesOf, logarithmicAxis } from './log-axis.ts';
import { linePath, type Point } from './paths.ts';

/** Gains of a candidate that is drawn with its name. */
export interface MarkedGains extends Gains {
  readonly name: string;
  /** Index into Paint.series. */
  readonly colour: number;
  readonly proposed: boolean;
  readonly chosen: boolean;
}

/** Gains by kp and ki, in the unit of the axes. */
export interface GainMap {
  /** The greatest ki under the bound, by rising kp. */
  readonly border: readonly Gains[];
  /** Gains tried on the road, with their costs. */
  readonly trials: readonly (Gains & { readonly cost: number })[];
  readonly marked: readonly MarkedGains[];
  /** Names of the axes, with their units. */
  readonly axes: { readonly kp: string; readonly ki: string };
}

/** Decades below the greatest values that are drawn at most. */
const DECADES = 2;
const SIGN = 5;

/**
 * The gains in the plane of kp and ki, both logarithmic: under the curve the bound is kept at every operating point;
 * what was tried on the road as dots, the cheaper the larger; candidates of the case as squares, proposals as diamonds, the chosen one ringed.
 */
export function gainMap(map: GainMap, words: Words, canvas: Canvas): Html {
  const { paint, narrow, id } = canvas;
  const box: Box = {
    left: narrow ? 46 : 56,
    top: 30,
    width: canvas.width - (narrow ? 62 : 76),
    height: narrow ? 280 : 380,
  };
  const all = [...map.border, ...map.marked, ...map.trials].filter(({ kp, ki }) => kp > 0 && ki > 0);
  const x = scaleOf(domainOf(decades(all, 'kp'), decades(map.marked, 'kp')), box.left, box.left + box.width);
  const y = scaleOf(domainOf(decades(all, 'ki'), decades(map.marked, 'ki')), box.top + box.height, box.top);
  const at = ({ kp, ki }: Gains): Point => [x(decadesOf(kp)), y(decadesOf(ki))];
  const edge = map.border.map(at);
  const floor = box.top + box.height;
  const [first, last] = [edge[0], edge.at(-1)];
  const area =
    first === undefined || last === undefined
      ? ''
      : `${linePath([[first[0], floor], ...edge, [last[0], floor]])}Z`;
  const body = html`<defs>${clip(`${id}-c`, box)}</defs>${clipped(`${id}-c`, html`${filled(area, paint.band)}`)}${logarithmicAxis(canvas, box, x, map.axes.kp)}${logarithmicLeft(canvas, box, y, map.axes.ki)}${clipped(
    `${id}-c`,
    html`${stroked(linePath(edge), { stroke: paint.ink, width: 1.6 })}${trialDots(map.trials, at, canvas)}${map.marked.map((one) => sign(one, at(one), canvas))}`,
  )}${names(map.marked, at, box, canvas)}`;
  return drawing(canvas, box.top + box.height + BOTTOM_AXIS_HEIGHT, words, body);
}

const decades = (gains: readonly Gains[], of: 'kp' | 'ki'): number[] =>
  gains.map((one) => decadesOf(one[of]));

/** A little around all values, no more than some decades but for those that are marked. */
function domainOf(values: readonly number[], marked: readonly number[]): [number, number] {
  const most = values.reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY);
  const least = values.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
  if (!Number.isFinite(most)) return [-1, 1];
  const lowest = marked.reduce((a, b) => Math.min(a, b), most - DECADES);
  return [Math.max(least, lowest) - 0.1, most + 0.12];
}

/** The cheaper the larger. */
function trialDots(trials: GainMap['trials'], at: (gains: Gains) => Point, { paint }: Canvas): Html {
  const costs = trials.map(({ cost }) => cost).filter(Number.isFinite);
  const least = costs.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
  return html`${trials.map((trial) => {
    if (!(trial.kp > 0 && trial.ki > 0)) return null;
    const [cx, cy] = at(trial);
    const worth = Number.isFinite(trial.cost) && trial.cost > 0 && least > 0 ? least / trial.cost : 0;
    return html`<circle cx="${fixed(cx, 1)}" cy="${fixed(cy, 1)}" r="${fixed(1.2 + 2 * worth * worth, 1)}" fill="${paint.muted}" fill-opacity="0.55"/>`;
  })}`;
}

function sign({ colour, proposed, chosen }: MarkedGains, [cx, cy]: Point, { paint }: Canvas): Html {
  const fill = paint.series[colour]!;
  const r = SIGN;
  const d = proposed
    ? `M${tenth(cx)},${tenth(cy - r - 1)}L${tenth(cx + r + 1)},${tenth(cy)}L${tenth(cx)},${tenth(cy + r + 1)}L${tenth(cx - r - 1)},${tenth(cy)}Z`
    : `M${tenth(cx - r)},${tenth(cy - r)}H${tenth(cx + r)}V${tenth(cy + r)}H${tenth(cx - r)}Z`;
  const ring =
    chosen &&
    html`<circle cx="${tenth(cx)}" cy="${tenth(cy)}" r="${r + 6}" fill="none" stroke="${paint.ink}" stroke-width="1.8"/>`;
  return html`<path d="${d}" fill="${fill}" stroke="${paint.page}" stroke-width="1"/>${ring}`;
}
const tenth = (value: number): number => Math.round(value * 10) / 10 + 0;

/** Names at the right of their signs, or at the left near the edge, pushed apart where they would meet. */
function names(
  marked: readonly MarkedGains[],
  at: (gains: Gains) => Point,
  box: Box,
  { paint, narrow }: Canvas,
): Html {
  const size = narrow ? 10 : 11;
  const row = size + 3;
  const placed = marked.map((one) => {
    const [cx, cy] = at(one);
    return { left: cx - 8, right: cx + 8, y: cy };
  });
  const inside = marked
    .map((one) => ({ one, place: at(one) }))
    .filter(({ place: [cx, cy] }) => cx >= box.left && cy <= box.top + box.height)
    .sort((a, b) => a.place[1] - b.place[1]);
  return html`${inside.map(({ one, place: [cx, cy] }) => {
    const width = textWidth(one.name, size);
    const atRight = cx + 16 + width <= box.left + box.width;
    const left = atRight ? cx + 14 : cx - 14 - width;
    let y = cy;
    const meets = () =>
      placed.some((other) => left < other.right && left + width > other.left && Math.abs(y - other.y) < row);
    while (meets()) y += 2;
    placed.push({ left, right: left + width, y });
    const pulled = Math.abs(y - cy) > 3;
    const from = atRight ? left - 2 : left + width + 2;
    const toSign = atRight ? cx + 7 : cx - 7;
    return html`${pulled && segment(from, y, toSign, cy, { stroke: paint.muted, width: 0.7 })}${label(left, y + 4, one.name, { size, bold: one.chosen, fill: paint.ink })}`;
  })}`;
}

/** As the logarithmic axis below, at the left. */
function logarithmicLeft(canvas: Canvas, box: Box, y: ReturnType<typeof scaleOf>, name: string): Html {
  const { paint } = canvas;
  const [low, high] = y.domain() as [number, number];
  const lines: Html[] = [];
  for (let decade = Math.floor(low); decade <= Math.ceil(high); decade++)
    for (let k = 1; k < 10; k++) {
      const place = decade + decadesOf(k);
      if (place < low - 1e-9 || place > high + 1e-9) continue;
      const level = y(place);
      lines.push(
        segment(box.left, level, box.left + box.width, level, {
          stroke: paint.grid,
          opacity: k === 1 ? 1 : 0.6,
        }),
      );
      if (k > 1) continue;
      const text = decade >= 0 ? `1${'0'.repeat(decade)}` : `0.${'0'.repeat(-decade - 1)}1`;
      lines.push(label(box.left - 6, level + 4, text, { anchor: 'end', size: 11, fill: paint.muted }));
    }
  return html`<g>${lines}${label(0, box.top - 9, name, { bold: true, fill: paint.ink })}</g>`;
}
