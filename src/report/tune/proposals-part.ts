import { written } from '../../case/edit-case.ts';
import { figureRow } from '../../study/figure-table.ts';
import { isNone } from '../../study/findings.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { figureLabel, figureText } from '../model/figure-text.ts';
import { placeOfPoint, sensitivityText } from '../model/point-words.ts';
import { inReaderUnit } from '../model/reader-unit.ts';
import { PAGE_PAINT } from '../paint.ts';
import { NO_VALUE, significant, trimmed } from '../quantity.ts';
import { whereWords } from '../sections/answer-section.ts';
import type { Section } from '../sections/section.ts';
import { table } from '../sections/table.ts';
import { missedIds, requirementWords } from './requirement-words.ts';
import { gainsText } from './tune-answer.ts';
import { type TunedView, type TuneView, tunedKey } from './tune-view.ts';

/** Told of every candidate, whether the cost has it or not. */
const TOLD = ['rms_error_kmh', 'worst_low_kmh', 'worst_high_kmh', 'throttle_travel_pct_per_km'];

/** 2: proposals beside the candidates of the case, how each was found, and the text of each. */
export function proposalsPart(view: TuneView): Section {
  const { result, tuned } = view;
  const proposed = tuned.filter(({ proposal }) => proposal !== null);
  const body = html`<p>${costWords(view)} The figures are those of a replay over the whole road by the scheme of the case.</p>
${figuresTable(view)}
${
  proposed.length > 0 &&
  html`<h3>How the gains were found</h3>
<dl class="found">${proposed.map((one) => html`<dt>${tunedKey(one, PAGE_PAINT)} ${one.name}</dt><dd>${inReaderUnit(one.proposal!.words, view.speed)}<br><code>${written(one.proposal!.file)}</code></dd>`)}</dl>`
}
${result.notProposed.length > 0 && html`<h3>Not proposed</h3><ul>${result.notProposed.map(({ design, reason }) => html`<li>${design}: ${reason}.</li>`)}</ul>`}`;
  return { id: 'proposals', number: 2, title: 'Proposals beside the case', body };
}

/** `The cost is 1 x rms error / (km/h) + ...`. */
function costWords({ result: { plan } }: TuneView): string {
  const terms = plan.cost.map(({ figure, where, weight }) => {
    const { label, unit } = figureLabel(figure);
    const sign = figureRow(figure)?.better === 'higher' ? '\u2212' : '';
    return `${sign}${trimmed(weight, 6)} for each ${unit === '1' ? 'unit' : unit} of ${label.toLowerCase()}${where === 'all' ? '' : ` ${whereWords({ figure, where })}`}`;
  });
  return `The cost is the sum of ${terms.join(' and ')}; less is better.`;
}

function figuresTable(view: TuneView): Html {
  const { result, tuned, speed } = view;
  const figures = [...new Set([...result.plan.cost.map(({ figure }) => figure), ...TOLD])];
  const judged = tuned.some(({ requirements }) => requirements.length > 0);
  const row = (one: TunedView): HtmlValue[] => [
    html`<span class="who">${tunedKey(one, PAGE_PAINT)} ${one.name}</span>${one.name === result.chosen && html`<br><span class="small">the one to take of the proposals</span>`}`,
    gainsText(one, speed),
    sensitivityCell(one, view),
    ...(judged ? [requirementCell(one)] : []),
    isNone(one.cost) ? html`<span title="${one.cost.none}">${NO_VALUE}</span>` : significant(one.cost),
    ...figures.map((name) => figureText(one.figures[name], figureLabel(name).unit, speed)),
  ];
  return table(
    'Candidates and proposals',
    [
      { head: 'candidate' },
      { head: 'gains' },
      { head: 'greatest Ms' },
      ...(judged ? [{ head: 'requirements' }] : []),
      { head: 'cost', number: true },
      ...figures.map((name) => ({ head: figureLabel(name).label.toLowerCase(), number: true })),
    ],
    tuned.map(row),
    'dense',
  );
}

function requirementCell({ requirements }: TunedView): HtmlValue {
  if (requirements.length === 0) return html`<span title="no requirement speaks of it">${NO_VALUE}</span>`;
  const told = requirements.filter(({ verdict }) => verdict !== 'met').map(({ words }) => words);
  const look = missedIds(requirements).length > 0 ? 'flag' : 'within';
  return html`<span class="${look} wrap" title="${told.join(' ')}">${requirementWords(requirements)}</span>`;
}

function sensitivityCell({ loop, keeps }: TunedView, { result, speed }: TuneView): HtmlValue {
  const [worst] = loop.order;
  if (worst === undefined) return NO_VALUE;
  const { margins } = loop.figures[worst]!;
  const place = placeOfPoint(result.sheet.points[worst]!, speed);
  const value = margins.stable ? sensitivityText(margins.sensitivity) : 'unstable';
  return html`<span class="${keeps === true ? 'within' : 'flag'}">${value}${keeps === false && ' above the bound'}</span><br><span class="small wrap">${place}</span>`;
}
