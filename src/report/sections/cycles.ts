import { LEAST_TURNS, LONGEST_PERIOD, SHORTEST_PERIOD } from '../../study/cycle-shape.ts';
import { LEAST_AMPLITUDE } from '../../study/limit-cycles.ts';
import { toPct } from '../../units/convert.ts';
import { lineKey } from '../charts/line-key.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { amplitudeText, CYCLE_CAUSES, periodText } from '../model/cycle-words.ts';
import { isUnstable } from '../model/loop-words.ts';
import { inReaderUnit } from '../model/reader-unit.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { significant, stretchText, withUnit } from '../quantity.ts';
import { table } from './table.ts';

/** More rows than this are for a spreadsheet. */
const MOST_ROWS = 40;

/** The candidates that swing by their linear loop alone, found here or not. */
function unstableWords({ candidates }: View): string {
  const names = candidates.filter(isUnstable).map(({ name }) => name);
  if (names.length === 0) return '';
  const loops = names.length === 1 ? 'The linear loop of' : 'The linear loops of';
  return ` ${loops} ${names.join(', ')} ${names.length === 1 ? 'is' : 'are'} unstable and swing${names.length === 1 ? 's' : ''} on any road, told here or not.`;
}

/** Oscillations that the loops sustain by themselves; one sentence where there are none. */
export function cycles(view: View): Html {
  const { speed, result } = view;
  const heading = html`<h3 id="limit-cycles">Limit cycles</h3>`;
  const smallest = `Looked for: ±\u00a0${amplitudeText(LEAST_AMPLITUDE, speed)} or more, with a period of ${SHORTEST_PERIOD} to ${LONGEST_PERIOD}\u00a0s, in at least ${LEAST_TURNS} turns where the drive can hold; smaller, faster and slower ones are not told.${unstableWords(view)}`;
  if (result.cycles.length === 0)
    return html`${heading}<p>No candidate was found to swing by itself: no oscillation of the speed error that the road does not ask for. ${smallest}</p>`;
  const rows = result.cycles.slice(0, MOST_ROWS).map((cycle): HtmlValue[] => {
    const candidate = view.candidates.find(({ name }) => name === cycle.candidate);
    return [
      html`<span class="who">${candidate !== undefined && lineKey(candidate, PAGE_PAINT)} ${cycle.candidate}</span>`,
      html`<span class="who">${stretchText(cycle.from, cycle.to)}</span>`,
      periodText(cycle.period),
      String(cycle.turns),
      `±\u00a0${amplitudeText(cycle.speedAmplitude, speed)}`,
      `±\u00a0${withUnit(significant(toPct(cycle.throttleAmplitude), 2), '%')}`,
      html`<span class="wrap what"><strong>${CYCLE_CAUSES[cycle.cause]}</strong>. ${inReaderUnit(cycle.why, speed)}</span>`,
    ];
  });
  const more = result.cycles.length - rows.length;
  return html`${heading}<p>Oscillations that a loop keeps going by itself, found in the speed error and not asked for by the road. Each was replayed with one thing taken away at a time: what makes it die down is its cause. ${smallest}</p>
${table(
  'Limit cycles',
  [
    { head: 'candidate' },
    { head: 'stretch' },
    { head: 'period', number: true },
    { head: 'turns', number: true },
    { head: 'speed', number: true },
    { head: 'throttle', number: true },
    { head: 'why' },
  ],
  rows,
)}${more > 0 && html`<p class="note">${more} more stand in cycles.csv.</p>`}`;
}
