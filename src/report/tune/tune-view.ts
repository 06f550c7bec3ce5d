import type { TunedCandidate, TuneResult } from '../../run/tune-result.ts';
import { segment } from '../charts/canvas.ts';
import { type Html, html } from '../html.ts';
import { DASHES, type Paint } from '../paint.ts';
import { SPEED_UNITS, type SpeedUnit, type Units } from '../quantity.ts';

/** A tuning as one reader sees it. */
export interface TuneView {
  readonly result: TuneResult;
  readonly speed: SpeedUnit;
  /** Candidates of the case, then proposals, with the colours of their lines. */
  readonly tuned: readonly TunedView[];
  /** The proposal to take; null: none. */
  readonly chosen: TunedView | null;
}
export interface TunedView extends TunedCandidate {
  /** Index into Paint.series, and the dash pattern that goes with it. */
  readonly colour: number;
  readonly dash: string;
}

/** Gives each a look of its own, locked throttles that of locked throttles. */
export function tuneView(result: TuneResult, units: Units): TuneView {
  const looks = DASHES.length - 1;
  let place = -1;
  const tuned = result.tuned.map((one): TunedView => {
    if (one.controller.kind === 'locked') return { ...one, colour: 0, dash: DASHES[0] };
    place++;
    // Past the palette's end a colour comes again with another dash.
    const dash = DASHES[1 + ((place + Math.floor(place / looks)) % looks)]!;
    return { ...one, colour: 1 + (place % looks), dash };
  });
  const chosen = tuned.find(({ name }) => name === result.chosen) ?? null;
  return { result, speed: SPEED_UNITS[units], tuned, chosen };
}

/** The line of a candidate, to put before its name. */
export const tunedKey = ({ colour, dash }: TunedView, paint: Paint): Html =>
  html`<svg class="key" viewBox="0 0 28 10" width="28" height="10" aria-hidden="true">${segment(1, 5, 27, 5, { stroke: paint.series[colour]!, width: 2.5, dash })}</svg>`;
