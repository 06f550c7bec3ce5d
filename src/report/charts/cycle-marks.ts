import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { CYCLE_CAUSES, swingText } from '../model/cycle-words.ts';
import type { View } from '../model/view.ts';
import type { Scale } from './axes.ts';
import { type Box, type Canvas, tenth } from './canvas.ts';

/** Height and half length of a wave, and from one candidate's row to the next [user units]. */
const HEIGHT = 4;
const HALF = 3;
const ROW = 8;

/** Limit cycles as small waves along the upper edge of a plot, a row for each candidate that has any, in its colour. */
export function cycleMarks(view: View, { paint }: Canvas, box: Box, x: Scale): Html {
  const swinging = view.candidates.filter(({ name }) =>
    view.result.cycles.some(({ candidate }) => candidate === name),
  );
  return html`${swinging.flatMap((candidate, row) =>
    view.result.cycles
      .filter((cycle) => cycle.candidate === candidate.name)
      .map((cycle) => {
        const top = box.top - HEIGHT + row * ROW;
        const left = x(toKm(cycle.from));
        const waves = Math.max(2, Math.round((x(toKm(cycle.to)) - left) / HALF));
        const steps = Array.from({ length: waves }, (_, k) => `l${HALF},${k % 2 === 0 ? HEIGHT : -HEIGHT}`);
        return html`<g><title>${`${candidate.name} swings by itself, ${swingText(cycle, view.speed)}: ${CYCLE_CAUSES[cycle.cause]}`}</title><path d="M${tenth(left)},${tenth(top)}${steps.join('')}" fill="none" stroke="${paint.series[candidate.colour]!}" stroke-width="1.2"/></g>`;
      }),
  )}`;
}
