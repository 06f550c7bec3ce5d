import type { HoldEvent, HoldEventKind } from '../../loop/result.ts';
import type { RunResult } from '../../run/run-result.ts';
import { isByRule } from '../../study/hold-off.ts';
import type { HoldMeasure } from '../../study/hold-transient.ts';
import { badness } from '../../study/hold-transients.ts';
import { toPct } from '../../units/convert.ts';
import { timeText } from '../quantity.ts';
import { percent } from './design-standing.ts';
import { offOf } from './hold-away.ts';
import { readerWords } from './hold-words.ts';
import type { CandidateView, View } from './view.ts';

/** What became of the hold of one candidate. */
export interface HoldTally {
  readonly candidate: CandidateView;
  /** Time with hold off [s], and the share of the driving time with it on. */
  readonly off: number;
  readonly onShare: number;
  readonly events: Readonly<Record<HoldEventKind, number>>;
  /** How often bends, the rider's other doings, and the unit's own rules ended it. */
  readonly ends: { readonly bends: number; readonly rider: number; readonly rules: number };
}

const NONE: HoldTally['events'] = {
  engaged: 0,
  resumed: 0,
  tapped: 0,
  override_began: 0,
  override_ended: 0,
  reentered: 0,
  ended: 0,
  refused: 0,
};

export function holdTally(run: RunResult, candidate: CandidateView): HoldTally {
  const { result } = candidate;
  const off = offOf(run, result).reduce((time, { since, until }) => time + until - since, 0);
  const events = { ...NONE };
  const ends = { bends: 0, rider: 0, rules: 0 };
  for (const event of result.holdEvents ?? []) {
    events[event.kind]++;
    if (event.kind === 'ended') ends[endedBy(event)]++;
  }
  return { candidate, off, onShare: result.endTime > 0 ? 1 - off / result.endTime : 0, events, ends };
}

function endedBy(event: HoldEvent): keyof HoldTally['ends'] {
  if (event.cause === 'bend') return 'bends';
  return isByRule(event) ? 'rules' : 'rider';
}

/** `it ends 6 times, 5 times for bends, once by the rider`, `it ends once, by a rule of the unit itself`; that no rule ended it is told too. */
export function endWords({ ends, events }: HoldTally): string {
  if (events.ended === 0) return 'nothing ends it once it is engaged';
  const causes: readonly [number, string][] = [
    [ends.bends, 'for bends'],
    [ends.rider, 'by the rider'],
    [ends.rules, 'by a rule of the unit itself'],
  ];
  const parts = causes
    .filter(([count]) => count > 0)
    .map(([count, words]) => (count === events.ended ? words : `${timesText(count)} ${words}`));
  const never = ends.rules > 0 ? '' : ', never by a rule of the unit itself';
  return `it ends ${timesText(events.ended)}, ${parts.join(', ')}${never}`;
}

export const timesText = (count: number): string =>
  count === 1 ? 'once' : count === 2 ? 'twice' : `${count} times`;

/** The transient of a candidate that is worst while hold is on; null where there is none. */
export function worstTransient({ transients }: RunResult, candidate: string): HoldMeasure | null {
  return transients.measures
    .filter((one) => one.candidate === candidate && one.event.kind !== 'ended')
    .reduce<HoldMeasure | null>(
      (worst, one) => (worst === null || badness(one) > badness(worst) ? one : worst),
      null,
    );
}

/** What became of the hold, for the sentence that opens the page; null where hold was on all the way. */
export function holdClause({ result, speed }: View, candidate: CandidateView): string | null {
  const tally = holdTally(result, candidate);
  if (tally.off === 0) return null;
  return `hold is on for ${percent(toPct(tally.onShare), speed)} of the time, ${endWords(tally)}`;
}

/** How often hold ended and why, the share of the time with it on, and the worst transient: one or two sentences. */
export function holdAnswer(view: View, candidate: CandidateView): string {
  const tally = holdTally(view.result, candidate);
  const off = tally.off > 0 ? `, off for ${timeText(tally.off)}` : '';
  const worst = worstTransient(view.result, candidate.name);
  const told = worst === null ? '' : ` Its worst transient: ${readerWords(view, worst)}`;
  return `${candidate.name} has hold on for ${percent(toPct(tally.onShare), view.speed)} of the time${off}; ${endWords(tally)}.${told}`;
}

/** The holds of a candidate that rules of the unit ended: place, speed and why. */
export const endsByRule = ({ result: { holdEvents = [] } }: CandidateView): readonly HoldEvent[] =>
  holdEvents.filter((event) => event.kind === 'ended' && isByRule(event));
