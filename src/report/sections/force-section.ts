import { toKw, toRpm } from '../../units/convert.ts';
import { gripForce } from '../../vehicle/traction.ts';
import { turningRange } from '../../vehicle/turning-range.ts';
import { forceSpeedChart } from '../charts/force-speed.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { startingCharge } from '../model/battery-words.ts';
import { forceLines } from '../model/force-lines.ts';
import { type GearAuthority, gearAuthority } from '../model/gear-authority.ts';
import { gearName, hasGears, turns } from '../model/gear-words.ts';
import type { View } from '../model/view.ts';
import {
  fixed,
  forceText,
  gradeText,
  NO_VALUE,
  powerText,
  significant,
  speedText,
  withUnit,
} from '../quantity.ts';
import { chartFigure } from './chart-figure.ts';
import type { Section } from './section.ts';
import { table } from './table.ts';

/** 4: what the drive has against what grades ask. */
export function forceSection(view: View): Section {
  const body = html`<p>${ownWords(view)}</p>
${chartFigure('force', (canvas) => forceSpeedChart(view, canvas), caption(view))}
${gearTable(view)}`;
  return { id: 'force', number: 4, title: 'Force against speed', body };
}

function ownWords({ result: { vehicle } }: View): string {
  const { drive } = vehicle;
  const engaged = hasGears(drive) ? ` in ${gearName(drive.gear)}` : '';
  const power = drive.peakPower === null ? '' : `, at most ${powerText(drive.peakPower)}`;
  const least =
    drive.throttleMin < 0
      ? `regeneration up to ${forceText(drive.regenerationForce)}`
      : `${forceText(drive.closedThrottleForce)} of drag at closed throttle`;
  return `${vehicle.name}: ${withUnit(fixed(vehicle.mass), 'kg')} with rider and load, ${forceText(drive.peakForce)} at full throttle${engaged}${power}, ${least}.`;
}

function caption(view: View): Html {
  const { vehicle } = view.result;
  const { drive } = vehicle;
  const { airs } = forceLines(view);
  const many = hasGears(drive);
  const own = many
    ? 'Strong, with its range shaded: the engaged gear. Thinner: full and closed throttle of the other gears.'
    : drive.belt === null
      ? 'Shaded: what the drive can give.'
      : 'Shaded: what engine and belt can give, the belt being where its line of engine speed puts it. Dotted: full throttle with the belt held at the ends of its ratios.';
  const ends =
    many && Number.isFinite(turningRange(drive, drive.gear).greatest)
      ? ' The lines of a gear begin where it can just turn and end at the rev limit.'
      : '';
  const derated =
    airs === null
      ? ''
      : many
        ? ` Below each line of full throttle, as a ribbon: what the air at ${withUnit(fixed(airs[1]), 'm')} takes from that at ${withUnit(fixed(airs[0]), 'm')}.`
        : ' Full throttle is drawn for the lowest and the highest place of the route: thin air takes force away.';
  return html`${own}${ends} Thin grey lines: what steady speed asks on a grade in still air. Where such a line leaves the shade at the set speed, that grade cannot be held${many && ' in the engaged gear'}.${derated}${gripWords(view)}${chargeWords(view)}`;
}

/** Heat and the charge used up on the way are a run's, not the plot's. */
function chargeWords(view: View): string {
  const charge = startingCharge(view);
  return charge === null ? '' : ` Of the battery: ${charge.state}${charge.left}.`;
}

/** Where the grip is, when the plot does not show it. */
function gripWords(view: View): string {
  const grip = gripForce(view.result.vehicle, 0);
  if (grip === null) return ' The grip of the tyre is not known here: no line limits the force.';
  if (!Number.isFinite(grip.greatest)) return ' With this load transfer the driven wheel never spins.';
  const most = forceLines(view)
    .lines.filter(({ kind }) => kind === 'full')
    .reduce((greatest, { force }) => Math.max(greatest, ...force), 0);
  return most >= grip.greatest
    ? ' Above the line of grip the tyre cannot pass the force on.'
    : ` The tyre passes on ${forceText(grip.greatest)} on the level: more than the drive has.`;
}

/** What each gear has at the set speed: the figures behind the picture. */
function gearTable(view: View): Html {
  const { drive } = view.result.vehicle;
  const { setSpeed } = view.result.hold;
  const { speed } = view;
  const rows = gearAuthority(view, setSpeed);
  const engine = turns(drive);
  const rigid = engine && drive.belt === null;
  const airs = forceLines(view).airs;
  const range = ({ from, to }: GearAuthority): string =>
    `${fixed(speed.of(from))} to ${Number.isFinite(to) ? fixed(speed.of(to)) : 'no limit'}`;
  const cells = (row: GearAuthority): HtmlValue[] => {
    const { at } = row;
    const grade = (value: number | null): string => (value === null ? 'any' : gradeText(value));
    const none = (count: number): HtmlValue[] => Array.from({ length: count }, () => NO_VALUE);
    return [
      ...(engine
        ? [
            ...(rigid ? [range(row)] : []),
            at === null
              ? html`<span class="flag">${setSpeed > row.to ? 'over its limit' : 'stalls'}</span>`
              : fixed(toRpm(at.shaftSpeed)),
          ]
        : []),
      ...(at === null
        ? none(airs === null ? 5 : 6)
        : [
            fixed(at.full),
            ...(airs === null ? [] : [fixed(at.thin)]),
            significant(toKw(at.full * setSpeed), 2),
            fixed(at.least),
            html`${grade(at.climb)}${at.slips && html`<br><span class="small">by grip</span>`}`,
            grade(at.descent),
          ]),
    ];
  };
  const charge = startingCharge(view);
  const place = airs === null ? '' : ` at ${withUnit(fixed(airs[0]), 'm')}`;
  return html`<h3>At ${speedText(setSpeed, speed, 0)}, in still air${charge === null ? '' : `; ${charge.state}`}</h3>
${table(
  'Authority by gear',
  [
    { head: hasGears(drive) ? 'gear' : 'drive' },
    ...(engine
      ? [
          ...(rigid ? [{ head: `turns from / ${speed.axis}`, number: true }] : []),
          { head: rigid ? 'engine / rpm' : 'engine at full throttle / rpm', number: true },
        ]
      : []),
    { head: `full throttle${place} / N`, number: true },
    ...(airs === null ? [] : [{ head: `at ${withUnit(fixed(airs[1]), 'm')} / N`, number: true }]),
    { head: 'full throttle / kW', number: true },
    { head: `${drive.throttleMin < 0 ? 'full regeneration' : 'closed throttle'} / N`, number: true },
    { head: 'steepest climb held', number: true },
    { head: 'steepest descent held', number: true },
  ],
  rows.map((row) => [
    hasGears(drive)
      ? html`${row.gear + 1}${row.engaged && html` <span class="of">engaged</span>`}`
      : view.result.vehicle.name,
    ...cells(row),
  ]),
)}`;
}
