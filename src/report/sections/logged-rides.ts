import { figureRow } from '../../study/figure-table.ts';
import type { Figure, FigureValues } from '../../study/findings.ts';
import { RIDE_FIGURES } from '../../study/ride-figures.ts';
import { toKmh } from '../../units/convert.ts';
import { lineKey } from '../charts/line-key.ts';
import { rideKey } from '../charts/ride-line.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { figureTextBeside } from '../model/figure-text.ts';
import { gapWords, laidWords, pauseWords } from '../model/ride-words.ts';
import type { CandidateView, RideView, View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { bandText, NO_VALUE, placeText, speedText } from '../quantity.ts';
import { table } from './table.ts';

/** A logged ride with its figures, and those of the candidates over the same stretches. */
export function loggedRides(view: View, ride: RideView): Html {
  const columns = [
    { head: 'over the stretches of the log' },
    { head: html`<span class="who">${rideKey(ride, PAGE_PAINT)} ${ride.name}, logged</span>` },
    ...view.candidates.map((candidate) => ({
      head: html`<span class="who">${lineKey(candidate, PAGE_PAINT)} ${candidate.name}</span>${endedEarly(candidate) && ' †'}`,
    })),
  ];
  const beside = view.candidates.map(
    ({ name }) => ride.beside.find(({ candidate }) => candidate === name)?.figures ?? {},
  );
  const rows = [
    meanSpeedRow(view, ride),
    ...RIDE_FIGURES.map((name) => figureRowOf(view, ride, beside, name)),
  ];
  return html`<h3 id="ride-${ride.name}">Logged ride ${ride.name}</h3>
<p>${laidWords(view, ride)}${pauseWords(ride)}${gapWords(ride)}</p>
${table(`Logged ride ${ride.name} beside the candidates`, columns, rows, view.candidates.length > 3 ? 'dense' : 'plain')}
<p class="note">A logged ride is no candidate: no requirement applies to it, and no hill is explained by it. Figures of the candidates here are those over the same stretches, so that they differ from the table above${view.candidates.some(endedEarly) && ', and, behind †, up to where that run ended'}.${ride.laidBy === 'position' && ' Laid by the most likely sequence of places on the road, a hidden Markov model over those within 30\u00a0m of each position (Newson and Krumm 2009, from memory).'}${ride.speedFrom === 'way' && ' Local regression: Cleveland (1979), from memory, with Cauchy weights.'}</p>`;
}

const endedEarly = ({ result }: CandidateView): boolean => result.status !== 'completed';

function meanSpeedRow(view: View, ride: RideView): HtmlValue[] {
  const text = (speed: number): string => (speed > 0 ? speedText(speed, view.speed) : NO_VALUE);
  return [
    'Mean speed',
    text(ride.meanSpeed),
    ...view.candidates.map(({ name }) =>
      text(ride.beside.find(({ candidate }) => candidate === name)?.meanSpeed ?? 0),
    ),
  ];
}

function figureRowOf(
  view: View,
  ride: RideView,
  beside: readonly FigureValues[],
  name: (typeof RIDE_FIGURES)[number],
): HtmlValue[] {
  const row = figureRow(name);
  const unit = row?.unit ?? '';
  const near = unit === 'km/h' ? [toKmh(view.result.band)] : [];
  const text = (figure: Figure | undefined): HtmlValue => {
    if (figure === undefined) return NO_VALUE;
    if (typeof figure !== 'number') return html`<span title="${figure.none}">${NO_VALUE}</span>`;
    return figureTextBeside(figure, near, unit, view.speed);
  };
  const place =
    name === 'worst_low_kmh' ? ride.worstLowAt : name === 'worst_high_kmh' ? ride.worstHighAt : null;
  const label =
    row === undefined
      ? name
      : row.takesBand
        ? `${row.label}, ${bandText(view.result.band, view.speed)}`
        : row.label;
  return [
    html`<span class="wrap" title="${row?.definition ?? ''}">${label}</span>`,
    html`${text(ride.figures[name])}${place !== null && html` <span class="small">at ${placeText(place)}</span>`}`,
    ...beside.map((figures) => text(figures[name])),
  ];
}
