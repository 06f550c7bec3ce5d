import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { holdMarks } from '../model/hold-marks.ts';
import type { View } from '../model/view.ts';
import type { Scale } from './axes.ts';
import { type Box, type Canvas, rectangle } from './canvas.ts';
import { BRACKETS_HEIGHT, brackets } from './stretches.ts';

/** Height that the brackets take above a plot; none where the set speed never changes and nobody shifts. */
export const holdHead = (view: View): number => (holdMarks(view).length > 0 ? BRACKETS_HEIGHT : 0);

/** Brackets above a plot where a change of set speed is being followed, and where the rider shifts: errors there are planned. */
export const holdBrackets = (view: View, canvas: Canvas, box: Box, x: Scale): Html | false =>
  holdMarks(view).length > 0 &&
  brackets(
    holdMarks(view).map((mark) => ({ ...mark, strong: false })),
    canvas,
    box,
    x,
  );

/** The same places as columns of a plot, behind its lines. */
export const holdColumns = (view: View, { paint }: Canvas, box: Box, x: Scale): Html =>
  html`${holdMarks(view).map(({ from, to, text }) => {
    const [left, right] = [x(toKm(from)), x(toKm(to))];
    return html`<g><title>${text}</title>${rectangle({ ...box, left, width: Math.max(2, right - left) }, paint.grid, 0.6)}</g>`;
  })}`;
