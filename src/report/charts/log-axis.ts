import { log } from '../../numeric/elementary.ts';
import { type Html, html } from '../html.ts';
import { trimmed } from '../quantity.ts';
import type { Scale } from './axes.ts';
import { type Box, type Canvas, label, segment } from './canvas.ts';

/** Decades: what a logarithmic axis is linear in. The same on every engine, which a logarithm of the engine's is not. */
export const decadesOf = (value: number): number => log(value) / Math.LN10;

/**
 * Axis below a plot over decades: a line and a figure at each whole one, lines at 2 to 9 between them, and its quantity with
 * unit at the right end. `name` null: lines alone.
 *
 * @param x scale over `decadesOf` the quantity
 */
export function logarithmicAxis(canvas: Canvas, box: Box, x: Scale, name: string | null): Html {
  const { paint } = canvas;
  const [low, high] = x.domain() as [number, number];
  const bottom = box.top + box.height;
  const lines: Html[] = [];
  for (let decade = Math.floor(low); decade <= Math.ceil(high); decade++) {
    const unit = tens(decade);
    for (let k = 1; k < 10; k++) {
      const at = decade + decadesOf(k);
      if (at < low - 1e-9 || at > high + 1e-9) continue;
      const place = x(at);
      lines.push(segment(place, box.top, place, bottom, { stroke: paint.grid, opacity: k === 1 ? 1 : 0.6 }));
      if (name === null || k > 1) continue;
      lines.push(segment(place, bottom, place, bottom + 4, { stroke: paint.muted }));
      const look = { anchor: 'middle', size: 11, fill: paint.muted } as const;
      lines.push(label(place, bottom + 16, trimmed(unit, 4), look));
    }
  }
  return html`<g>${lines}${segment(box.left, bottom, box.left + box.width, bottom, { stroke: paint.muted })}${
    name !== null && label(box.left + box.width, bottom + 31, name, { anchor: 'end', fill: paint.ink })
  }</g>`;
}

function tens(decade: number): number {
  let unit = 1;
  for (let i = Math.abs(decade); i > 0; i--) unit *= 10;
  return decade < 0 ? 1 / unit : unit;
}
