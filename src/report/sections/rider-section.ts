import type { Figure } from '../../study/findings.ts';
import type { HoldMeasure } from '../../study/hold-transient.ts';
import { causeWords } from '../../study/transient-words.ts';
import { toPct } from '../../units/convert.ts';
import { hatch, rectangle } from '../charts/canvas.ts';
import { holdPicture } from '../charts/hold-picture.ts';
import { holdStrip } from '../charts/hold-strip.ts';
import { candidateKey, lineKey } from '../charts/line-key.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { answerOf } from '../model/answer.ts';
import { percent } from '../model/design-standing.ts';
import { asksOfHold } from '../model/hold-away.ts';
import { type HoldMoment, MOMENT_KINDS, momentsOf, shownMoments } from '../model/hold-moments.ts';
import { endsByRule, holdAnswer, holdTally } from '../model/hold-tally.ts';
import { CAUSE_NAMES, EVENT_NAMES } from '../model/hold-words.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { fixed, NO_VALUE, placeText, signed, speedText, timeText } from '../quantity.ts';
import { bendsPart } from './bends-part.ts';
import { chartFigure } from './chart-figure.ts';
import type { Section } from './section.ts';
import { type TableRow, table } from './table.ts';

/** As wide as a card on a small screen, so that its words keep their size there. */
const PICTURE_WIDTH = 340;
/** More rows than this are for a spreadsheet. */
const MOST_ROWS = 300;
/** So many holds that rules ended are told one by one. */
const MOST_TOLD = 6;

/** What became of the hold: how it was taken, left and given up, and the bends; null where the case asks nothing of it. */
export function riderSection(view: View): Section | null {
  if (!asksOfHold(view.result)) return null;
  const { design } = answerOf(view);
  const candidate = view.candidates.find(({ name }) => name === design) ?? view.candidates[0];
  if (candidate === undefined) return null;
  const moments = MOMENT_KINDS.flatMap((kind) => shownMoments(view, kind));
  const body = html`<p class="lead">${holdAnswer(view, candidate)}</p>
${tallyTable(view)}
${chartFigure('hold-strip', (canvas) => holdStrip(view, canvas), stripCaption(view))}
${stripKey(view)}
${ruleList(view)}
${moments.length > 0 && pictures(view, moments)}
${eventTable(view)}
${view.result.bends !== null && bendsPart(view, view.result.bends)}`;
  return { id: 'rider', number: 7, title: 'The rider and the hold', body };
}

const who = (view: View, name: string): Html => {
  const candidate = view.candidates.find((one) => one.name === name);
  return html`<span class="who">${candidate !== undefined && lineKey(candidate, PAGE_PAINT)} ${name}</span>`;
};

/** Who had the hold, and what ended it, a row for each candidate. */
function tallyTable(view: View): Html {
  const tallies = view.candidates.map((candidate) => holdTally(view.result, candidate));
  const any = (count: (tally: (typeof tallies)[number]) => number): boolean =>
    tallies.some((tally) => count(tally) > 0);
  const columns = [
    { head: 'engaged', of: (t: (typeof tallies)[number]) => t.events.engaged, always: false },
    { head: 'resumed', of: (t: (typeof tallies)[number]) => t.events.resumed, always: true },
    { head: 'tapped', of: (t: (typeof tallies)[number]) => t.events.tapped, always: false },
    { head: 'overridden', of: (t: (typeof tallies)[number]) => t.events.override_began, always: false },
    { head: 'ended for bends', of: (t: (typeof tallies)[number]) => t.ends.bends, always: false },
    { head: 'by the rider', of: (t: (typeof tallies)[number]) => t.ends.rider, always: false },
    { head: 'by its own rules', of: (t: (typeof tallies)[number]) => t.ends.rules, always: true },
    { head: 'refused', of: (t: (typeof tallies)[number]) => t.events.refused, always: false },
  ].filter(({ of, always }) => always || any(of));
  return table(
    'What became of the hold',
    [
      { head: 'candidate' },
      { head: 'hold on', number: true },
      { head: 'off', number: true },
      ...columns.map(({ head }) => ({ head, number: true })),
    ],
    tallies.map((tally) => [
      who(view, tally.candidate.name),
      percent(toPct(tally.onShare), view.speed),
      timeText(tally.off),
      ...columns.map(({ of }) => fixed(of(tally))),
    ]),
  );
}

const stripCaption = (view: View): string =>
  `Where hold was on, by candidate${view.result.bends === null ? '' : '; the first row has the bends that ask for less than the set speed, those to the right below its line'}.`;

function stripKey(view: View): Html {
  const sign = (fill: string, over: Html | null): Html =>
    html`<svg class="key" viewBox="0 0 26 14" width="26" height="14" aria-hidden="true">${rectangle({ left: 0, top: 0, width: 26, height: 14 }, fill, over === null ? 0.75 : 1)}${over}</svg>`;
  const box = { left: 0, top: 0, width: 26, height: 14 };
  const hatched = (id: string, direction: 'rising' | 'falling', stroke: string, gap: number): Html =>
    html`${hatch(id, direction, stroke, gap)}${rectangle(box, `url(#${id})`)}`;
  const on = PAGE_PAINT.series[1]!;
  const gripped = view.candidates.some(({ result }) =>
    (result.holdEvents ?? []).some(({ kind }) => kind === 'override_began'),
  );
  const ruled = view.candidates.some((candidate) => endsByRule(candidate).length > 0);
  return html`<ul class="keys"><li>${sign(on, null)} hold on</li><li>${sign(PAGE_PAINT.page, hatched('key-off', 'rising', PAGE_PAINT.muted, 6))} off: the rider rides by hand</li>${
    gripped &&
    html`<li>${sign(on, rectangle({ ...box, height: 7 }, PAGE_PAINT.page))} half as high: the grip has the throttle</li>`
  }${
    ruled &&
    html`<li><svg class="key" viewBox="0 0 12 12" width="12" height="12" aria-hidden="true"><path d="M1,1h10l-5,9Z" fill="${PAGE_PAINT.warn}"/></svg> ended by a rule of the unit itself</li>`
  }${
    (view.result.bends?.unfit.length ?? 0) > 0 &&
    html`<li>${sign(PAGE_PAINT.page, hatched('key-unfit', 'falling', PAGE_PAINT.warn, 4))} <a href="#no-hold">speed hold does not belong</a></li>`
  }</ul>`;
}

/** Holds that the unit itself gave up. */
function ruleList(view: View): Html | null {
  const ends = view.candidates.flatMap((candidate) =>
    endsByRule(candidate).map((event) => ({ name: candidate.name, event })),
  );
  if (ends.length === 0) return null;
  return html`<h3>Ended by the unit itself</h3>
<ul>${ends
    .slice(0, MOST_TOLD)
    .map(
      ({ name, event }) =>
        html`<li><strong>${name}</strong> at ${placeText(event.distance)}, at ${speedText(event.measured, view.speed)} measured, with ${speedText(event.setSpeed, view.speed)} set: ${causeWords(event)}.</li>`,
    )}${ends.length > MOST_TOLD && html`<li>and ${fixed(ends.length - MOST_TOLD)} more in the table of events.</li>`}</ul>`;
}

function pictures(view: View, moments: readonly HoldMoment[]): Html {
  const total = MOMENT_KINDS.reduce((sum, kind) => sum + momentsOf(view.result.transients, kind).length, 0);
  return html`<h3>What followed</h3>
<p>${moments.length < total && `The worst ${moments.length} of ${total} moments, at most two of a kind. `}Time counts from the event, the upright line. Above: speed, the set speed dotted, in dashes what the first of the designs aims at. Below: the command, and the limits of the throttle. Hatched: that design's hold is off; shaded: the grip has the throttle. Lowest and highest are measured from the set speed; of a resume from where its ramp has arrived, of an override from where hold is back. Each is followed to what comes next on the way, to where the drive cannot hold the set speed, or for a minute; settling is to the first 3 s within 1 km/h, which a slow loop may leave again: lowest and highest are of the whole time.</p>
${candidateKey(view.candidates, PAGE_PAINT)}
<div class="cards">${moments.map((moment, i) => card(view, moment, i + 1))}</div>`;
}

function card(view: View, moment: HoldMoment, number: number): Html {
  const id = `moment-${number}`;
  const canvas = { id, paint: PAGE_PAINT, width: PICTURE_WIDTH, narrow: true };
  return html`<article class="card" aria-labelledby="${id}-h"><h3 id="${id}-h">${titleOf(moment)} <span class="of">${placeText(moment.distance)}</span></h3>
${holdPicture(view, moment, canvas)}
${outcomes(view, moment, number)}${reasons(moment)}</article>`;
}

/** Why a transient has no settling; equal reasons once. */
function reasons({ kind, measures }: HoldMoment): Html | null {
  if (kind === 'ended') return null;
  const names = new Map<string, string[]>();
  for (const { candidate, settling } of measures) {
    if (typeof settling === 'number') continue;
    names.set(settling.none, [...(names.get(settling.none) ?? []), candidate]);
  }
  if (names.size === 0) return null;
  return html`<p class="small">Not settled: ${[...names].map(([reason, who]) => `${who.join(', ')}, ${reason}`).join('; ')}.</p>`;
}

const TITLES: Readonly<Partial<Record<HoldMoment['kind'], string>>> = {
  engaged: 'Hold engaged',
  resumed: 'Hold resumed',
  tapped: 'Set speed tapped',
  override_ended: 'Behind an override',
  ended: 'Hold ended',
};

function titleOf({ kind, measures: [first] }: HoldMoment): string {
  const title = TITLES[kind] ?? EVENT_NAMES[kind];
  return kind === 'ended' && first !== undefined ? `${title}: ${CAUSE_NAMES[first.event.cause]}` : title;
}

function outcomes(view: View, { kind, measures, distance }: HoldMoment, number: number): Html {
  const { speed } = view;
  const ended = kind === 'ended';
  const inOrder = view.candidates.flatMap(({ name }) => measures.find((one) => one.candidate === name) ?? []);
  const rows = inOrder.map((measure): HtmlValue[] => [
    who(view, measure.candidate),
    ended
      ? fixed(speed.of(measure.event.measured), 1)
      : figure(measure.commandStep, (v) => fixed(toPct(v), 1)),
    ...(ended ? [fixed(toPct(measure.event.command), 1)] : followedCells(view, measure)),
    figure(measure.jerk, (v) => fixed(v, 1)),
  ]);
  return table(
    `Moment ${number}: ${EVENT_NAMES[kind]} at ${placeText(distance)}`,
    [
      { head: 'candidate' },
      { head: ended ? `speed / ${speed.axis}` : 'step / %', number: true },
      ...(ended
        ? [{ head: 'command / %', number: true }]
        : [
            { head: `lowest / ${speed.axis}`, number: true },
            { head: `highest / ${speed.axis}`, number: true },
            { head: 'settling / s', number: true },
          ]),
      { head: 'jerk / (m/s³)', number: true },
    ],
    rows,
  );
}

const followedCells = ({ speed }: View, measure: HoldMeasure): HtmlValue[] => [
  figure(measure.lowest, (v) => signed(speed.of(v), 1)),
  figure(measure.highest, (v) => signed(speed.of(v), 1)),
  figure(measure.settling, (v) => fixed(v, v < 9.95 ? 1 : 0)),
];

/** A figure, or a dash with its reason. */
const figure = (value: Figure, text: (value: number) => string): HtmlValue =>
  typeof value === 'number' ? text(value) : html`<span title="${value.none}">${NO_VALUE}</span>`;

/** Every event of every candidate, with what followed it. */
function eventTable(view: View): Html | null {
  const { speed, result } = view;
  let left = MOST_ROWS;
  let count = 0;
  const rows = view.candidates.flatMap(({ name, result: { holdEvents = [] } }): TableRow[] => {
    count += holdEvents.length;
    const shown = holdEvents.slice(0, left);
    left -= shown.length;
    if (shown.length === 0) return [];
    const own = result.transients.measures.filter(({ candidate }) => candidate === name);
    return [
      { group: name },
      ...shown.map((event): HtmlValue[] => {
        const measure = own.find((one) => one.event.time === event.time && one.event.kind === event.kind);
        const none = Array<HtmlValue>(5).fill(NO_VALUE);
        return [
          placeText(event.distance),
          EVENT_NAMES[event.kind],
          CAUSE_NAMES[event.cause],
          fixed(speed.of(event.setSpeed), 1),
          fixed(speed.of(event.measured), 1),
          fixed(toPct(event.command), 1),
          ...(measure === undefined
            ? none
            : [
                figure(measure.commandStep, (v) => fixed(toPct(v), 1)),
                ...followedCells(view, measure),
                figure(measure.jerk, (v) => fixed(v, 1)),
              ]),
        ];
      }),
    ];
  });
  if (count === 0) return null;
  return html`<details><summary>All events of the hold</summary>${table(
    'All events of the hold',
    [
      { head: 'where' },
      { head: 'what' },
      { head: 'by' },
      { head: `set speed / ${speed.axis}`, number: true },
      { head: `measured / ${speed.axis}`, number: true },
      { head: 'command / %', number: true },
      { head: 'step / %', number: true },
      { head: `lowest / ${speed.axis}`, number: true },
      { head: `highest / ${speed.axis}`, number: true },
      { head: 'settling / s', number: true },
      { head: 'jerk / (m/s³)', number: true },
    ],
    rows,
    'dense',
  )}${count > MOST_ROWS && html`<p class="note">${fixed(count - MOST_ROWS)} more events stand in hold-events.csv.</p>`}</details>`;
}
