import { isNone, type Requirement, type RequirementFinding } from '../../study/findings.ts';
import { whereMeasured } from '../../study/where-measured.ts';
import { toKmh } from '../../units/convert.ts';
import { lineKey } from '../charts/line-key.ts';
import { type Html, html } from '../html.ts';
import { type Answer, answerOf } from '../model/answer.ts';
import type { DesignStanding, Standing } from '../model/design-standing.ts';
import { figureLabel, figureTextBeside, marginText, readable } from '../model/figure-text.ts';
import { inReaderUnit } from '../model/reader-unit.ts';
import type { CandidateView, View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import {
  bandText,
  fixed,
  NO_VALUE,
  placeText,
  type SpeedUnit,
  stretchText,
  trimmed,
  withUnit,
} from '../quantity.ts';
import type { Section } from './section.ts';
import { table } from './table.ts';

/** How a verdict is marked: a sign beside the colour. */
export const STANDING: Readonly<
  Record<Standing, { readonly mark: string; readonly words: string; readonly look: string }>
> = {
  met: { mark: '✓', words: 'All requirements met', look: 'good' },
  'met in part': { mark: '◐', words: 'Met where the drive can hold, not asked of the rest', look: 'open' },
  unstable: { mark: '✗', words: 'The loop is unstable', look: 'bad' },
  'not met': { mark: '✗', words: 'A requirement is not met', look: 'bad' },
  'too close to call': { mark: '≈', words: 'Too close to call', look: 'open' },
  'not judged': { mark: '○', words: 'Not all of it can be judged', look: 'open' },
  'none asked': { mark: '·', words: 'No requirement given', look: 'open' },
  incomplete: { mark: '✗', words: 'The run ended early', look: 'bad' },
};

/** 1: the answer in one sentence, then what was asked and what came out. */
export function answerSection(view: View): Section {
  const answer = answerOf(view);
  const standing = STANDING[answer.standing];
  const { defaults, requirements, overrides, warnings } = view.result;
  const ofVehicle = defaults.filter((one) => one.of === 'vehicle').length;
  const body = html`<div class="answer ${standing.look}"><p class="standing"><span aria-hidden="true">${standing.mark}</span> ${standing.words}${answer.design !== null && html` <span class="of">(${answer.design}${view.result.matrix !== null && ', the case itself'})</span>`}</p><p class="sentence">${sentenceOf(answer)}</p>${answer.designs.length > 1 && requirements.length > 0 && standings(answer.designs)}</div>
${requirements.length === 0 ? html`<p>The case gives no requirement; the figures below stand by themselves.</p>` : requirementTable(view)}
<p class="note">${defaultsWords(ofVehicle)}${overrides.length > 0 && html` Changed beside the case: ${overrides.join('; ')}.`}${warnings.length > 0 && html` <a href="#method-cautions">${warnings.length === 1 ? 'One warning' : `${warnings.length} warnings`}</a> came with the run.`}</p>
<p class="caution"><strong>A simulation is no approval to ride.</strong> Speed hold can hide a slide, a bend or a stop ahead. Local rules, type approval and qualified people come first: <a href="#method-cautions">all cautions</a>.</p>`;
  return { id: 'answer', number: 1, title: 'The answer', body };
}

/** The sentence, the design that it begins with set off: a name may be a word like any other. */
function sentenceOf({ design, sentence }: Answer): Html | string {
  if (design === null || !sentence.startsWith(`${design} `)) return sentence;
  return html`<strong>${design}</strong>${sentence.slice(design.length)}`;
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

function requirementTable(view: View): Html {
  const look = new Map(view.candidates.map((candidate) => [candidate.name, candidate]));
  const rows = view.result.requirements.map((finding) => {
    const { unit } = figureLabel(finding.requirement.figure);
    const verdict = STANDING[finding.verdict];
    const candidate = look.get(finding.candidate);
    const ended = endedAt(view, finding, candidate);
    return [
      finding.requirement.id,
      html`<span class="verdict ${verdict.look}"><span aria-hidden="true">${verdict.mark}</span> ${finding.verdict}</span>`,
      html`<span class="who">${candidate !== undefined && lineKey(candidate, PAGE_PAINT)} ${finding.candidate}</span>${ended !== null && html`<br><span class="who small">ended at ${placeText(ended)}</span>`}`,
      asked(view, finding),
      measured(view, finding, unit, ended),
      limitText(finding, view.speed),
      ended === null ? marginText(finding.margin, unit, view.speed) : NO_VALUE,
      finding.worstAt === null ? NO_VALUE : placeText(Math.min(finding.worstAt, ended ?? finding.worstAt)),
    ];
  });
  const uncertain = view.result.requirements.some((finding) => spreadText(view, finding) !== '');
  return html`<div class="asked">${table(
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
  )}</div>${uncertain && html`<p class="note">± one standard deviation, from the grade's uncertainty. A margin within two of them is too close to call.</p>`}`;
}

/** Where a run ended before the end of what is asked [m]; null where it did not. */
function endedAt(
  view: View,
  { requirement }: RequirementFinding,
  candidate: CandidateView | undefined,
): number | null {
  if (candidate === undefined || candidate.result.status === 'completed') return null;
  const { where } = requirement;
  const { endDistance } = candidate.result;
  return endDistance < (typeof where === 'string' ? view.length : where.to) ? endDistance : null;
}

function asked(view: View, { requirement, words }: RequirementFinding): Html {
  const { label } = figureLabel(requirement.figure);
  const band = requirement.band === null ? '' : ` ${bandText(requirement.band, view.speed)}`;
  return html`<span class="wrap what"><span title="${inReaderUnit(words, view.speed)}">${label}${band}</span><br><span class="small">${whereWords(requirement)}</span></span>`;
}

/** Where what a requirement asks is measured. */
export function whereWords({ figure, where: asked }: Pick<Requirement, 'figure' | 'where'>): string {
  const where = whereMeasured(figure, asked);
  if (where === 'holdable') return 'where the drive can hold it';
  if (where === 'all') return 'on the whole road';
  return stretchText(where.from, where.to);
}

function measured(view: View, finding: RequirementFinding, unit: string, ended: number | null): Html {
  const { measured: value, requirement } = finding;
  const early = ended !== null && html`<br><span class="small">to ${placeText(ended)}</span>`;
  if (isNone(value)) return html`<span class="wrap reason small">${value.none}</span>${early}`;
  const { atLeast, atMost, band } = requirement;
  const bandHere = band === null || unit !== 'km/h' ? null : toKmh(band);
  const limits = [atLeast, atMost, bandHere].filter((bound) => bound !== null);
  const spread = spreadText(view, finding);
  return html`${figureTextBeside(value, limits, unit, view.speed)}${spread !== '' && html`<span class="small"> ${spread}</span>`}${early}`;
}

function spreadText(view: View, { measured: value, spread, requirement }: RequirementFinding): string {
  const wide = readable(spread, figureLabel(requirement.figure).unit, view.speed).value;
  if (isNone(value) || !(wide >= 0.005)) return '';
  return `± ${fixed(wide, wide >= 1 ? 0 : wide >= 0.05 ? 1 : 2)}`;
}

/** What a requirement allows: `≥ 95 %`. */
export function limitText({ requirement }: RequirementFinding, speed: SpeedUnit): string {
  const { unit } = figureLabel(requirement.figure);
  const text = (value: number): string => {
    const shown = readable(value, unit, speed);
    return withUnit(trimmed(shown.value, shown.unit === 'mph' ? 1 : 3), shown.unit);
  };
  const bounds = [
    requirement.atLeast === null ? '' : `≥ ${text(requirement.atLeast)}`,
    requirement.atMost === null ? '' : `≤ ${text(requirement.atMost)}`,
  ];
  return bounds.filter((bound) => bound !== '').join(', ');
}
