import { fromKm, fromKmh, fromPct } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { causeNameOf } from '../model/cause-words.ts';
import { figureText } from '../model/figure-text.ts';
import { changeText, gradeText, NO_VALUE, type SpeedUnit, speedText, stretchText } from '../quantity.ts';
import type { Section } from '../sections/section.ts';
import { table } from '../sections/table.ts';
import type { Comparison } from './compare-results.ts';
import { changeMark } from './figures-part.ts';
import type { HillChange, HillOutcome, HillOutcomeChange, HillPlace } from './hill-changes.ts';

/** 5: the hills of both results, matched by their place. */
export function hillsPart({ hills: { unmatched, hills } }: Comparison, speed: SpeedUnit): Section {
  return {
    id: 'hills',
    number: 5,
    title: 'Hills, matched by place',
    body: hillsBody(unmatched, hills, speed),
  };
}

function hillsBody(unmatched: string | null, hills: readonly HillChange[], speed: SpeedUnit): Html {
  if (unmatched !== null) return html`<p>The hills are not matched: ${unmatched}.</p>`;
  if (hills.length === 0) return html`<p>Neither result has a hill.</p>`;
  const matched = hills.filter(({ before, after }) => before.length > 0 && after.length > 0);
  const rows = matched.flatMap((hill) =>
    hill.outcomes.filter(isTold).map((outcome) => outcomeRow(hill, outcome, speed)),
  );
  const total = matched.reduce((sum, { outcomes }) => sum + outcomes.length, 0);
  const left = total - rows.length;
  return html`<p>${matched.length} of ${hills.length} places have a hill in both.${left > 0 && ` Left out: ${left} of their ${total} outcomes, which moved by less than ${speedText(fromKmh(TOLD), speed)} and have the cause that they had; compare.json has them.`}</p>
${rows.length > 0 && hillTable(rows)}${single(
  'only before',
  hills.filter(({ after }) => after.length === 0).flatMap(({ before }) => before),
)}${single(
  'only after',
  hills.filter(({ before }) => before.length === 0).flatMap(({ after }) => after),
)}`;
}

/** What moved by less is told where its cause is another one [km/h]. */
const TOLD = 0.5;

const isTold = ({ before, after }: HillOutcomeChange): boolean =>
  Math.abs(Math.abs(after.speedChangeKmh) - Math.abs(before.speedChangeKmh)) >= TOLD ||
  before.cause !== after.cause ||
  before.derating !== after.derating;

function hillTable(rows: Parameters<typeof table>[2]): Html {
  return table(
    'Hills before and after',
    [
      { head: 'hill after' },
      { head: 'candidate' },
      { head: 'furthest off before', number: true },
      { head: 'after', number: true },
      { head: 'change' },
      { head: 'recovery before', number: true },
      { head: 'after', number: true },
      { head: 'cause before' },
      { head: 'after' },
    ],
    rows,
    'dense',
  );
}

function outcomeRow(hill: HillChange, outcome: HillOutcomeChange, speed: SpeedUnit) {
  const { candidate, before, after, change } = outcome;
  const far = ({ speedChangeKmh }: HillOutcome) => changeText(fromKmh(speedChangeKmh), speed);
  const recovered = ({ recovery }: HillOutcome) =>
    recovery === null ? NO_VALUE : figureText(recovery, 's', speed);
  return [
    placeCell(hill),
    html`<span class="who">${candidate}</span>`,
    far(before),
    far(after),
    changeMark(change),
    recovered(before),
    recovered(after),
    causeText(before),
    causeText(after),
  ];
}

function placeCell({ before, after }: HillChange): Html {
  const [was, is] = [placesWords(before), placesWords(after)];
  return html`<span class="who">${is}</span>${was !== is && html`<br><span class="small">before ${was}</span>`}`;
}

/** `3, 4: km 5.02 to 6.43`. */
function placesWords(places: readonly HillPlace[]): string {
  const from = Math.min(...places.map(({ fromKm }) => fromKm));
  const to = Math.max(...places.map(({ toKm }) => toKm));
  return `${places.map(({ hill }) => hill).join(', ')}: ${stretchText(fromKm(from), fromKm(to))}`;
}

const causeText = ({ cause, derating }: HillOutcome): string =>
  cause === null ? NO_VALUE : causeNameOf(cause, derating);

function single(side: string, places: readonly HillPlace[]): Html | null {
  if (places.length === 0) return null;
  const words = places.map(
    (place) =>
      `${placesWords([place])} (${place.kind}, mean grade ${gradeText(fromPct(place.meanGradePct))})`,
  );
  return html`<p class="note">${places.length === 1 ? 'A hill' : 'Hills'} ${side}: ${words.join('; ')}.</p>`;
}
