import type { RideIdentification } from '../../run/identification.ts';
import { type Html, html } from '../html.ts';
import { estimateCells } from '../model/estimate-words.ts';
import { UNKNOWN_WORDS } from '../model/unknown-words.ts';
import {
  changeText,
  energyText,
  fixed,
  gradeText,
  type SpeedUnit,
  shareText,
  signed,
  significant,
  speedText,
  stretchText,
  withUnit,
} from '../quantity.ts';
import type { Section } from '../sections/section.ts';
import { table } from '../sections/table.ts';
import { ESTIMATE_COLUMNS } from './estimate-columns.ts';
import { givenTable } from './given-table.ts';
import { rideCharts } from './ride-charts.ts';
import { rideMethod } from './ride-method.ts';
import { xyFigures } from './xy-figures.ts';

/** Sections 2 to 6 of a ride. */
export function rideSections(result: RideIdentification, speed: SpeedUnit): readonly Section[] {
  return [
    { id: 'estimates', number: 2, title: 'The estimates', body: estimatesBody(result) },
    {
      id: 'residuals',
      number: 3,
      title: 'The ride beside the vehicle',
      body: xyFigures(rideCharts(result, speed)),
    },
    { id: 'segments', number: 4, title: 'Segment by segment', body: segmentsBody(result, speed) },
    { id: 'next', number: 5, title: 'What to measure next', body: nextBody(result) },
    { id: 'method', number: 6, title: 'How it was computed', body: rideMethod() },
  ];
}

function estimatesBody({ fit, given, roadWords, driveWords, vehicleName }: RideIdentification): Html {
  const { closure } = fit;
  return html`${table(
    'Estimates',
    [...ESTIMATE_COLUMNS, { head: 'before', number: true }],
    fit.unknowns.map(({ name, was, estimate }) => [
      UNKNOWN_WORDS[name].name,
      ...estimateCells(estimate),
      UNKNOWN_WORDS[name].unit || '1',
      significant(was, 4),
    ]),
  )}
<p class="note">By the balance of energy over pieces of 20 s, ${fit.degrees} degrees of freedom${fit.correlation !== null && `; correlation of the first two ${fixed(fit.correlation, 2)}`}. <em>Before</em> is ${vehicleName} as its file has it. Height and wind: ${roadWords}. Drive: ${driveWords}.</p>
${
  closure !== null &&
  html`<h3>Elevation closure</h3>
${table('Elevation closure', ESTIMATE_COLUMNS, [
  ['drag area CdA', ...estimateCells(closure.cda), 'm²'],
  ['rolling coefficient Crr', ...estimateCells(closure.crr), '1'],
])}
<p class="note">The height that the account of energy gives, held against the height of the road: with the vehicle as it was it misses by ${withUnit(fixed(closure.before, 2), 'm')} (root mean square, after an offset), with these two numbers by ${withUnit(fixed(closure.after, 2), 'm')}. A second look at the same ride, not a second ride: it is not what the file has.</p>`
}
<h3>Taken for granted</h3>
${givenTable(given)}`;
}

/** Rows of a table that is still read; the rest is for programs. */
const MOST_ROWS = 60;

function segmentsBody({ fit }: RideIdentification, speed: SpeedUnit): Html {
  return html`${table(
    'Segments',
    [
      { head: 'segment' },
      { head: 'mean speed', number: true },
      { head: 'grade', number: true },
      { head: 'given', number: true },
      { head: 'needed before', number: true },
      { head: 'needed after', number: true },
      { head: 'given less needed after', number: true },
      { head: 'simulated less logged at the end', number: true },
      { head: 'rms of speed', number: true },
      { head: 'drive closed', number: true },
    ],
    fit.segments
      .slice(0, MOST_ROWS)
      .map((one) => [
        stretchText(one.from, one.to),
        speedText(one.meanSpeed, speed),
        gradeText(one.meanGrade),
        energyText(one.given),
        energyText(one.needed),
        energyText(one.neededAfter),
        withUnit(signed((one.given - one.neededAfter) / (one.to - one.from), 1), 'N'),
        changeText(one.endSpeed, speed),
        `${speedText(one.rmsSpeed, speed)} → ${speedText(one.rmsSpeedAfter, speed)}`,
        shareText(one.closed),
      ]),
    'dense',
  )}${fit.segments.length > MOST_ROWS && html`<p class="note">The first ${MOST_ROWS} of ${fit.segments.length}; identify.json has them all.</p>`}
<p class="note">The end speed is that of the vehicle as it was. Where the drive was closed a brake may have been on, which no log here tells: such pieces are not in the fit, and their residual is the brake's as well.</p>`;
}

function nextBody({ fit, warnings }: RideIdentification): Html {
  const has = (code: string): boolean => warnings.some((warning) => warning.code === code);
  const items = [
    'A coast-down: it tells CdA and Crr without the drive between, and the ride then tells the drive.',
    'The same road both ways, at two speeds (50 and 80 km/h say): wind and height errors fall out of the mean, and CdA is untied from Crr.',
    has('drive-in-the-fit') &&
      'Power at the wheel (wheel_power_kw), so that the drive is not in the numbers.',
    fit.fitted < 20_000 && 'A longer ride: half an hour or more with the drive on.',
    'The mass as ridden, on a scale, tyre pressures, temperature and pressure of the air.',
  ].filter((item) => item !== false);
  return html`<ul>${items.map((item) => html`<li>${item}</li>`)}</ul>`;
}
