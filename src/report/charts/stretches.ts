import type { Road } from '../../road/road.ts';
import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import type { Scale } from './axes.ts';
import { type Box, type Canvas, label, rectangle, tenth, textWidth } from './canvas.ts';

/** How strongly a warned stretch is tinted: the lines over it stay readable. */
export const WARNED_OPACITY = 0.16;

/** Stretches of the road that a warning speaks of. */
export const warnedStretches = (road: Road): readonly WarnedStretch[] =>
  road.warnings.flatMap(({ code, message, from, to }) =>
    from !== undefined && to !== undefined && to > from
      ? [{ name: code.replaceAll('-', ' '), message, from, to }]
      : [],
  );

interface WarnedStretch {
  /** A few words. */
  readonly name: string;
  readonly message: string;
  /** Horizontal distance [m]. */
  readonly from: number;
  readonly to: number;
}

/** Columns of a plot behind its lines: where elevation is masked, and where a warning speaks of the road. */
export function stretchBands(road: Road, { paint }: Canvas, box: Box, x: Scale, named: boolean): Html {
  const column = (from: number, to: number): Box => {
    const left = x(toKm(from));
    return { left, top: box.top, width: Math.max(2, x(toKm(to)) - left), height: box.height };
  };
  const masks = road.masks.map(({ from, to, reason }) => {
    const at = column(from, to);
    return html`<g><title>${`masked: ${reason}`}</title>${rectangle(at, paint.grid)}${
      named &&
      label(at.left + at.width / 2, box.top + 11, 'masked', {
        anchor: 'middle',
        size: 10,
        fill: paint.muted,
      })
    }</g>`;
  });
  const warned = warnedStretches(road).map(
    ({ from, to, message }) =>
      html`<g><title>${message}</title>${rectangle(column(from, to), paint.warn, WARNED_OPACITY)}</g>`,
  );
  return html`${masks}${warned}`;
}

export interface Bracket {
  /** Horizontal distance [m]. */
  readonly from: number;
  readonly to: number;
  readonly text: string;
  readonly strong: boolean;
}

/** Height that `brackets` takes above a plot. */
export const BRACKETS_HEIGHT = 22;

/** Brackets with their texts above a plot, in order. A text that would meet the one before it is left out. */
export function brackets(items: readonly Bracket[], { paint }: Canvas, box: Box, x: Scale): Html {
  const y = box.top - 8;
  let free = Number.NEGATIVE_INFINITY;
  return html`<g>${items.map(({ from, to, text, strong }) => {
    const left = x(toKm(from));
    const right = Math.max(x(toKm(to)), left + 2);
    const half = textWidth(text, 11) / 2 + 1;
    const middle = Math.min(Math.max((left + right) / 2, half), box.left + box.width + 8 - half);
    const fits = middle - half > free;
    if (fits) free = middle + half;
    const stroke = strong ? paint.warn : paint.muted;
    return html`<path d="M${tenth(left)},${tenth(y + 4)}V${tenth(y)}H${tenth(right)}V${tenth(y + 4)}" fill="none" stroke="${stroke}" stroke-width="1.5"/>${
      fits && label(middle, y - 4, text, { anchor: 'middle', size: 11, bold: strong, fill: paint.ink })
    }`;
  })}</g>`;
}
