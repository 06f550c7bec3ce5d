import { isNone, type RequirementFinding, type Where } from '../../study/findings.ts';
import { lineKey } from '../charts/line-key.ts';
import { type Html, html } from '../html.ts';
import { answerOf, type DesignStanding, type Standing } from '../model/answer.ts';
import { figureLabel, figureText, marginText, readable } from '../model/figure-text.ts';
import { inReaderUnit } from '../model/reader-unit.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { bandText, fixed, NO_VALUE, placeText, stretchText, withUnit } from '../quantity.ts';
import type { Section } from './section.ts';
import { table } from './table.ts';

const STANDING: Readonly<
  Record<Standing, { readonly mark: string; readonly words: string; readonly look: string }>
> = {
  met: { mark: '✓', words: 'All requirements met', look: 'good' },
  'not met': { mark: '✗', words: 'A requirement is not met', look: 'bad' },
  'too close to call': { mark: '≈', words: 'Too close to call', look: 'open' },
  'none asked': { mark: '·', words: 'No requirement given', look: 'open' },
  incomplete: { mark: '✗', words: 'The run ended early', look: 'bad' },
};

/** 1: the answer in one sentence, then what was asked and what came out. */
export function answerSection(view: View): Section {
  const answer = answerOf(view);
  const standing = STANDING[answer.standing];
  const { defaults, requirements, overrides, warnings } = view.result;
  const ofVehicle = defaults.filter((one) => one.of === 'vehicle').length;
  const body = html`<div class="answer ${standing.look}"><p class="standing"><span aria-hidden="true">${standing.mark}</span> ${standing.words}${answer.design !== null && html` <span class="of">(${answer.design})</span>`}</p><p class="sentence">${answer.sentence}</p>${answer.designs.length > 1 && requirements.length > 0 && standings(answer.designs)}</div>
${requirements.length === 0 ? html`<p>The case gives no requirement; the figures below stand by themselves.</p>` : requirementTable(view)}
<p class="note">${defaultsWords(ofVehicle)}${overrides.length > 0 && html` Changed beside the case: ${overrides.join('; ')}.`}${warnings.length > 0 && html` <a href="#method-cautions">${warnings.length === 1 ? 'One warning' : `${warnings.length} warnings`}</a> came with the run.`}</p>
<p class="caution"><strong>A simulation is no approval to ride.</strong> Speed hold can hide a slide, a bend or a stop ahead. Local rules, type approval and qualified people come first: <a href="#method-cautions">all cautions</a>.</p>`;
  return { id: 'answer', number: 1, title: 'The answer', body };
}

/** One word for each design, so that the best one does not speak for the rest. */
const standings = (designs: readonly DesignStanding[]): Html =>
  html`<ul class="keys">${designs.map(({ name, standing, words }) => {
    const { mark, look } = STANDING[standing];
    return html`<li><span class="verdict ${look}"><span aria-hidden="true">${mark}</span> ${name}</span> ${words}</li>`;
  })}</ul>`;

function defaultsWords(count: number): Html {
  if (count === 0) return html`Every figure of the vehicle was given; none is a default.`;
  return html`<a href="#method-defaults">${count === 1 ? 'One figure' : `${count} figures`} of the vehicle ${count === 1 ? 'is a default' : 'are defaults'}</a>, not given by its file.`;
}

const VERDICT = {
  met: { mark: '✓', look: 'good' },
  'not met': { mark: '✗', look: 'bad' },
  'too close to call': { mark: '≈', look: 'open' },
} as const;

function requirementTable(view: View): Html {
  const look = new Map(view.candidates.map((candidate) => [candidate.name, candidate]));
  const rows = view.result.requirements.map((finding) => {
    const { unit } = figureLabel(finding.requirement.figure);
    const verdict = VERDICT[finding.verdict];
    const candidate = look.get(finding.candidate);
    return [
      finding.requirement.id,
      html`<span class="verdict ${verdict.look}"><span aria-hidden="true">${verdict.mark}</span> ${finding.verdict}</span>`,
      html`<span class="who">${candidate !== undefined && lineKey(candidate, PAGE_PAINT)} ${finding.candidate}</span>`,
      asked(view, finding),
      measured(view, finding, unit),
      limit(view, finding, unit),
      marginText(finding.margin, unit, view.speed),
      finding.worstAt === null ? NO_VALUE : placeText(finding.worstAt),
    ];
  });
  return table(
    'Requirements',
    [
      { head: 'id' },
      { head: 'verdict' },
      { head: 'candidate' },
      { head: 'figure' },
      { head: 'measured', number: true },
      { head: 'limit', number: true },
      { head: 'margin', number: true },
      { head: 'worst at', number: true },
    ],
    rows,
  );
}

function asked(view: View, { requirement, words }: RequirementFinding): Html {
  const { label } = figureLabel(requirement.figure);
  const band = requirement.band === null ? '' : ` ${bandText(requirement.band, view.speed)}`;
  return html`<span class="wrap what"><span title="${inReaderUnit(words, view.speed)}">${label}${band}</span><br><span class="small">${whereWords(requirement.where)}</span></span>`;
}

export function whereWords(where: Where): string {
  if (where === 'holdable') return 'where the drive can hold it';
  if (where === 'all') return 'on the whole road';
  return stretchText(where.from, where.to);
}

function measured(view: View, { measured: value, spread }: RequirementFinding, unit: string): Html {
  if (isNone(value)) return html`<span class="wrap reason small">${value.none}</span>`;
  const wide = readable(spread, unit, view.speed);
  const digits = wide.value >= 1 ? 0 : wide.value >= 0.05 ? 1 : 2;
  const spreadWords = wide.value >= 0.005 ? ` ± ${fixed(wide.value, digits)}` : '';
  return html`${figureText(value, unit, view.speed)}${spreadWords !== '' && html`<span class="small">${spreadWords}</span>`}`;
}

function limit(view: View, { requirement }: RequirementFinding, unit: string): string {
  const text = (value: number): string => {
    const shown = readable(value, unit, view.speed);
    return withUnit(fixed(shown.value, Number.isInteger(shown.value) ? 0 : 1), shown.unit);
  };
  const bounds = [
    requirement.atLeast === null ? '' : `≥ ${text(requirement.atLeast)}`,
    requirement.atMost === null ? '' : `≤ ${text(requirement.atMost)}`,
  ];
  return bounds.filter((bound) => bound !== '').join(', ');
}
