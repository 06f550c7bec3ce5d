import { figureRow } from '../../study/figure-table.ts';
import { validityNotes } from '../../vehicle/validity.ts';
import { REPAIR_KINDS } from '../charts/repair-marks.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { scientific } from '../model/figure-text.ts';
import { inReaderUnit } from '../model/reader-unit.ts';
import { vehicleRows } from '../model/vehicle-rows.ts';
import type { View } from '../model/view.ts';
import { bandText, fixed, lengthText, placeText, stretchText } from '../quantity.ts';
import { cautions } from './cautions.ts';
import { equations } from './equations.ts';
import type { Section } from './section.ts';
import { table } from './table.ts';
import { unitRules } from './unit-rules.ts';

/** 9: how everything above was computed, from what, and what it does not say. */
export function methodSection(view: View): Section {
  const body = html`${cautionPart(view)}
${vehicleTable(view)}
<h3>Model</h3>
${equations(view.result.vehicle)}
<h3>Validity: what is left out</h3>
<ul>${validityNotes(view.result.vehicle).map((note) => html`<li>${note.words}</li>`)}</ul>
${unitRules(view)}${solver(view)}
${definitions(view)}
${roadSources(view)}
${defaultsTable(view)}
${inputs(view)}`;
  return { id: 'method', number: 9, title: 'How it was computed', body };
}

function cautionPart(view: View): Html {
  const { warnings } = view.result;
  return html`<h3 id="method-cautions">Cautions</h3>
<ul class="cautions">${cautions(view).map((words) => html`<li>${words}</li>`)}</ul>
${
  warnings.length > 0 &&
  html`<h3>Warnings of this run</h3><ul>${warnings.map(
    (warning) =>
      html`<li>${inReaderUnit(warning.message, view.speed)}${warning.from !== undefined && warning.to !== undefined && warning.to > warning.from && html` <span class="small">(${stretchText(warning.from, warning.to)})</span>`}</li>`,
  )}</ul>`
}`;
}

/** What the vehicle is made of. */
function vehicleTable({ result: { vehicle }, speed }: View): Html {
  return html`<h3 id="method-vehicle">The vehicle</h3>
${table(
  'The vehicle',
  [{ head: vehicle.name }, { head: 'as the loop sees it' }],
  vehicleRows(vehicle, speed).map(([part, words]) => [part, words]),
)}`;
}

/** What the tests of the loop hold the two schemes to, at 50 Hz: change both together (test/loop/accuracy.test.ts). */
function solver(view: View): Html {
  const { scheme, road, rider } = view.result;
  const exact = scheme === 'exact';
  const crosswind = road.crosswind.some((c) => c !== 0);
  const method = exact
    ? 'Scheme exact: the classical fourth-order Runge-Kutta method between controller samples, cut at every kink of the road, the drive and the actuator.'
    : 'Scheme fast: one evaluation a step of at most 25 ms, lags solved exactly.';
  const plain = exact ? (crosswind ? '1.4 × 10⁻⁶' : '2 × 10⁻⁸') : '2 × 10⁻⁵';
  const why = exact && crosswind ? ' (the drag in crosswind is linearised once a step)' : '';
  const braked =
    rider.brakesAbove === null
      ? ''
      : `, and within ${exact ? '2 × 10⁻⁵' : '10⁻⁴'} m/s where the rider brakes, since the onset of the brake is not cut`;
  const accuracy = `At 50 Hz the tests of the program hold its speed within ${plain} m/s${why} of a far finer solution of the same equations${braked}.`;
  return html`<h3>Solver</h3>
<p>${method} ${accuracy}${onceASample(view.result.vehicle)} Time is the independent variable; the controller runs at its sample time with zero-order hold and its own computing delay.</p>
<p>${view.result.spread.words}</p>
<p>The energy account closes to: ${view.candidates
    .map(
      (candidate) =>
        `${candidate.name} ${Number.isFinite(candidate.result.ledger.residual) ? scientific(Math.abs(candidate.result.ledger.residual)) : 'not closed'}`,
    )
    .join(', ')} (sum of all terms over the sum of their magnitudes; 10⁻⁶ is allowed).</p>`;
}

/** Devices whose equations themselves are of first order in the sample (see run-loop.ts; test/loop/once-a-sample.test.ts). */
function onceASample({ drive: { belt, source } }: View['result']['vehicle']): string {
  const belted = belt === null ? '' : 'the ratio of the belt, within 10⁻³ m/s';
  const follows =
    source?.kind === 'battery' && (source.capacity !== null || source.heating !== null)
      ? 'charge and heat of the battery, within 3 × 10⁻³ m/s'
      : '';
  const moved = [belted, follows].filter((words) => words !== '').join('; ');
  return moved === '' ? '' : ` Those equations move once a sample: ${moved} of one that moves all the time.`;
}

/** Definitions of the figures that this page shows. */
function definitions(view: View): Html {
  const names = new Set([
    ...view.candidates.flatMap((candidate) => Object.keys(candidate.figures)),
    ...view.result.requirements.map((finding) => finding.requirement.figure),
  ]);
  const rows = [...names].flatMap((name): HtmlValue[][] => {
    const row = figureRow(name);
    return row === undefined
      ? []
      : [[html`${row.label}<br><code>${row.name}</code>`, row.unit, row.weight, row.definition, row.source]];
  });
  return html`<h3>Definitions of the figures</h3>
<p>The error e is true speed minus set speed${view.result.hold.setSpeedIs === 'indicated' && ', the set speed being what the sensor indicates'}; negative is too slow. The band of the charts is ${bandText(view.result.band, view.speed)}. Holdable: where the drive has what the set speed asks, an ideal hold is back at the set speed after what came before, and no change of set speed is still settling.</p>
${table('Definitions', [{ head: 'figure, its name in files' }, { head: 'unit there' }, { head: 'by' }, { head: 'definition' }, { head: 'source' }], rows)}
<p>The hand formula beside a simulated change on a hill: d(v²) = 2 (F − F<sub>required</sub>) ds / m<sub>e</sub> along the slope, with F what an ideal hold would give (whatever keeps the set speed while the drive has it, else full throttle or the least force), or the force of the locked throttle. No controller, lag or sampling is in it, so the rest is the design's own. Where simulation and hand formula differ by more than 15 % the cards show ≠.</p>`;
}

function roadSources(view: View): Html {
  const { road } = view.result;
  const { smoothing } = road;
  const how =
    smoothing === null
      ? 'The grade was taken as given: a written profile or survey data, without smoothing and without uncertainty.'
      : `Elevation was brought to a grid of ${lengthText(road.grid)} and smoothed by a robust penalised least-squares smoother of third order (Eilers, Anal. Chem. 75 (2003) 3631; gain one half at a wavelength of ${lengthText(smoothing.wavelength)}); the grade's standard deviation comes from the same equations.`;
  const repairs =
    road.repairs.length === 0
      ? html`<p>The track needed no repair.</p>`
      : table(
          'Repairs',
          [
            { head: 'kind' },
            { head: 'place', number: true },
            { head: 'points', number: true },
            { head: 'line', number: true },
            { head: 'what was done' },
          ],
          road.repairs
            .slice(0, MOST_REPAIRS)
            .map((repair) => [
              REPAIR_KINDS[repair.kind].words,
              repair.to > repair.from ? stretchText(repair.from, repair.to) : placeText(repair.from),
              String(repair.points),
              repair.line === null ? '' : String(repair.line),
              repair.message,
            ]),
        );
  const more = road.repairs.length - MOST_REPAIRS;
  return html`<h3 id="method-repairs">Road and repairs</h3><p>${how}</p>${repairs}${more > 0 && html`<p class="note">${more} more repairs are counted in summary.json.</p>`}${
    road.masks.length > 0 &&
    table(
      'Masks',
      [{ head: 'masked stretch' }, { head: 'reason' }],
      road.masks.map((mask) => [stretchText(mask.from, mask.to), mask.reason]),
    )
  }`;
}
const MOST_REPAIRS = 60;

function defaultsTable(view: View): Html {
  const { defaults } = view.result;
  return html`<h3 id="method-defaults">Defaults that were used</h3>
${
  defaults.length === 0
    ? html`<p>None: every value was given.</p>`
    : table(
        'Defaults',
        [{ head: 'key' }, { head: 'value' }, { head: 'of' }, { head: 'source' }],
        defaults.map((one) => [
          html`<code>${one.key}</code>`,
          one.value,
          one.of,
          html`${one.source}${isRemembered(one.source) && html` <span class="flag">not checked</span>`}`,
        ]),
      )
}${
  defaults.some(({ source }) => isRemembered(source)) &&
  html`<p class="note">Not checked: a typical figure from memory, without a document behind it. Give the vehicle's own in its place.</p>`
}`;
}

const isRemembered = (source: string): boolean => source.includes('from memory');

function inputs(view: View): Html {
  const { result } = view;
  return html`<h3 id="method-inputs">Inputs</h3>
${table(
  'Inputs',
  [{ head: 'file' }, { head: 'bytes', number: true }, { head: 'SHA-256' }],
  result.inputs.map((file) => [file.name, fixed(file.bytes), html`<code class="hash">${file.sha256}</code>`]),
)}
${result.overrides.length > 0 && html`<p>Changed beside the case: ${result.overrides.map((one) => html`<code>${one}</code> `)}</p>`}
<p>Ridgehold ${result.toolVersion}, shape of the summary ${result.schemaVersion}. The same inputs give the same bytes.</p>`;
}
