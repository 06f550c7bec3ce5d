import { type Html, html } from '../html.ts';
import type { CandidateView, RideView } from '../model/view.ts';
import type { Paint } from '../paint.ts';
import { segment } from './canvas.ts';
import { rideKey } from './ride-line.ts';

/** The line of a candidate, as it stands in the charts, to put before its name. */
export const lineKey = (candidate: CandidateView, paint: Paint): Html =>
  html`<svg class="key" viewBox="0 0 28 10" width="28" height="10" aria-hidden="true">${segment(1, 5, 27, 5, { stroke: paint.series[candidate.colour]!, width: 2.5, dash: candidate.dash })}</svg>`;

/** Key for people: line and name of every candidate, then of every logged ride. */
export const candidateKey = (
  candidates: readonly CandidateView[],
  paint: Paint,
  rides: readonly RideView[] = [],
): Html =>
  html`<ul class="keys">${candidates.map((candidate) => html`<li>${lineKey(candidate, paint)} ${candidate.name}</li>`)}${rides.map((ride) => html`<li>${rideKey(ride, paint)} ${ride.name}, logged</li>`)}</ul>`;
