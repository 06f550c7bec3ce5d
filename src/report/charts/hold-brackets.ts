import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { holdMarks } from '../model/hold-marks.ts';
import type { View } from '../model/view.ts';
import type { Scale } from './axes.ts';
import { type Box, type Canvas, hatch, rectangle } from './canvas.ts';
import { BRACKETS_HEIGHT, brackets } from './stretches.ts';

/** Height that the brackets take above a plot; none where the set speed never changes, nobody shifts and hold is never off. */
export const holdHead = (view: View): number => (holdMarks(view).length > 0 ? BRACKETS_HEIGHT : 0);

/** Brackets above a plot where a change of set speed is being followed, where the rider shifts, and where hold is off: errors there are planned, or none. */
export const holdBrackets = (view: View, canvas: Canvas, box: Box, x: Scale): Html | false =>
  holdMarks(view).length > 0 &&
  brackets(
    holdMarks(view).map((mark) => ({ ...mark, strong: false })),
    canvas,
    box,
    x,
  );

/** The same places as columns of a plot, behind its lines; hatched where hold is off. */
export const holdColumns = (view: View, { paint, id }: Canvas, box: Box, x: Scale): Html => {
  const marks = holdMarks(view);
  return html`${
    marks.some(({ off }) => off === true) &&
    html`<defs>${hatch(`${id}-off`, 'rising', paint.muted, 7)}</defs>`
  }${marks.map(({ from, to, text, off }) => {
    const [left, right] = [x(toKm(from)), x(toKm(to))];
    const column = { ...box, left, width: Math.max(2, right - left) };
    return html`<g><title>${off === true ? 'hold is off' : text}</title>${
      off === true ? rectangle(column, `url(#${id}-off)`, 0.35) : rectangle(column, paint.grid, 0.6)
    }</g>`;
  })}`;
};
