import type { Estimate } from '../../identify/estimate.ts';
import { scaledEstimate } from '../../identify/estimate.ts';
import type { StepNumbers } from '../../identify/step-test.ts';
import type { StepIdentification } from '../../run/identification.ts';
import { toKmhPerPct, toPct, toPctPerKmh } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { estimateCells, plusMinus } from '../model/estimate-words.ts';
import { fixed, type SpeedUnit, significant, speedText } from '../quantity.ts';
import type { Section } from '../sections/section.ts';
import { table } from '../sections/table.ts';
import { ESTIMATE_COLUMNS } from './estimate-columns.ts';
import { shortName } from './short-name.ts';
import { stepCharts } from './step-charts.ts';
import { stepMethod } from './step-method.ts';
import { xyFigures } from './xy-figures.ts';

/** Sections 2 to 6 of a step test. */
export function stepSections(result: StepIdentification, speed: SpeedUnit): readonly Section[] {
  return [
    { id: 'estimates', number: 2, title: 'The estimates', body: estimatesBody(result) },
    { id: 'steps', number: 3, title: 'Step by step', body: stepsBody(result, speed) },
    { id: 'gains', number: 4, title: 'Gains that follow', body: gainsBody(result) },
    { id: 'next', number: 5, title: 'What to measure next', body: nextBody() },
    { id: 'method', number: 6, title: 'How it was computed', body: stepMethod() },
  ];
}

function estimatesBody({ fit }: StepIdentification): Html {
  const rows = (of: string, numbers: StepNumbers<Estimate> | null): readonly (readonly string[])[] =>
    numbers === null
      ? []
      : [
          [`gain, ${of}`, ...estimateCells(scaledEstimate(numbers.gain, toKmhPerPct(1))), 'km/h per %'],
          [`time constant, ${of}`, ...estimateCells(numbers.timeConstant), 's'],
          [`delay, ${of}`, ...estimateCells(numbers.delay), 's'],
        ];
  return html`${table('Estimates', ESTIMATE_COLUMNS, [
    ...rows('all steps', fit.all),
    ...rows('steps up', fit.up),
    ...rows('steps down', fit.down),
  ])}
<p class="note">Of several steps the mean, its interval from their scatter; of a single step its own. The numbers are those of the whole chain from throttle to measured speed, at the speed, gear, load and slope of the test.</p>`;
}

function stepsBody(result: StepIdentification, speed: SpeedUnit): Html {
  const { fit, logs } = result;
  return html`${xyFigures(stepCharts(result, speed))}
${table(
  'Steps',
  [
    { head: 'step' },
    { head: 'throttle' },
    { head: 'from', number: true },
    { head: 'towards', number: true },
    { head: 'gain / (km/h per %)', number: true },
    { head: 'time constant / s', number: true },
    { head: 'delay / s', number: true },
    { head: 'by two points: T, L / s', number: true },
    { head: `rms left / ${speed.axis}`, number: true },
  ],
  fit.steps.map((step) => [
    shortName(step.record.name, logs),
    `${fixed(toPct(step.record.from), 1)} to ${fixed(toPct(step.record.to), 1)} %`,
    speedText(step.before, speed),
    speedText(step.settled, speed),
    plusMinus(scaledEstimate(step.fit.gain, toKmhPerPct(1)), ''),
    plusMinus(step.fit.timeConstant, ''),
    plusMinus(step.fit.delay, ''),
    `${fixed(step.twoPoint.timeConstant, 1)}, ${fixed(step.twoPoint.delay, 2)}`,
    fixed(speed.of(step.rmsSpeed), 2),
  ]),
  'dense',
)}`;
}

function gainsBody({ designs, fit }: StepIdentification): Html {
  return html`${table(
    'PI gains by SIMC',
    [
      { head: 'candidate' },
      { head: 'closed loop tc / s', number: true },
      { head: 'Kp / (% per km/h)', number: true },
      { head: 'Ti / s', number: true },
    ],
    designs.map(({ name, closedLoop, kp, integralTime }) => [
      name,
      significant(closedLoop),
      significant(toPctPerKmh(kp)),
      significant(integralTime),
    ]),
  )}
<p class="note">Kc = T / (K (tc + L)), Ti = min(T, 4 (tc + L)) with K, T and L of all steps (L ${fixed(Math.max(0, fit.all.delay.value), 2)} s). Sampling and computing delay of the controller, and any filter that the log's speed had not passed, belong to L as well. The written file has these candidates, to be put into a case.</p>`;
}

const nextBody = (): Html => html`<ul>
<li>Steps at the lowest and the highest speed of the hold, in each gear, solo and loaded: gain and time constant are those of one point.</li>
<li>Small steps (2 to 4 %) and larger ones (8 to 10 %): where the gains differ the throttle is not linear, and the loop is tuned for the steepest part.</li>
<li>The same on a grade of a few per cent, up and down.</li>
<li>Both directions of a level road, so that wind and slope fall out of the mean.</li>
</ul>`;
