import { type ScaleLinear, scaleLinear } from 'd3';
import { type Html, html } from '../html.ts';
import { digitsFor, fixed } from '../quantity.ts';
import { type Box, type Canvas, label, segment } from './canvas.ts';

export type Scale = ScaleLinear<number, number>;

/** Linear scale from a domain onto a stretch of the drawing. An empty domain is widened, so that nothing divides by zero. */
export function scaleOf(domain: readonly [number, number], from: number, to: number): Scale {
  const [low, high] = domain[1] > domain[0] ? domain : [domain[0] - 0.5, domain[0] + 0.5];
  return scaleLinear().domain([low, high]).range([from, to]);
}

/** Digits after the point that tell neighbouring ticks apart. */
function tickDigits(ticks: readonly number[]): number {
  const step = ticks.length > 1 ? Math.abs(ticks[1]! - ticks[0]!) : Math.abs(ticks[0] ?? 1);
  return step >= 1 ? (Number.isInteger(step) ? 0 : 1) : digitsFor(step, 1);
}

/** Axis below a plot: line, ticks, figures, and its quantity with unit at the right end. `name` null: ticks alone. */
export function bottomAxis(canvas: Canvas, box: Box, x: Scale, name: string | null): Html {
  const { paint, narrow } = canvas;
  const ticks = x.ticks(Math.max(2, Math.floor(box.width / (narrow ? 60 : 80))));
  const digits = tickDigits(ticks);
  const y = box.top + box.height;
  return html`<g>${segment(box.left, y, box.left + box.width, y, { stroke: paint.muted })}${ticks.map(
    (tick) =>
      html`${segment(x(tick), y, x(tick), y + 4, { stroke: paint.muted })}${
        name !== null &&
        label(x(tick), y + 16, fixed(tick, digits), { anchor: 'middle', size: 11, fill: paint.muted })
      }`,
  )}${name !== null && label(box.left + box.width, y + 31, name, { anchor: 'end', fill: paint.ink })}</g>`;
}

/** Height that `bottomAxis` takes below its plot, with a name. */
export const BOTTOM_AXIS_HEIGHT = 36;

/** Axis at the left: grid lines and figures; its quantity with unit stands level, above the plot (empty: the caller writes it). */
export function leftAxis(canvas: Canvas, box: Box, y: Scale, name: string, count?: number): Html {
  const { paint } = canvas;
  const ticks = y.ticks(count ?? Math.max(2, Math.floor(box.height / 40)));
  const digits = tickDigits(ticks);
  return html`<g>${ticks.map(
    (tick) =>
      html`${segment(box.left, y(tick), box.left + box.width, y(tick), {
        stroke: tick === 0 ? paint.muted : paint.grid,
      })}${label(box.left - 6, y(tick) + 4, fixed(tick, digits), { anchor: 'end', size: 11, fill: paint.muted })}`,
  )}${name !== '' && label(0, box.top - 9, name, { bold: true, fill: paint.ink })}</g>`;
}
