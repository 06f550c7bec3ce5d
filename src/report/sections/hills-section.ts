import { type Hill, type HillGears, type HillOutcome, isNone } from '../../study/findings.ts';
import { toPct } from '../../units/convert.ts';
import { hillPicture } from '../charts/hill-picture.ts';
import { candidateKey, lineKey } from '../charts/line-key.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { startingCharge } from '../model/battery-words.ts';
import { causeName } from '../model/cause-words.ts';
import { gearName } from '../model/gear-words.ts';
import { hillNoun } from '../model/hill-words.ts';
import { inReaderUnit } from '../model/reader-unit.ts';
import type { CandidateView, View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import {
  energyText,
  fixed,
  fixedApart,
  forceText,
  gradeText,
  lengthText,
  NO_VALUE,
  powerText,
  significant,
  stretchText,
  withUnit,
} from '../quantity.ts';
import { descents } from './descents.ts';
import type { Section } from './section.ts';
import { table } from './table.ts';

const DEFINED =
  'In the tables, largest error: the speed furthest from the set speed, less the set speed, on the hill and for 15 s behind it, or to the end of an overshoot begun there; negative is too slow. Changes of set speed do not count. By hand: the same by the hand formula of the last section, without any controller.';

/** Share of the demand from which it is told that grip is what limits it. */
const NEAR_GRIP = 0.6;
/** Cards are for the hills that matter most; the table has all. */
const MOST_CARDS = 12;
/** As wide as a card on a small screen, so that its words keep their size there. */
const PICTURE_WIDTH = 340;

/** 6: the hills, in order along the road: a card for each of the worst, a table for all. */
export function hillsSection(view: View): Section {
  const { hills } = view.result;
  if (hills.length === 0) {
    const body = html`<p>On no stretch does the demand leave the range of the drive, and no candidate leaves its band or meets a limit.</p>`;
    return { id: 'hills', number: 6, title: 'Hills', body };
  }
  const worst = [...hills].sort((a, b) => weight(b) - weight(a) || a.number - b.number).slice(0, MOST_CARDS);
  const shown = worst.sort((a, b) => a.number - b.number);
  const rest = hills.length - shown.length;
  const body = html`<p>A hill is every stretch where the demand leaves the range of the drive, or a candidate leaves its band or meets a limit; all candidates share them. ${
    rest > 0 && `Cards: the ${shown.length} worst of ${hills.length}; the table at the end has all.`
  } In the pictures time counts from the foot of the hill, and the hill is shaded${view.candidates.some(({ result }) => result.shifts.length > 0) && ', darker where a shift is made'}${view.candidates.some(({ locked, result }) => !locked && (result.holdEvents ?? []).some(({ kind }) => kind === 'ended')) && ', hatched where hold is off'}. Above: speed, the set speed dotted. Below: the command as lines, and as an area the throttle that would hold the set speed steadily; beyond the dashed lines the drive has no more. A line that swings too fast to be drawn is a band from least to greatest.${view.rides.length > 0 && ' A logged ride is drawn beside them from its own time at the foot, its throttle as the log has it; no hill is explained by it.'}</p>
<p>${DEFINED}${chargeWords(view)}</p>
${candidateKey(view.candidates, PAGE_PAINT, view.rides)}
<div class="cards">${shown.map((hill) => card(view, hill))}</div>
<h3>All hills</h3>
<p>Under a candidate: its largest error, and why.${outgrown(view) && ` Under a gear that is too high: the speed in ${view.speed.name} that each gear sustains, from the first.`}</p>
${allHills(view)}
${descents(view)}`;
  return { id: 'hills', number: 6, title: 'Hills', body };
}

function chargeWords(view: View): string {
  const charge = startingCharge(view);
  return charge === null
    ? ''
    : ` What the drive has is that of its battery ${charge.state}${charge.left}; what it lost on the way stands under the causes.`;
}

/** How much a hill matters: what it does to the designs, then how far the demand is out of range. */
function weight(hill: Hill): number {
  let most = 0;
  for (const outcome of hill.outcomes)
    if (outcome.affected) most = Math.max(most, Math.abs(outcome.speedChange));
  return most + Math.max(0, Math.abs(hill.share) - 1);
}

function card(view: View, hill: Hill): Html {
  const runs = view.candidates.flatMap((candidate) => {
    const outcome = hill.outcomes.find((one) => one.candidate === candidate.name);
    return outcome === undefined || endedBefore(candidate, hill) ? [] : [{ candidate, outcome }];
  });
  const canvas = { id: `hill-${hill.number}`, paint: PAGE_PAINT, width: PICTURE_WIDTH, narrow: true };
  return html`<article class="card" aria-labelledby="hill-${hill.number}-h"><h3 id="hill-${hill.number}-h">${hillNoun(hill) === 'hill' ? 'Hill' : 'Stretch'} ${hill.number}: ${hill.kind} <span class="of">${stretchText(hill.from, hill.to)}</span></h3>
<p class="facts">${facts(view, hill)}</p>
${hillPicture(view, hill, canvas)}
${outcomes(view, hill, runs)}
${sentences(view, runs)}</article>`;
}

/** A run that ended on the way has nothing to say of the hills behind. */
const endedBefore = (candidate: CandidateView, hill: Hill): boolean =>
  candidate.result.status !== 'completed' && candidate.result.endDistance <= hill.from;

function facts(view: View, hill: Hill): string {
  const above = hill.share > 0;
  const share = `${fixedApart(toPct(Math.abs(hill.share)), [100])}\u00a0%`;
  const needs = above
    ? `Asks ${forceText(hill.requiredForce)}, ${hasWords(hill)} (${share}).`
    : `Asks the drive to hold back ${forceText(-hill.requiredForce)}; it can hold back ${forceText(-hill.availableForce)} (${share}).`;
  const set = view.speed.of(setSpeedAt(view, hill.shareAt));
  const steadySpeed = withUnit(fixedApart(view.speed.of(hill.sustainedSpeed), [set]), view.speed.name);
  const steady =
    Math.abs(hill.share) <= 1
      ? ''
      : above
        ? ` ${hill.beforeGrip === undefined ? 'Full throttle' : 'Within the grip it'} would hold ${hill.sustainedSpeed > 0 ? steadySpeed : 'no speed'}.`
        : ` It would run away to ${steadySpeed}.`;
  const grade = `${lengthText(hill.to - hill.from)} at ${gradeWords(hill)}, steepest ${gradeText(hill.maxGrade)}.`;
  return `${grade} ${needs}${steady}${gearFacts(view, hill)}${brakeFacts(hill)}${hill.unresolved ? ' Shorter than the smoothing resolves: the true hill may be steeper.' : ''}`;
}

/** What there is against it: full throttle, or what of it the grip passes on. */
const hasWords = ({ availableForce, beforeGrip, share }: Hill): string => {
  if (beforeGrip === undefined) return `full throttle has ${forceText(availableForce)}`;
  if (share < NEAR_GRIP) return `there is ${forceText(availableForce)}`;
  return `grip passes ${forceText(availableForce)} of the ${forceText(beforeGrip)} that full throttle gives`;
};

/** Gear engaged and needed, and what each gear would sustain. */
function gearFacts(view: View, { gears, share }: Hill): string {
  if (gears === null) return '';
  const { engaged, needed } = gears;
  const enough =
    needed === null
      ? 'no gear holds it all the way'
      : needed >= engaged
        ? 'which is enough'
        : `${gearName(needed)} would be enough`;
  const each =
    share > 1 ? ` Speed that each gear sustains, from the first: ${sustainedWords(view, gears)}.` : '';
  return ` In ${gearName(engaged)}; ${enough}.${each}`;
}

/** `44, 60, 52 km/h`; a dash where a gear sustains none. */
const sustainedWords = ({ speed }: View, { sustained }: HillGears): string =>
  withUnit(sustained.map((one) => (one > 0 ? fixed(speed.of(one)) : NO_VALUE)).join(', '), speed.name);

const brakeFacts = ({ brakePower, brakeEnergy }: Hill): string =>
  brakePower > 0
    ? ` To hold the set speed the brake would have to take up to ${powerText(brakePower)}, ${energyText(brakeEnergy)} in all.`
    : '';

/** Set speed [m/s] at a place [m]. */
function setSpeedAt({ result: { road, demand } }: View, place: number): number {
  let knot = 0;
  while (knot < road.size - 1 && road.distance[knot + 1]! <= place) knot++;
  return demand.setSpeed[knot]!;
}

/** Mean grade with its standard deviation, where it has one: two significant digits below 0.1 %, so that it is never a bare zero; finer than 0.01 % no road is known. */
function gradeWords(hill: Hill): string {
  if (!(hill.meanGradeSd > 0)) return gradeText(hill.meanGrade);
  const sd = Math.max(0.01, toPct(hill.meanGradeSd));
  const fine = sd < 0.1;
  return `${gradeText(hill.meanGrade, fine ? 2 : 1)} ±\u00a0${significant(sd, fine ? 2 : 1)}\u00a0%`;
}

interface Run {
  readonly candidate: CandidateView;
  readonly outcome: HillOutcome;
}

function outcomes(view: View, hill: Hill, runs: readonly Run[]): Html {
  const change = (speed: number): string => errorText(view, speed);
  const rows = runs.map(({ candidate, outcome }): HtmlValue[] => [
    html`<span class="who">${lineKey(candidate, PAGE_PAINT)} ${candidate.name}</span>`,
    change(outcome.speedChange),
    html`${isNone(outcome.predictedChange) ? html`<span title="${outcome.predictedChange.none}">${NO_VALUE}</span>` : change(outcome.predictedChange)}${outcome.predictionDiffers && html` <span class="flag" title="simulation and hand formula differ by more than 15 %">≠</span>`}`,
    seconds(outcome.timeLost),
    seconds(outcome.timeAtLimit),
    isNone(outcome.recovery)
      ? html`<span title="${outcome.recovery.none}">${NO_VALUE}</span>`
      : seconds(outcome.recovery),
  ]);
  return table(
    `Hill ${hill.number}: outcomes`,
    [
      { head: 'candidate' },
      { head: `largest error / ${view.speed.axis}`, number: true },
      { head: `by hand / ${view.speed.axis}`, number: true },
      { head: 'time lost / s', number: true },
      { head: 'at limit / s', number: true },
      { head: 'recovery / s', number: true },
    ],
    rows,
  );
}

/** An error, with more digits where fewer would set it on the edge of the band. */
function errorText({ speed, result }: View, error: number): string {
  const text = fixedApart(speed.of(error), [speed.of(result.band), -speed.of(result.band)], 1);
  return error > 0 && /[1-9]/.test(text) ? `+${text}` : text;
}

const seconds = (time: number): string => fixed(time, Math.abs(time) < 9.95 ? 1 : 0);

/** Why, and what would hold, for each that the hill touched; equal sentences once. */
function sentences(view: View, runs: readonly Run[]): Html | null {
  const touched = runs.filter(({ outcome }) => outcome.affected && outcome.why !== '');
  if (touched.length === 0) return null;
  const groups = new Map<string, Run[]>();
  for (const run of touched) {
    const key = JSON.stringify([
      causeName(run.outcome),
      run.outcome.why,
      run.outcome.wouldHold.map((one) => one.words),
    ]);
    groups.set(key, [...(groups.get(key) ?? []), run]);
  }
  return html`<ul class="why">${[...groups.values()].map((group) => {
    const { why, wouldHold } = group[0]!.outcome;
    const cause = causeName(group[0]!.outcome);
    const names = group.map(({ candidate }) => candidate.name).join(', ');
    const tag = cause === null ? '' : ` (${cause})`;
    return html`<li><strong>${names}</strong>${tag}: ${inReaderUnit(why, view.speed)}${wouldHold.length > 0 && html`<br><span class="hold">What would hold: ${inReaderUnit(wouldHold.map((remedy) => remedy.words).join(' '), view.speed)}</span>`}</li>`;
  })}</ul>`;
}

/** On some hill a gear is asked for more than it has. */
const outgrown = ({ result: { hills } }: View): boolean =>
  hills.some(
    ({ gears, share }) =>
      gears !== null && share > 1 && (gears.needed === null || gears.needed < gears.engaged),
  );

function allHills(view: View): Html {
  const geared = view.result.hills.some(({ gears }) => gears !== null);
  const rows = view.result.hills.map((hill): HtmlValue[] => [
    String(hill.number),
    hill.kind,
    html`<span class="who">${stretchText(hill.from, hill.to)}</span>`,
    html`<span class="who">${gradeWords(hill)}</span>`,
    fixedApart(toPct(hill.share), [100, -100]),
    fixed(hill.requiredForce),
    fixed(hill.availableForce),
    fixedApart(view.speed.of(hill.sustainedSpeed), [view.speed.of(setSpeedAt(view, hill.shareAt))]),
    ...(geared ? [gearCell(view, hill)] : []),
    ...view.candidates.map((candidate) => {
      const outcome = hill.outcomes.find((one) => one.candidate === candidate.name);
      if (outcome === undefined || endedBefore(candidate, hill)) return NO_VALUE;
      const cause = causeName(outcome);
      return html`${errorText(view, outcome.speedChange)}${cause !== null && html`<br><span class="small">${cause}</span>`}`;
    }),
  ]);
  return table(
    'All hills',
    [
      { head: 'hill', number: true },
      { head: 'kind' },
      { head: 'stretch' },
      { head: 'mean grade', number: true },
      { head: 'demand / %', number: true },
      { head: 'asked / N', number: true },
      { head: 'there is / N', number: true },
      { head: `steady speed / ${view.speed.axis}`, number: true },
      ...(geared ? [{ head: 'gear, needed' }] : []),
      ...view.candidates.map((candidate) => ({
        head: html`<span class="name">${candidate.name}</span><br>/ ${view.speed.axis}`,
        number: true,
      })),
    ],
    rows,
    'dense',
  );
}

/** `6 → 4`: engaged, and needed where that does not do; below it the speed that each gear sustains. */
function gearCell({ speed }: View, { gears, share }: Hill): HtmlValue {
  if (gears === null) return NO_VALUE;
  const { engaged, needed, sustained } = gears;
  if (needed !== null && needed >= engaged) return String(engaged + 1);
  const change = `${engaged + 1} → ${needed === null ? 'none' : needed + 1}`;
  const speeds = sustained.map((one) => (one > 0 ? fixed(speed.of(one)) : NO_VALUE)).join(' ');
  return html`<span class="who">${change}</span>${share > 1 && html`<br><span class="small">${speeds}</span>`}`;
}
