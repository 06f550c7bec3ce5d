import { isNone } from '../../study/findings.ts';
import { type Html, html } from '../html.ts';
import { figureText, figureTextBeside, marginText } from '../model/figure-text.ts';
import { inReaderUnit } from '../model/reader-unit.ts';
import { NO_VALUE, placeText, type SpeedUnit, significant } from '../quantity.ts';
import type { Section } from '../sections/section.ts';
import { table } from '../sections/table.ts';
import type { CandidateChange, Comparison, GainChange } from './compare-results.ts';
import type { Change, FigureChange } from './figure-changes.ts';

const LOOKS: Readonly<Record<Change, { mark: string; look: string }>> = {
  better: { mark: '▲', look: 'good' },
  worse: { mark: '▼', look: 'bad' },
  changed: { mark: '◆', look: 'open' },
  same: { mark: '=', look: '' },
  'not comparable': { mark: '○', look: 'open' },
};

/** How a change is marked: a sign beside the colour. */
export const changeMark = (change: Change): Html | string =>
  change === 'same'
    ? 'same'
    : html`<span class="verdict ${LOOKS[change].look}"><span aria-hidden="true">${LOOKS[change].mark}</span> ${change}</span>`;

/** 3: every figure that changed, candidate by candidate. */
export function figuresPart({ candidates }: Comparison, speed: SpeedUnit): Section {
  const body =
    candidates.length === 0
      ? html`<p>No candidate is in both results: there is nothing to set side by side.</p>`
      : html`${candidates.map((candidate) => candidatePart(candidate, speed))}`;
  return { id: 'figures', number: 3, title: 'Figures, candidate by candidate', body };
}

function candidatePart(candidate: CandidateChange, speed: SpeedUnit): Html {
  const { name, figures, gains } = candidate;
  const changed = figures.filter(({ change }) => change !== 'same');
  const same = figures.filter(({ change, after }) => change === 'same' && !isNone(after));
  return html`<h3>${name}</h3>
${endWords(candidate)}${gains.length > 0 && html`<p class="note">Gains: ${gains.map(gainText).join('; ')}.</p>`}${changed.length === 0 ? html`<p>Every figure is the same.</p>` : figureTable(name, changed, speed)}${
  changed.length > 0 &&
  same.length > 0 &&
  html`<p class="note">The same in both: ${same.map(({ label }) => label.toLowerCase()).join(', ')}.</p>`
}
`;
}

function endWords({ before, after }: CandidateChange): Html | null {
  const words = ({ status, end_m }: CandidateChange['after']) =>
    status === 'completed' ? 'reached the end' : `${status.replaceAll('_', ' ')} at ${placeText(end_m)}`;
  const [was, is] = [words(before), words(after)];
  return was === is && before.status === 'completed'
    ? null
    : html`<p class="note">Before it ${was}${was === is ? ', and after too' : `; after it ${is}`}.</p>`;
}

/** The key has the unit: it stands as in summary.json. */
function gainText({ key, before, after }: GainChange): string {
  const text = (value: GainChange['after']) =>
    value === null ? 'none' : typeof value === 'number' ? significant(value, 4) : value;
  return `${key} ${text(before)} → ${text(after)}`;
}

function figureTable(name: string, changes: readonly FigureChange[], speed: SpeedUnit): Html {
  const rows = changes.map(({ label, unit, before, after, difference, change }) => [
    label,
    valueCell(before, after, unit, speed),
    valueCell(after, before, unit, speed),
    isNone(difference) ? NO_VALUE : marginText(difference, unit, speed),
    html`${changeMark(change)}${isNone(difference) && html`<br><span class="wrap small">${inReaderUnit(difference.none, speed)}</span>`}`,
  ]);
  return table(
    `Figures of ${name}`,
    [
      { head: 'figure' },
      { head: 'before', number: true },
      { head: 'after', number: true },
      { head: 'difference', number: true },
      { head: 'change' },
    ],
    rows,
  );
}

function valueCell(
  value: FigureChange['before'],
  other: FigureChange['before'],
  unit: string,
  speed: SpeedUnit,
): string {
  return isNone(other) ? figureText(value, unit, speed) : figureTextBeside(value, [other], unit, speed);
}
