import { whereMeasured } from '../../study/where-measured.ts';
import { fromKmh } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { figureLabel, marginText } from '../model/figure-text.ts';
import { inReaderUnit } from '../model/reader-unit.ts';
import type { Verdict } from '../model/verdicts.ts';
import { bandText, NO_VALUE, type SpeedUnit } from '../quantity.ts';
import { STANDING } from '../sections/answer-section.ts';
import type { Section } from '../sections/section.ts';
import { table } from '../sections/table.ts';
import type { Comparison } from './compare-results.ts';
import { type ComparisonAnswer, comparisonAnswer, limitText, valueText } from './comparison-answer.ts';
import type { MatrixChanges } from './matrix-changes.ts';
import type { SummaryRequirement } from './read-summary.ts';
import type { RequirementChange, RequirementFate } from './requirement-changes.ts';

const LOOKS: Readonly<Record<ComparisonAnswer['standing'], { mark: string; words: string; look: string }>> = {
  worse: { mark: '✗', words: 'Something that was met no longer is', look: 'bad' },
  better: { mark: '✓', words: 'More is met, and nothing is lost', look: 'good' },
  even: { mark: '=', words: 'Nothing that was met is lost', look: 'open' },
  apart: { mark: '○', words: 'No requirement in common', look: 'open' },
};

const FATES: Readonly<Record<RequirementFate, { words: string; look: string }>> = {
  lost: { words: 'no longer met', look: 'bad' },
  gained: { words: 'now met', look: 'good' },
  changed: { words: 'another verdict', look: 'open' },
  same: { words: 'as before', look: '' },
  new: { words: 'only after', look: 'open' },
  dropped: { words: 'only before', look: 'open' },
};

/** 1: the answer in one sentence, then requirement by requirement. */
export function answerPart(comparison: Comparison, speed: SpeedUnit): Section {
  const { standing, sentence } = comparisonAnswer(comparison, speed);
  const { mark, words, look } = LOOKS[standing];
  const asked = comparison.requirements;
  const other = asked.some(({ askedDifferently }) => askedDifferently);
  const body = html`<div class="answer ${look}"><p class="standing"><span aria-hidden="true">${mark}</span> ${words}</p><p class="sentence">${sentence}</p></div>
${asked.length === 0 ? html`<p>Neither result has a requirement; the figures below stand by themselves.</p>` : requirementTable(asked, speed)}
${comparison.matrix !== null && matrixPart(comparison.matrix, speed)}
${other && html`<p class="note">A limit with an arrow, and a figure marked <em>asked differently</em>, is not the same requirement in both: its verdicts answer two questions.</p>`}
<p class="caution"><strong>A simulation is no approval to ride.</strong> A better figure is better on this road, with these inputs. Local rules, type approval and qualified people come first: <a href="#method">how it was compared</a>.</p>`;
  return { id: 'answer', number: 1, title: 'The answer', body };
}

function requirementTable(changes: readonly RequirementChange[], speed: SpeedUnit): Html {
  const rows = changes.map((change) => {
    const { id, candidate, fate, before, after } = change;
    const is = (after ?? before)!;
    const { words, look } = FATES[fate];
    return [
      id,
      look === '' ? words : html`<span class="verdict ${look}">${words}</span>`,
      html`<span class="who">${candidate}</span>`,
      askedText(change, is, speed),
      verdictText(before),
      verdictText(after),
      measuredCell(before, after, speed),
      measuredCell(after, before, speed),
      differenceText(change, speed),
      limitsText(change, is, speed),
    ];
  });
  return table(
    'Requirements before and after',
    [
      { head: 'id' },
      { head: 'change' },
      { head: 'candidate' },
      { head: 'figure' },
      { head: 'verdict before' },
      { head: 'verdict after' },
      { head: 'before', number: true },
      { head: 'after', number: true },
      { head: 'difference', number: true },
      { head: 'limit', number: true },
    ],
    rows,
    'dense',
  );
}

/** Rows of a table that is still read; the rest is for programs. */
const MOST_CELLS = 40;

function matrixPart({ combinations, verdicts, changes }: MatrixChanges, speed: SpeedUnit): Html {
  const head = html`<h3>The matrix</h3>
<p>${combinations === 1 ? 'One combination is' : `${combinations} combinations are`} in both matrices, with ${verdicts} verdicts; ${changes.length === 0 ? 'none' : changes.length} of them changed.</p>`;
  if (changes.length === 0) return head;
  const rows = changes
    .slice(0, MOST_CELLS)
    .map(({ combination, id, candidate, fate, before, after }) => [
      inReaderUnit(combination, speed),
      id,
      html`<span class="who">${candidate}</span>`,
      html`<span class="verdict ${FATES[fate].look}">${FATES[fate].words}</span>`,
      verdictMark(before),
      verdictMark(after),
    ]);
  const columns = ['combination', 'id', 'candidate', 'change', 'verdict before', 'verdict after'];
  return html`${head}
${table(
  'Verdicts of the matrix that changed',
  columns.map((name) => ({ head: name })),
  rows,
)}${changes.length > MOST_CELLS && html`<p class="note">The first ${MOST_CELLS} of ${changes.length}; compare.json has them all.</p>`}`;
}

function askedText(
  { before, after, askedDifferently }: RequirementChange,
  is: SummaryRequirement,
  speed: SpeedUnit,
): Html {
  const label = (one: SummaryRequirement) =>
    `${figureLabel(one.figure).label}${one.band_kmh === undefined ? '' : ` ${bandText(fromKmh(one.band_kmh), speed)}`}`;
  const where = (one: SummaryRequirement) => {
    const over = whereMeasured(one.figure, one.where);
    return over === 'holdable' ? 'where the drive can hold it' : over === 'all' ? 'on the whole road' : over;
  };
  const both = (of: (one: SummaryRequirement) => string) =>
    before === null || after === null || of(before) === of(after) ? of(is) : `${of(before)} → ${of(after)}`;
  return html`<span class="wrap">${both(label)}<br><span class="small">${both(where)}${askedDifferently && ', asked differently'}</span></span>`;
}

const verdictText = (asked: SummaryRequirement | null): Html | string =>
  asked === null ? NO_VALUE : verdictMark(asked.verdict);

function verdictMark(verdict: Verdict): Html {
  const { mark, look } = STANDING[verdict];
  return html`<span class="verdict ${look}"><span aria-hidden="true">${mark}</span> ${verdict}</span>`;
}

function measuredCell(
  asked: SummaryRequirement | null,
  other: SummaryRequirement | null,
  speed: SpeedUnit,
): Html | string {
  if (asked === null) return NO_VALUE;
  if (asked.measured !== null) return valueText(asked, other, speed);
  return html`<span class="wrap reason small">${inReaderUnit(asked.measured_reason ?? 'no figure', speed)}</span>`;
}

function differenceText({ before, after }: RequirementChange, speed: SpeedUnit): string {
  if (typeof before?.measured !== 'number' || typeof after?.measured !== 'number') return NO_VALUE;
  if (before.figure !== after.figure) return NO_VALUE;
  if (before.measured === after.measured) return '0';
  return marginText(after.measured - before.measured, figureLabel(after.figure).unit, speed);
}

function limitsText({ before, after }: RequirementChange, is: SummaryRequirement, speed: SpeedUnit): string {
  if (before === null || after === null) return limitText(is, speed);
  const [was, now] = [limitText(before, speed), limitText(after, speed)];
  return was === now ? now : `${was} → ${now}`;
}
