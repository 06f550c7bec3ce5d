import { surroundingsBetween } from '../loop/places.ts';
import type { LoopPlan } from '../loop/plan.ts';
import { derateFactor } from '../vehicle/derating.ts';
import { forceRange } from '../vehicle/drive-law.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import { demandShare } from './demand.ts';
import type { Cause, Figure, None } from './findings.ts';
import type { HillEvents } from './hill-events.ts';
import type { HillFacts } from './hill-facts.ts';
import { excessOf, type HillPassage, type HillWindow, passHill, planOverWindow } from './hill-window.ts';
import { nominalCourse, setSpeedAt } from './hold-course.ts';
import { has, type Limitation, without } from './limitations.ts';
import { atKm, inKmh, inKw, inNewton, inPct, inSeconds } from './wording.ts';

export interface CauseFinding {
  readonly cause: Cause | None;
  readonly why: string;
}

/**
 * Why a candidate left its band or sat on a limit on a hill: by replays over the hill's window that take one
 * limitation away at a time, gains untouched.
 *
 * 1. A limit was met but the band was kept: the demand alone decides (step 4); if it is in range too, `gains`.
 * 2. Limitations are tried in this order: an integrator that does not wind up, no rate limit, no throttle range, each
 *    only where it was met. The first without which the band is kept is the cause. Where the worst error lies on the
 *    far side of the limit (too fast after full throttle, too slow after closed), windup need answer for that side
 *    only, and is the cause if half of its excess goes with it.
 * 3. If none alone does it, the one that takes away most of the excess over the band, if that is at least half of it.
 *    Else the throttle range, if the ideal hold, which has no gains, makes more than half of the worst error too; else
 *    `gains`.
 * 4. The throttle range is named by the demand: it would be in range at sea level: `derating`; in still air: `wind`;
 *    else, upwards, `power` where the power limit is below the peak force at the place of greatest demand, or
 *    `torque`; downwards `closed_throttle`. A demand in range throughout: `gains`, the controller went there itself.
 *
 * @param excess of the replay over the window with all limitations: how far outside of the band it went [m/s]
 * @param ideal change of speed of the ideal hold on the hill [m/s]
 * @returns the cause, and why with what is left of the error without it
 */
export function causeOnHill(
  plan: LoopPlan,
  hill: HillFacts,
  window: HillWindow,
  events: HillEvents,
  band: number,
  excess: number,
  ideal: Figure,
): CauseFinding {
  if (plan.controller.kind === 'locked') return lockedCause(hill);
  const windowed = planOverWindow({ ...plan, scheme: 'fast' }, window);
  const up = events.timeUpper >= events.timeLower;
  if (!events.leftBand) {
    const range = nameRange(windowed, window, hill, up);
    if (range !== null) return { ...range, why: `${range.why} The band was kept.` };
    return {
      cause: 'gains',
      why: `The command met its limit for ${inSeconds(events.timeUpper + events.timeLower)} although the demand stays in range; the band was kept.`,
    };
  }
  const { cause, why } = causeOfLeaving({ windowed, window, hill, events, band, excess }, ideal);
  return { cause, why: `${why}${brakeWords(plan, events)}` };
}

interface Scene {
  readonly windowed: LoopPlan;
  readonly window: HillWindow;
  readonly hill: HillFacts;
  readonly events: HillEvents;
  readonly band: number;
  readonly excess: number;
}

function causeOfLeaving(scene: Scene, ideal: Figure): CauseFinding {
  const { windowed, window, events, band, excess } = scene;
  const far = farSide(events);
  const removals: Removal[] = [];
  for (const limitation of metLimitations(events)) {
    if (!has(windowed, limitation)) continue;
    const passage = passHill(without(windowed, limitation), window);
    const overshot = limitation === 'windup' && far !== 0;
    const left = overshot ? excessOf(onSide(passage, far), band) : excessOf(passage, band);
    if (overshot && takesHalf(left, excess)) return windupCause(passage, events);
    removals.push({ limitation, left, passage });
    if (left === 0) break;
  }
  const best = removals.reduce<Removal | null>(
    (least, one) => (least === null || one.left < least.left ? one : least),
    null,
  );
  if (best !== null && takesHalf(best.left, excess)) {
    const found = explain(best, scene);
    if (found !== null) return found;
  }
  const free = removals.find(({ limitation }) => limitation === 'range') ?? null;
  return idealCause(scene, ideal, free) ?? gainsCause(scene, free);
}

/** A run that ended on the way has an infinite excess; one that still ends has lost nothing of it. */
const takesHalf = (left: number, excess: number): boolean => Number.isFinite(left) && left <= excess / 2;

/** Side of the worst error where that is the side away from the limit; else 0. */
function farSide({ timeUpper, timeLower, low, high }: HillEvents): 1 | -1 | 0 {
  if (timeUpper >= timeLower) return high > -low ? 1 : 0;
  return -low > high ? -1 : 0;
}

const onSide = (passage: HillPassage, side: 1 | -1): HillPassage =>
  side > 0 ? { ...passage, low: 0 } : { ...passage, high: 0 };

/** What became of the hill with one limitation less, and what is left of the excess over the band [m/s]. */
interface Removal {
  readonly limitation: Limitation;
  readonly left: number;
  readonly passage: HillPassage;
}

function metLimitations(events: HillEvents): Limitation[] {
  const limits: Limitation[] = [];
  const atLimit = events.timeUpper + events.timeLower > 0;
  if (atLimit) limits.push('windup');
  if (events.timeRate > 0) limits.push('rate');
  if (atLimit) limits.push('range');
  return limits;
}

/** True where a replay with one limitation less can tell something. */
export const metAnyLimit = (events: HillEvents): boolean => metLimitations(events).length > 0;

function explain({ limitation, left, passage }: Removal, scene: Scene): CauseFinding | null {
  const { windowed, window, hill, events } = scene;
  if (limitation === 'range') {
    const named = nameRange(windowed, window, hill, events.timeUpper >= events.timeLower);
    if (named === null || left === 0) return named;
    return { ...named, why: `${named.why} ${sentence(aloneWords(passage))}` };
  }
  if (limitation === 'windup') return windupCause(passage, events);
  return {
    cause: 'rate',
    why: `The actuator was at its rate limit for ${inSeconds(events.timeRate)} (${errorRange(events)}); without that limit: ${errorRange(passage)}.`,
  };
}

/** The range first where the ideal hold makes most of the worst error too; gains second. */
function idealCause(scene: Scene, ideal: Figure, free: Removal | null): CauseFinding | null {
  const { windowed, window, hill, events } = scene;
  const worst = worstOf(events);
  if (typeof ideal !== 'number' || ideal * worst <= 0 || Math.abs(ideal) <= Math.abs(worst) / 2) return null;
  const named = nameRange(windowed, window, hill, ideal < 0);
  if (named === null) return null;
  const share = `An ideal hold would ${ideal < 0 ? 'lose' : 'gain'} ${inKmh(Math.abs(ideal))} of the ${inKmh(Math.abs(worst))}`;
  const second = free === null ? 'the rest is for the gains to answer' : aloneWords(free.passage);
  return { ...named, why: `${named.why} ${share}; ${second}.` };
}

const worstOf = ({ low, high }: Pick<HillPassage, 'low' | 'high'>): number => (-low > high ? low : high);

const aloneWords = (passage: HillPassage): string =>
  passage.status === 'completed'
    ? `without any limit the gains alone would still let the error grow to ${inKmh(worstOf(passage))}`
    : 'without any limit the run would still end here';

const sentence = (words: string): string => `${words.charAt(0).toUpperCase()}${words.slice(1)}.`;

/** Where the rider's brake kept the worst error from growing. */
function brakeWords({ rider }: LoopPlan, events: HillEvents): string {
  if (rider.brakesAbove === null || events.timeBrake === 0 || events.high < -events.low) return '';
  return ` The rider's brake, on for ${inSeconds(events.timeBrake)} at ${inKmh(rider.brakesAbove)} above the set speed, kept it from growing further.`;
}

const errorRange = ({ low, high }: Pick<HillPassage, 'low' | 'high'>): string =>
  `error from ${inKmh(low)} to ${inKmh(high)}`;

function windupCause(passage: HillPassage, events: HillEvents): CauseFinding {
  return {
    cause: 'windup',
    why: `The integral went on growing at the limit and had to be paid back after it (${errorRange(events)}); with an integrator that follows the limit: ${errorRange(passage)}.`,
  };
}

const demandWords = (share: number): string =>
  share >= 0 ? `${inPct(share)} of the full force` : `${inPct(-share)} of what the least throttle holds back`;

function lockedCause(hill: HillFacts): CauseFinding {
  return {
    cause: { none: 'a locked throttle does not regulate' },
    why: `The throttle is locked; the demand here is up to ${demandWords(hill.share)}.`,
  };
}

function gainsCause({ hill, events }: Scene, free: Removal | null): CauseFinding {
  const demand = `The demand is up to ${demandWords(hill.share)}`;
  const worst = inKmh(worstOf(events));
  const atLimit = events.timeUpper + events.timeLower;
  const why =
    free !== null && Math.abs(hill.share) <= 1
      ? `${demand}, yet the command sat at its limit for ${inSeconds(atLimit)} and the error grew to ${worst}; ${aloneWords(free.passage)}.`
      : `${demand}${metAnyLimit(events) ? '' : ' and it never met a limit'}: the gains let the error grow to ${worst}${free === null ? '' : `; ${aloneWords(free.passage)}`}.`;
  return { cause: 'gains', why };
}

/** Names what limits the range by the demand over the hill; null where the demand is in range throughout. */
function nameRange(
  windowed: LoopPlan,
  window: HillWindow,
  hill: HillFacts,
  up: boolean,
): CauseFinding | null {
  const from = hill.from - window.start;
  const to = hill.until - window.start;
  const here = extremeDemand(windowed, from, to, up);
  if (here.share <= 1) return null;
  const asked = `At ${atKm(window.start + here.at)} the set speed needs ${inNewton(here.required)} and ${up ? 'full throttle gives' : 'the least throttle gives'} ${inNewton(here.available)}`;
  if (has(windowed, 'derating')) {
    const there = extremeDemand(without(windowed, 'derating'), from, to, up);
    if (there.share <= 1)
      return {
        cause: 'derating',
        why: `${asked}; at sea level it would have ${inNewton(there.available)}, which is enough.`,
      };
  }
  if (has(windowed, 'wind')) {
    const there = extremeDemand(without(windowed, 'wind'), from, to, up);
    if (there.share <= 1)
      return { cause: 'wind', why: `${asked}; in still air it would need ${inNewton(there.required)}.` };
  }
  if (!up) return { cause: 'closed_throttle', why: `${asked}: it cannot hold back enough.` };
  const { peakForce, peakPower } = windowed.vehicle.drive;
  if (peakPower !== null && peakPower < peakForce * here.speed)
    return { cause: 'power', why: `${asked}: the power limit of ${inKw(peakPower)} binds.` };
  return { cause: 'torque', why: `${asked}: the greatest force binds.` };
}

/** Greatest demand upwards (or downwards, as a positive share) between two places of a windowed plan. */
function extremeDemand(
  plan: LoopPlan,
  from: number,
  to: number,
  up: boolean,
): { share: number; at: number; required: number; available: number; speed: number } {
  const { road, vehicle } = plan;
  const setSpeed = setSpeedAt(road, nominalCourse(road, plan.hold, vehicle));
  let found = { share: Number.NEGATIVE_INFINITY, at: from, required: 0, available: 0, speed: 0 };
  for (let i = 0; i < road.size; i++) {
    if (road.distance[i] < from || road.distance[i] > to) continue;
    const at = surroundingsBetween(road, i, 0);
    const speed = setSpeed[i];
    const { least, greatest } = forceRange(
      vehicle.drive,
      vehicle.drive.gear,
      speed,
      derateFactor(vehicle.drive, at.airDensity, at.airTemperature),
    );
    const required = requiredForce(vehicle, speed, at);
    const signed = demandShare(required, least, greatest);
    const share = up ? signed : -signed;
    if (share > found.share)
      found = { share, at: road.distance[i], required, available: up ? greatest : least, speed };
  }
  return found;
}
