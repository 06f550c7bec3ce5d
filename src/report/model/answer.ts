import type { Hill, HillOutcome } from '../../study/findings.ts';
import { isNone } from '../../study/findings.ts';
import { gripPlaces } from '../../study/grip-places.ts';
import { bandText, changeText, gradeText, placeText, speedText, stretchText } from '../quantity.ts';
import { batteryClause } from './battery-words.ts';
import { causeWords } from './cause-words.ts';
import { cycleClause } from './cycle-words.ts';
import {
  type DesignStanding,
  designStanding,
  findingsOf,
  percent,
  requirementClause,
  type Standing,
  standingOf,
  statusWords,
} from './design-standing.ts';
import { hillNoun } from './hill-words.ts';
import { holdClause } from './hold-tally.ts';
import { isUnstable } from './loop-words.ts';
import { matrixStandings } from './matrix-standing.ts';
import { combinationText, listWords } from './matrix-words.ts';
import { settledRange } from './settled-range.ts';
import type { Verdict } from './verdicts.ts';
import type { CandidateView, View } from './view.ts';

/** The run in one sentence, and how the design it speaks of stands against what was asked. */
export interface Answer {
  readonly sentence: string;
  readonly standing: Standing;
  /** How every design stands, in the order of the case: `pi-60s: 2 of 3 not met`. */
  readonly designs: readonly DesignStanding[];
  /** The design that the sentence speaks of; null where there is none. */
  readonly design: string | null;
}

const VERDICT_COST: Readonly<Record<Verdict, number>> = {
  met: 0,
  'not judged': 2,
  'too close to call': 1,
  'not met': 3,
};

/** Best first: reached the end, a loop that is stable, fewest requirements missed, most time within the band, least rms error, order of the case. */
export function bestDesign(view: View): CandidateView | null {
  const score = (candidate: CandidateView): readonly number[] => {
    const cost = findingsOf(view, candidate.name).reduce((sum, one) => sum + VERDICT_COST[one.verdict], 0);
    const within = candidate.figures.within_band_pct;
    const rms = candidate.figures.rms_error_kmh;
    return [
      candidate.result.status === 'completed' ? 0 : 1,
      isUnstable(candidate) ? 1 : 0,
      cost,
      typeof within === 'number' ? -within : 0,
      typeof rms === 'number' ? rms : 0,
    ];
  };
  const ranked = view.candidates
    .filter((candidate) => !candidate.locked)
    .map((candidate) => ({ candidate, score: score(candidate) }))
    .sort((a, b) => {
      const k = a.score.findIndex((value, i) => value !== b.score[i]);
      return k < 0 ? 0 : a.score[k]! - b.score[k]!;
    });
  return ranked[0]?.candidate ?? null;
}

/** The set speed of the case, unless it changes on the way or is that at which the rider engages. */
function heldSpeed(
  { result: { hold }, speed }: View,
  { result: { holdEvents = [] } }: CandidateView,
): string {
  const taps = holdEvents.some(({ kind }) => kind === 'tapped');
  if (hold.changes.length > 0 || taps) return 'its set speeds';
  if (hold.starts === 'by_hand') return 'the set speed';
  const another = holdEvents.some(({ kind, setSpeed }) => kind === 'engaged' && setSpeed !== hold.setSpeed);
  return another ? 'its set speeds' : speedText(hold.setSpeed, speed, 0);
}

/** What share of the time a candidate is within the band, and of what: the holdable stretches where a requirement asks that. */
export function withinClause(view: View, candidate: CandidateView): string {
  const { result, speed } = view;
  const target = heldSpeed(view, candidate);
  const asked = findingsOf(view, candidate.name).find(
    ({ requirement }) => requirement.figure === 'within_band_pct' && requirement.where === 'holdable',
  );
  const judged = asked !== undefined && !isNone(asked.measured);
  const figure = judged ? asked.measured : candidate.figures.within_band_pct;
  if (figure === undefined || isNone(figure)) return `keeps ${target} on no part of the road`;
  const band = bandText(asked?.requirement.band ?? result.band, speed);
  const held = holdClause(view, candidate) === null ? '' : ' with hold on';
  const place = `of the time${held}${judged ? `${held && ','} on the holdable road` : ''}`;
  return `holds ${target} within ${band} for ${percent(figure, speed)} ${place}`;
}

interface Defeat {
  readonly hill: Hill;
  readonly outcome: HillOutcome;
}

/** The hill that takes most speed off a candidate, or gives it most. */
function worstHill(view: View, name: string): Defeat | null {
  let worst: Defeat | null = null;
  for (const hill of view.result.hills)
    for (const outcome of hill.outcomes) {
      if (outcome.candidate !== name || !outcome.affected) continue;
      if (
        Math.abs(outcome.speedChange) <= Math.max(view.result.band, Math.abs(worst?.outcome.speedChange ?? 0))
      )
        continue;
      worst = { hill, outcome };
    }
  return worst;
}

/** An error against the slope is made when the slope is over. */
function behind({ kind }: Hill, { speedChange }: HillOutcome): string {
  if (kind === 'climb' && speedChange > 0) return ' behind its crest';
  return kind === 'descent' && speedChange < 0 ? ' behind its foot' : '';
}

function hillClause(view: View, design: CandidateView): string {
  const worst = worstHill(view, design.name);
  if (worst === null) return 'no hill takes it out of its band';
  const { hill, outcome } = worst;
  // Beyond what drive or battery have nothing holds, whatever the design; within it the design alone lets the speed go.
  const beyond = Math.abs(hill.share) > 1 || outcome.cause === 'derating';
  const verdict = beyond ? 'defeats it' : 'takes it out of its band';
  const verb = outcome.speedChange < 0 ? 'loses' : 'gains';
  const amount = changeText(Math.abs(outcome.speedChange), view.speed).replace('+', '');
  const cause = causeWords(outcome);
  const why = cause === null ? '' : ` because ${cause}`;
  return `${hillNoun(hill)} ${hill.number} (${stretchText(hill.from, hill.to)}, mean grade ${gradeText(hill.meanGrade)}) ${verdict}: it ${verb} ${amount}${behind(hill, outcome)}${why}`;
}

/** At how many places its drive asks more of the tyre than that passes on; null where at none, or the grip is not known. */
function gripClause({ result: { road, vehicle, demand } }: View, { result }: CandidateView): string | null {
  if (vehicle.traction === null) return null;
  const places = gripPlaces({ plan: { road, vehicle }, result }, demand);
  if (places.length === 0) return null;
  const count =
    places.length === 1
      ? `at ${placeText(places[0]!.from)}`
      : `at ${places.length} places, first at ${placeText(places[0]!.from)},`;
  return `${count} its tyre would lose its grip: the model has no slip`;
}

export function lockedClause(view: View, alone: boolean): string | null {
  const locked = view.candidates.find((candidate) => candidate.locked);
  if (locked === undefined) return null;
  const subject = alone ? `The throttle locked in place` : 'a throttle locked in place';
  if (locked.result.status !== 'completed') return `${subject} ${statusWords(locked)}`;
  const range = settledRange(view, locked);
  if (range === null) return `${subject} reached the end`;
  return `${subject} strays from ${speedText(-range.low, view.speed, 0)} below the set speed to ${speedText(range.high, view.speed, 0)} above it`;
}

/** How the design stands over the matrix; null without one, or where nothing is asked of it. */
function matrixClause({ result: { matrix }, speed }: View, name: string): string | null {
  if (matrix === null) return null;
  const standing = matrixStandings(matrix).find(({ candidate }) => candidate === name);
  if (standing === undefined) return null;
  const { counts, combinations, worst } = standing;
  const lists = listWords(matrix.lists);
  const where =
    counts.met === combinations
      ? ''
      : `, and is worst at ${combinationText(worst.cell, matrix.lists, speed)}`;
  return `over ${combinations === 1 ? 'one combination' : `${combinations} combinations`} of ${lists} it meets every requirement in ${counts.met}${where}`;
}

/** The sentence that opens the page. */
export function answerOf(view: View): Answer {
  const design = bestDesign(view);
  const designs = view.candidates.filter((one) => !one.locked).map((one) => designStanding(view, one));
  if (design === null) {
    const asked = requirementClause(view, view.result.requirements);
    const words = lockedClause(view, true) ?? 'Nothing was replayed';
    const within = view.candidates[0] === undefined ? '' : ` and ${withinClause(view, view.candidates[0])}`;
    return {
      sentence: `${words}${within}; no design was replayed beside it.`,
      standing: asked.standing,
      designs,
      design: null,
    };
  }
  const asked = requirementClause(view, findingsOf(view, design.name));
  const unstable = isUnstable(design);
  const early = view.candidates.filter((candidate) => candidate.result.status !== 'completed');
  const others = early.filter((candidate) => candidate !== design && !candidate.locked);
  const parts = [
    design.result.status === 'completed'
      ? `${design.name} ${withinClause(view, design)}${asked.words === '' ? '' : `, ${asked.words}`}`
      : `${design.name} ${statusWords(design)} and does not finish the road; up to there it ${withinClause(view, design)}`,
    unstable ? 'its linear loop is unstable, so that it swings on any road' : null,
    holdClause(view, design),
    hillClause(view, design),
    gripClause(view, design),
    batteryClause(view, design),
    cycleClause(view, design.name),
    ...(others.length === 0 ? [] : [others.map((one) => `${one.name} ${statusWords(one)}`).join(', ')]),
    lockedClause(view, false),
    matrixClause(view, design.name),
  ].filter((part) => part !== null);
  return {
    sentence: `${parts.join('; ')}.`,
    standing: design.result.status !== 'completed' ? 'incomplete' : standingOf(asked.standing, unstable),
    designs,
    design: design.name,
  };
}
