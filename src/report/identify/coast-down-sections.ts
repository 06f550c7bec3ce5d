import type { CoastDownFit } from '../../identify/coast-down.ts';
import type { Estimate } from '../../identify/estimate.ts';
import { scaledEstimate } from '../../identify/estimate.ts';
import type { RoadLoadForm } from '../../identify/reference-conditions.ts';
import type { CoastDownIdentification } from '../../run/identification.ts';
import { STANDARD_GRAVITY } from '../../units/constants.ts';
import { toNPerKmh, toNPerKmh2, toPct } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { estimateCells } from '../model/estimate-words.ts';
import { fixed, type SpeedUnit, signed, speedText, timeText, trimmed } from '../quantity.ts';
import type { Section } from '../sections/section.ts';
import { table } from '../sections/table.ts';
import { coastDownCharts } from './coast-down-charts.ts';
import { coastDownMethod } from './coast-down-method.ts';
import { ESTIMATE_COLUMNS } from './estimate-columns.ts';
import { givenTable } from './given-table.ts';
import { shortName } from './short-name.ts';
import { xyFigures } from './xy-figures.ts';

/** Sections 2 to 6 of a coast-down. */
export function coastDownSections(result: CoastDownIdentification, speed: SpeedUnit): readonly Section[] {
  return [
    { id: 'estimates', number: 2, title: 'The estimates', body: estimatesBody(result) },
    { id: 'residuals', number: 3, title: 'What the fit leaves', body: residualsBody(result, speed) },
    { id: 'forms', number: 4, title: 'As regulations write it', body: formsBody(result) },
    { id: 'next', number: 5, title: 'What to measure next', body: nextBody(result, speed) },
    { id: 'method', number: 6, title: 'How it was computed', body: coastDownMethod() },
  ];
}

function estimatesBody(result: CoastDownIdentification): Html {
  const { fit } = result;
  const row = (
    name: string,
    estimate: Estimate | null,
    unit: string,
    isSigned = false,
  ): readonly string[][] => (estimate === null ? [] : [[name, ...estimateCells(estimate, isSigned), unit]]);
  return html`${table('Estimates', ESTIMATE_COLUMNS, [
    ...row('drag area CdA', fit.cda, 'm²'),
    ...row('rolling coefficient Crr', fit.crr, '1'),
    ...row('wind along the road', fit.wind, 'm/s', true),
    ...row('grade of the road', fit.grade === null ? null : scaledEstimate(fit.grade, toPct(1)), '%', true),
    ...row('growth of Crr with speed', fit.threeTerms?.growth ?? null, 's/m', true),
  ])}
<p class="note">CdA and Crr are tied with a correlation of ${fixed(fit.correlation, 2)}; the interval of CdA has ${trimmed(fit.degrees, 1)} degrees of freedom.${fit.wind !== null && ' The wind counts against the way there, the grade uphill on it: both come from the difference between the ways.'} The growth of Crr is of another fit, with three terms: it is not in CdA and Crr here, and where its interval takes in zero they are enough.</p>
<h3>Taken for granted</h3>
${givenTable(result.given)}
<p class="note">No interval above has an error of these in it. CdA goes with the mass over the density, Crr hardly with either: 1 % of mass is 1 % of CdA.</p>`;
}

function residualsBody(result: CoastDownIdentification, speed: SpeedUnit): Html {
  const { fit, logs } = result;
  return html`${xyFigures(coastDownCharts(result, speed))}
${table(
  'Runs',
  [
    { head: 'run' },
    { head: 'way' },
    { head: 'from', number: true },
    { head: 'to', number: true },
    { head: 'time', number: true },
    { head: 'samples', number: true },
    { head: 'rms left / N', number: true },
    { head: 'mean left / N', number: true },
  ],
  fit.runs.map((run) => [
    shortName(run.name, logs),
    run.direction,
    speedText(run.from, speed, 0),
    speedText(run.to, speed, 0),
    timeText(run.duration),
    String(run.samples),
    fixed(run.rmsForce, 1),
    signed(run.meanForce, 1),
  ]),
)}`;
}

function formsBody({ measured, atReference, withThreeTerms, fit, air }: CoastDownIdentification): Html {
  const row = (name: string, { f0, f1, f2, airDensity }: RoadLoadForm): readonly string[] => {
    const cells = (estimate: Estimate | null, factor = 1): readonly string[] =>
      estimate === null ? ['0', ''] : estimateCells(scaledEstimate(estimate, factor)).slice(0, 2);
    return [
      name,
      ...cells(f0),
      ...cells(f1, toNPerKmh(1)),
      ...cells(f2, toNPerKmh2(1)),
      fixed(airDensity, 3),
    ];
  };
  return html`<p>F = f0 + f1 V + f2 V², V in km/h, in still air on the level, at the mass that rolled; f1 is nothing in the two-term form of motorcycle regulations.</p>
${table(
  'Road load as regulations write it',
  [
    { head: 'air' },
    { head: 'f0 / N', number: true },
    { head: 'standard error', number: true },
    { head: 'f1 / (N per km/h)', number: true },
    { head: 'standard error', number: true },
    { head: 'f2 / (N per (km/h)²)', number: true },
    { head: 'standard error', number: true },
    { head: 'density / (kg/m³)', number: true },
  ],
  [
    row('as measured', measured),
    row('at 293 K and 100 kPa', atReference),
    ...(withThreeTerms === null
      ? []
      : [
          row('three terms, as measured', withThreeTerms.measured),
          row('three terms, at 293 K and 100 kPa', withThreeTerms.atReference),
        ]),
  ],
)}
<p class="note">${thirdTerm(fit, withThreeTerms?.measured.f1 ?? null)}</p>
<p class="note">Reference conditions and correction of UN GTR No. 2, annex 7 (also Regulation (EU) 134/2014), from memory: f0 (1 + 0.006 (T − 293 K)), f1 likewise, f2 (T / 293 K) (100 kPa / p). ${air.temperature === null ? 'Only the density was given: f2 alone is corrected.' : 'Dry air.'} The vehicle file has CdA and Crr as measured: the air of a case makes its own density from them.</p>`;
}

/** Whether the runs tell a term that is linear in speed. */
function thirdTerm({ threeTerms, setting }: CoastDownFit, f1: Estimate | null): string {
  if (threeTerms === null) return 'The speeds of these runs do not tell three terms apart.';
  const linear = scaledEstimate(threeTerms.growth, toNPerKmh(setting.mass * STANDARD_GRAVITY));
  const [, , interval] = estimateCells(linear, true);
  if (f1 === null)
    return `Three terms are not given: f1 would lie at ${interval} N per km/h (95 %), which these runs do not tell from zero. More runs over a wider range of speeds may.`;
  return `The runs tell f1 from zero: ${interval} N per km/h (95 %). The three terms belong together and stand for the speeds driven alone; a vehicle file takes them as f0_n, f1_n_per_kmh and f2_n_per_kmh2, in place of cda_m2 and crr.`;
}

function nextBody({ fit, warnings }: CoastDownIdentification, speed: SpeedUnit): Html {
  const fastest = fit.runs.reduce((most, { from }) => Math.max(most, from), 0);
  const slowest = fit.runs.reduce((least, { to }) => Math.min(least, to), fastest);
  const has = (code: string) => warnings.some((warning) => warning.code === code);
  const items = [
    has('few-runs') &&
      `Runs until there are five each way: with n runs the intervals go about as 1 / √n, and faster at the start, where Student's t is large (now ${trimmed(fit.degrees, 1)} degrees of freedom).`,
    fastest < 3 * slowest &&
      `A wider range of speeds than ${speedText(slowest, speed, 0)} to ${speedText(fastest, speed, 0)}: a ratio of three or more unties CdA from Crr.`,
    fit.wind !== null &&
      `A logged wind (headwind_m_s) or calmer air: here one steady wind of ${signed(fit.wind.value, 1)} m/s along the road was estimated, and what it changed from run to run is in the intervals.`,
    fit.grade !== null &&
      'The height of the road (elevation_m), where it is not an even slope: one steady grade was estimated.',
    has('air-assumed') && 'Temperature and pressure of the air at the road.',
    'The mass as ridden, on a scale, and the rotating mass of wheels, sprocket and disc, by their inertia over the radius squared.',
    'A second day: the scatter between days is not in these intervals.',
  ].filter((item) => item !== false);
  return html`<ul>${items.map((item) => html`<li>${item}</li>`)}</ul>`;
}
