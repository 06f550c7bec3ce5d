import { type Html, html } from '../html.ts';
import { label, textWidth } from './canvas.ts';

/** A sign with its meaning, as it stands in a key inside a drawing. */
export interface KeyItem {
  /** The sign, `SIGN_WIDTH` wide at most, with its left end and its middle height there. */
  readonly sign: (left: number, middle: number) => Html;
  readonly text: string;
}

export const SIGN_WIDTH = 22;
const GAP = 18;
const ROW = 20;

/**
 * A key in rows from left to right, as many rows as the width asks for.
 *
 * @param baseline of the first row
 * @returns the drawing, and the height that all rows take
 */
export function keyRows(
  items: readonly KeyItem[],
  left: number,
  baseline: number,
  width: number,
  fill: string,
): { readonly body: Html; readonly height: number } {
  let [x, y] = [left, baseline];
  const drawn = items.map(({ sign, text }) => {
    const size = SIGN_WIDTH + 6 + textWidth(text, 11);
    if (x > left && x + size > left + width) [x, y] = [left, y + ROW];
    const one = html`${sign(x, y - 4)}${label(x + SIGN_WIDTH + 6, y, text, { size: 11, fill })}`;
    x += size + GAP;
    return one;
  });
  return { body: html`<g>${drawn}</g>`, height: y - baseline + ROW };
}
