import { asin } from '../../numeric/elementary.ts';
import { toDeg } from '../../units/convert.ts';
import { validityNotes } from '../../vehicle/validity.ts';
import { type Html, html } from '../html.ts';
import { inReaderUnit } from '../model/reader-unit.ts';
import { significant, stretchText } from '../quantity.ts';
import { cautions } from '../sections/cautions.ts';
import type { Section } from '../sections/section.ts';
import { table } from '../sections/table.ts';
import type { TuneView } from './tune-view.ts';

/** The last: how it was found, from what, and what it does not say. */
export function tuneMethodPart(view: TuneView): Section {
  const { result } = view;
  const bound = significant(result.plan.sensitivity);
  const body = html`<h3 id="method-cautions">Cautions</h3>
<ul class="cautions">${[...cautions(view), ...OF_GAINS].map((words) => html`<li>${words}</li>`)}</ul>
${warningList(view)}
<h3>Operating points</h3>
<p>An ideal hold drives the road with each load, and the gears, speeds and throttles that it meets are sorted into classes; each class is stood for by a place that was really there, with its share of the time. To them come every speed, grade, headwind, gear and load of the grid. At each point the vehicle is linearised by exact derivatives; the loop has every lag and delay of the replay, and the sampler exactly.</p>
<h3>The bound</h3>
<p>S = 1 / (1 + L) tells how much a loop enlarges what disturbs it at a frequency; 1 / Ms is the least distance of L from −1. With Ms of ${bound} the gain margin is at least ${significant(leastGainMargin(result.plan.sensitivity))} and the phase margin at least ${significant(leastPhaseMarginDeg(result.plan.sensitivity))}° (K. J. Åström, T. Hägglund, Advanced PID Control, 2006, from memory). For a given kp, |1 + L|² is at each frequency a quadratic in ki: the greatest ki of all points is known in closed form, and is checked by the margins of each proposal at each point.</p>
<h3>Requirements and the choice</h3>
<p>Every requirement of the case is judged for candidates and proposals as a run judges it, with the spread over the same drawn roads; one that names its candidates is asked of those alone. Of the proposals, all of which keep the bound, those come first that miss the fewest requirements (what cannot be judged counts as missed, what is too close to call does not), and of those the one that costs least. A candidate of the case that keeps the bound is measured against it by the same rule. No design looks for gains by the requirements: that none meets them all does not say that no gains do.</p>
<h3>Designs</h3>
<ul>
<li>settling, droop: a pair of poles of the sampled loop is placed, and made as fast as the bound allows; the design is written with the figure that it then meets.</li>
<li>simc: Kc = 1 / (k′ (τc + θ)), Ti = min(τ, 4 (τc + θ)) with lags brought to one lag and one dead time by the half rule (S. Skogestad, J. Process Control 13 (2003) 291–309); τc is as short as the bound allows, no shorter than θ.</li>
<li>rejection: the greatest integral gain, which makes the integral of the error after a step of load least (K. J. Åström, H. Panagopoulos, T. Hägglund, Automatica 34 (1998) 585–601, from memory).</li>
<li>schedule: the same for the gain of the vehicle divided out by gear and speed, so that the loop has one gain everywhere.</li>
<li>road: a grid over the gains that keep the bound, then a pattern search from its best point (R. Hooke, T. A. Jeeves, J. ACM 8 (1961) 212–229, from memory) on the cost of a replay. It searches with the scheme fast; the three best are replayed by the scheme of the case. Nothing in it is random: the same case gives the same gains.</li>
</ul>
<h3>Validity: what is left out</h3>
<ul>${validityNotes(result.vehicle).map((note) => html`<li>${note.words}</li>`)}</ul>
${defaultsTable(view)}
${inputsTable(view)}`;
  return { id: 'method', number: 0, title: 'How it was computed', body };
}

/** Ms / (Ms - 1), and 2 asin(1 / (2 Ms)). */
const leastGainMargin = (sensitivity: number): number => sensitivity / (sensitivity - 1);
const leastPhaseMarginDeg = (sensitivity: number): number => toDeg(2 * asin(1 / (2 * sensitivity)));

const OF_GAINS = [
  'A linear loop knows no noise, slack, fuel cut or steps of the actuator: high gains make them felt. The replay has those that the vehicle file has; the cost sees them only as far as its figures do.',
  'Gains that cost least on one road are those of that road, with that load and wind: judge them by the matrix of the case before they are taken.',
];

function warningList({ result: { warnings }, speed }: TuneView): Html | null {
  if (warnings.length === 0) return null;
  return html`<h3>Warnings</h3><ul>${warnings.map(
    ({ message, from, to }) =>
      html`<li>${inReaderUnit(message, speed)}${from !== undefined && to !== undefined && to > from && html` <span class="small">(${stretchText(from, to)})</span>`}</li>`,
  )}</ul>`;
}

function defaultsTable({ result: { defaults } }: TuneView): Html | null {
  if (defaults.length === 0) return null;
  return html`<h3 id="method-defaults">Defaults used</h3>
${table(
  'Defaults used',
  [{ head: 'key' }, { head: 'value' }, { head: 'of' }, { head: 'from' }],
  defaults.map(({ key, value, of, source }) => [
    html`<code>${key}</code>`,
    value,
    of,
    html`<span class="wrap">${source}</span>`,
  ]),
)}`;
}

function inputsTable({ result: { inputs, overrides } }: TuneView): Html {
  return html`<h3 id="method-inputs">Inputs</h3>
${table(
  'Files read',
  [{ head: 'file' }, { head: 'bytes', number: true }, { head: 'SHA-256' }],
  inputs.map(({ name, bytes, sha256 }) => [name, String(bytes), html`<code class="hash">${sha256}</code>`]),
)}${overrides.length > 0 && html`<p class="note">Changed beside the case: ${overrides.join('; ')}.</p>`}`;
}
