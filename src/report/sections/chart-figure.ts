import type { Canvas } from '../charts/canvas.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { PAGE_PAINT } from '../paint.ts';

/** Widths in user units: as wide as the text column, and as wide as a small screen. */
export const WIDE = 980;
export const NARROW = 360;
/** As wide as one of two charts side by side. */
export const HALF = 480;

/**
 * A chart twice, for wide and for narrow screens, so that its words can be read on both; the style sheet shows one.
 * Ids get a prefix each.
 */
export function chartFigure(
  id: string,
  draw: (canvas: Canvas) => Html,
  caption: HtmlValue,
  widths: { readonly wide: number; readonly narrow: number } = { wide: WIDE, narrow: NARROW },
): Html {
  const wide = draw({ id: `${id}-w`, paint: PAGE_PAINT, width: widths.wide, narrow: false });
  const narrow = draw({ id: `${id}-n`, paint: PAGE_PAINT, width: widths.narrow, narrow: true });
  return html`<figure><div class="wide">${wide}</div><div class="narrow">${narrow}</div><figcaption>${caption}</figcaption></figure>`;
}
