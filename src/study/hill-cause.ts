import type { LoopPlan } from '../loop/plan.ts';
import { batteryRange, type TiredBattery, tiredIdeal } from './battery-cause.ts';
import type { Cause, Derating, Figure, None } from './findings.ts';
import { keptInGear } from './gear-course.ts';
import type { HillEvents } from './hill-events.ts';
import type { HillFacts } from './hill-facts.ts';
import { AT_LIMIT } from './hill-stretches.ts';
import { excessOf, type HillPassage, type HillWindow, passHill, planOverWindow } from './hill-window.ts';
import { deratesByItself, has, type Limitation, without } from './limitations.ts';
import { nameRange } from './range-cause.ts';
import { demandWords, gearName, inKmh, inPct, inSeconds } from './wording.ts';

export interface CauseFinding {
  readonly cause: Cause | None;
  /** Of the cause `derating`. */
  readonly derating?: Derating;
  readonly why: string;
}

/** Change of speed of the ideal hold on a hill [m/s]: with any grip, as the loop has it, and with that of the wheel. */
export interface IdealChange {
  readonly change: Figure;
  readonly gripped: number;
}

/**
 * Why a candidate that regulates left its band or sat on a limit on a hill: by replays over the hill's window that take
 * one limitation away at a time, gains untouched.
 *
 * 1. The set speed asks for more than the grip of the driven wheel passes on, and the drive has it: `traction`, if the
 *    band was kept or the ideal hold with that grip goes more than half as far from the set speed as the worst error,
 *    to whichever side: the loop has no slip, so that what it does beyond the grip is not to be relied on.
 *    In the same way `derating`: what the battery left of the force in the run is not enough, and the ideal hold with it
 *    makes more than half of the worst error, or half of the excess goes with a battery that is cold and full enough.
 * 2. A limit was met but the band was kept: the demand alone decides (nameRange). If it is in range too, `traction`
 *    where the drive went beyond the grip of its wheel by itself, else `gains`.
 * 3. Limitations are tried in this order: an integrator that does not wind up, no rate limit, no slack, an automatic
 *    gearbox that stays in the gear the hill needs (`gear`, also where it never left another), a battery that is always cold and full enough
 *    (`derating`), no throttle range; each only where it was met. The first without which the band is kept is the
 *    cause. Where the worst error lies on the far side of the limit (too fast after full throttle, too slow after
 *    closed), windup need answer for that side only, and is the cause if half of its excess goes with it.
 * 4. If none alone does it, the one that takes away most of the excess over the band, if that is at least half of it.
 *    Else the throttle range, if the ideal hold, which has no gains, makes more than half of the worst error too; else
 *    `gains`.
 * 5. The throttle range is named by the demand (nameRange): `gear`, `derating`, `wind`, `closed_throttle`,
 *    `power`, `torque`. A demand in range throughout: `gains`, the controller went there itself.
 *
 * @param excess of the replay over the window with all limitations: how far outside of the band it went [m/s]
 * @param ideal what the ideal hold does on the hill
 * @param battery what a battery took of the drive there in the candidate's run
 * @returns the cause, and why with what is left of the error without it
 */
export function causeOnHill(
  plan: LoopPlan,
  hill: HillFacts,
  window: HillWindow,
  events: HillEvents,
  band: number,
  excess: number,
  ideal: IdealChange,
  battery: TiredBattery | null = null,
): CauseFinding {
  const windowed = planOverWindow({ ...plan, scheme: 'fast' }, window);
  const gripped = plan.vehicle.traction === null ? null : nameRange(windowed, window, hill, hill.share >= 0);
  if (
    gripped?.cause === 'traction' &&
    (!events.leftBand || Math.abs(ideal.gripped) > Math.abs(worstOf(events)) / 2)
  ) {
    const kept = events.leftBand ? `the error grew to ${inKmh(worstOf(events))}` : 'the band was kept';
    return { ...gripped, why: `${gripped.why} In it ${kept}.` };
  }
  // The replays have no slip, and from here on grip is not what is asked about.
  const slipless = without(windowed, 'grip');
  const scene = { windowed: slipless, window, hill, events, band, excess, battery };
  const tired = batteryCause(scene);
  if (tired !== null) return { ...tired, why: `${tired.why}${brakeWords(plan, events)}` };
  if (!events.leftBand) return causeInBand(windowed, window, hill, events);
  const { why, ...cause } = causeOfLeaving(scene, ideal.change);
  return { ...cause, why: `${why}${beyondGripWords(events)}${brakeWords(plan, events)}` };
}

/** The battery, where what it left is not enough and that accounts for at least half of what went wrong. */
function batteryCause(scene: Scene): CauseFinding | null {
  const { windowed, window, hill, events, band, excess, battery } = scene;
  if (battery === null) return null;
  const atLimit = events.timeUpper + events.timeLower > 0;
  const up = events.leftBand || !atLimit ? -events.low >= events.high : events.timeUpper >= events.timeLower;
  const range = batteryRange(windowed, window, hill, up, battery);
  if (range === null) return null;
  if (!events.leftBand) return { ...range, why: `${range.why} The band was kept.` };
  const fresh = passHill(without(windowed, 'derating'), window);
  const ideal = tiredIdeal(windowed, window, hill, up, battery);
  if (!takesHalf(excessOf(fresh, band), excess) && !makesHalf(ideal, events)) return null;
  const rest = fresh.status === 'completed' ? errorRange(fresh) : 'the run would still end here';
  return {
    ...range,
    why: `${range.why} In it the error grew to ${inKmh(worstOf(events))}; with a battery that is cold and full enough: ${rest}.`,
  };
}

function causeInBand(
  windowed: LoopPlan,
  window: HillWindow,
  hill: HillFacts,
  events: HillEvents,
): CauseFinding {
  const atLimit = events.timeUpper + events.timeLower;
  const up = atLimit > 0 ? events.timeUpper >= events.timeLower : hill.share >= 0;
  const range = nameRange(windowed, window, hill, up);
  if (range?.cause === 'traction') return { ...range, why: `${range.why} In it the band was kept.` };
  if (range !== null) return { ...range, why: `${range.why} The band was kept.` };
  if (events.timeBeyondGrip > AT_LIMIT)
    return { cause: 'traction', why: `The demand stays within the grip.${beyondGripWords(events)}` };
  return {
    cause: 'gains',
    why: `The command met its limit for ${inSeconds(atLimit)} although the demand stays in range; the band was kept.`,
  };
}

/** Where the drive pushed or held back beyond what the driven wheel passes on. */
const beyondGripWords = ({ timeBeyondGrip }: HillEvents): string =>
  timeBeyondGrip > AT_LIMIT
    ? ` For ${inSeconds(timeBeyondGrip)} the drive went beyond the grip of its wheel; the model has no slip.`
    : '';

interface Scene {
  readonly windowed: LoopPlan;
  readonly window: HillWindow;
  readonly hill: HillFacts;
  readonly events: HillEvents;
  readonly band: number;
  readonly excess: number;
  readonly battery: TiredBattery | null;
}

function causeOfLeaving(scene: Scene, ideal: Figure): CauseFinding {
  const { windowed, window, hill, events, band, excess, battery } = scene;
  const far = farSide(events);
  const removals: Removal[] = [];
  for (const limitation of triedLimitations(windowed, hill, events, battery)) {
    const passage = passHill(withoutIt(windowed, hill, limitation), window);
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
export const takesHalf = (left: number, excess: number): boolean =>
  Number.isFinite(left) && left <= excess / 2;

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

/** What is tried, in order: what was met and is there to be taken away. */
function triedLimitations(
  plan: LoopPlan,
  { gears }: HillFacts,
  events: HillEvents,
  battery: TiredBattery | null,
): Limitation[] {
  const atLimit = events.timeUpper + events.timeLower > 0;
  const met: readonly [Limitation, boolean][] = [
    ['windup', atLimit],
    ['rate', events.timeRate > 0],
    ['slack', true],
    ['shifting', events.shifts > 0 || [...events.gears].some((gear) => gear !== (gears?.needed ?? gear))],
    ['derating', (atLimit || battery !== null) && deratesByItself(plan.vehicle.drive.source)],
    ['range', atLimit],
  ];
  return met.filter(([limitation, was]) => was && has(plan, limitation)).map(([limitation]) => limitation);
}

/** True where a replay with one limitation less can tell something. */
export const canTell = (
  plan: LoopPlan,
  hill: HillFacts,
  events: HillEvents,
  battery: TiredBattery | null,
): boolean => triedLimitations(plan, hill, events, battery).length > 0;

const metAnyLimit = ({ timeUpper, timeLower, timeRate }: HillEvents): boolean =>
  timeUpper + timeLower + timeRate > 0;

/** A gearbox that may not shift is kept in the gear that the hill needs. */
function withoutIt(windowed: LoopPlan, hill: HillFacts, limitation: Limitation): LoopPlan {
  if (limitation !== 'shifting' || hill.gears === null) return without(windowed, limitation);
  return { ...windowed, vehicle: keptInGear(windowed.vehicle, keptGear(hill)) };
}

const keptGear = ({ gears }: HillFacts): number => gears?.needed ?? gears?.engaged ?? 0;

function shiftWords({ shifts, gears }: HillEvents): string {
  if (shifts === 0) return `stayed in ${gearName([...gears][0] ?? 0)} here`;
  return `shifted ${shifts === 1 ? 'once' : `${shifts} times`} here`;
}

function explain({ limitation, left, passage }: Removal, scene: Scene): CauseFinding | null {
  const { windowed, window, hill, events, battery } = scene;
  if (limitation === 'range') {
    const named = nameRange(windowed, window, hill, events.timeUpper >= events.timeLower);
    if (named === null || left === 0) return named;
    return { ...named, why: `${named.why} ${sentence(aloneWords(passage))}` };
  }
  const rest = errorRange(passage);
  switch (limitation) {
    case 'windup':
      return windupCause(passage, events);
    case 'slack':
      return {
        cause: 'slack',
        why: `The throttle has ${inPct(windowed.vehicle.actuator.slack, 1)} of lost motion (${errorRange(events)}); without it: ${rest}.`,
      };
    case 'shifting':
      return {
        cause: 'gear',
        why: `The gearbox ${shiftWords(events)} (${errorRange(events)}); kept in ${gearName(keptGear(hill))}: ${rest}.`,
      };
    case 'derating':
      return {
        cause: 'derating',
        derating: (-events.low >= events.high ? battery?.force.why : battery?.regeneration.why) ?? 'voltage',
        why: `The command was at its limit for ${inSeconds(events.timeUpper + events.timeLower)} (${errorRange(events)}); with a battery that is cold and full enough: ${rest}.`,
      };
    default:
      return {
        cause: 'rate',
        why: `The actuator was at its rate limit for ${inSeconds(events.timeRate)} (${errorRange(events)}); without that limit: ${rest}.`,
      };
  }
}

/** The range first where the ideal hold makes most of the worst error too; gains second. */
function idealCause(scene: Scene, ideal: Figure, free: Removal | null): CauseFinding | null {
  const { windowed, window, hill, events } = scene;
  const worst = worstOf(events);
  if (typeof ideal !== 'number' || !makesHalf(ideal, events)) return null;
  const named = nameRange(windowed, window, hill, ideal < 0);
  if (named === null) return null;
  const share = `An ideal hold would ${ideal < 0 ? 'lose' : 'gain'} ${inKmh(Math.abs(ideal))} of the ${inKmh(Math.abs(worst))}`;
  const second = free === null ? 'the rest is for the gains to answer' : aloneWords(free.passage);
  return { ...named, why: `${named.why} ${share}; ${second}.` };
}

/** The ideal hold goes the same way, and more than half as far. */
const makesHalf = (ideal: number, events: HillEvents): boolean => {
  const worst = worstOf(events);
  return ideal * worst > 0 && Math.abs(ideal) > Math.abs(worst) / 2;
};

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

export const errorRange = ({ low, high }: Pick<HillPassage, 'low' | 'high'>): string =>
  `error from ${inKmh(low)} to ${inKmh(high)}`;

function windupCause(passage: HillPassage, events: HillEvents): CauseFinding {
  return {
    cause: 'windup',
    why: `The integral went on growing at the limit and had to be paid back after it (${errorRange(events)}); with an integrator that follows the limit: ${errorRange(passage)}.`,
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
