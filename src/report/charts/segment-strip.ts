import { isNone } from '../../study/findings.ts';
import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { errorClass } from '../model/error-classes.ts';
import type { View } from '../model/view.ts';
import { changeText, stretchText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, scaleOf } from './axes.ts';
import { type Box, type Canvas, drawing, label, rectangle, tenth } from './canvas.ts';
import { holdBrackets, holdHead } from './hold-brackets.ts';

/** The segments as strips, a row for each candidate, coloured by the worst error; up and down wedges say too fast or too slow. */
export function segmentStrip(view: View, canvas: Canvas): Html {
  const { paint, narrow } = canvas;
  const { segments, band } = view.result;
  const left = narrow ? 8 : 130;
  const row = narrow ? 42 : 28;
  const box: Box = {
    left,
    top: 6 + holdHead(view),
    width: canvas.width - left - 16,
    height: row * view.candidates.length,
  };
  const x = scaleOf([0, toKm(view.length)], box.left, box.left + box.width);
  const rows = view.candidates.map((candidate, i) => {
    const top = box.top + i * row + (narrow ? 18 : 3);
    const cells = segments.map((part) => {
      const run = part.runs.find((one) => one.candidate === candidate.name);
      if (run === undefined || isNone(run.worstError)) return null;
      const index = errorClass(run.worstError, band);
      const [a, b] = [x(toKm(part.from)), x(toKm(part.to))];
      const words = `${candidate.name}, ${stretchText(part.from, part.to)}: worst error ${changeText(run.worstError, view.speed)}`;
      const middle = (a + b) / 2;
      const half = Math.min(3.5, (b - a) / 2);
      const up = run.worstError > 0;
      // Beyond the band a wedge says which way, for those who do not see the colour.
      const wedge =
        Math.abs(index - 3) >= 2 &&
        html`<path d="M${tenth(middle - half)},${tenth(up ? top + 8 : top + 12)}H${tenth(middle + half)}L${tenth(middle)},${tenth(up ? top + 3 : top + 17)}Z" fill="${paint.page}"/>`;
      return html`<g><title>${words}</title>${rectangle({ left: a, top, width: Math.max(0.6, b - a), height: 20 }, paint.diverging[index]!)}${wedge}</g>`;
    });
    const name = narrow
      ? label(box.left, top - 6, candidate.name, { fill: paint.ink })
      : label(box.left - 8, top + 14, candidate.name, { anchor: 'end', fill: paint.ink });
    return html`${name}${cells}`;
  });
  const words = {
    title: 'Worst speed error by segment',
    desc: `${segments.length} segments, a row for each candidate; the table below has the figures.`,
  };
  return drawing(
    canvas,
    box.top + box.height + 6 + BOTTOM_AXIS_HEIGHT,
    words,
    html`${holdBrackets(view, canvas, box, x)}${rows}${bottomAxis(canvas, { ...box, height: box.height + 6 }, x, `${view.distanceName} / km`)}`,
  );
}
