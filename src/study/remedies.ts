import type { LoopPlan } from '../loop/plan.ts';
import { fromKmh, toKmh } from '../units/convert.ts';
import { forceRange } from '../vehicle/drive-law.ts';
import type { Cause, Remedy } from './findings.ts';
import { gearRemedy } from './gear-remedy.ts';
import type { HillFacts } from './hill-facts.ts';
import { type HillWindow, holds, passHill, planOverWindow } from './hill-window.ts';
import { trueSpeedFactor } from './hold-course.ts';
import { withMoreForce, withPayload, withSetSpeed } from './levers.ts';
import { without } from './limitations.ts';
import { inKg, inKmh, inKw, inPct } from './wording.ts';

/** Steps of the levers, and how far they go: 1 km/h down to a third; 5 % of the force up to twice; 5 kg. */
const SPEED_STEP = fromKmh(1);
const LEAST_SHARE = 1 / 3;
const FORCE_STEP = 0.05;
const FORCE_STEPS = 20;
const LOAD_STEP = 5;

/** Causes that a lever of vehicle or rider can do something about; the others want other gains. Of grip no replay can tell: the loop has no slip. */
const LEVERED: readonly Cause[] = ['torque', 'power', 'derating', 'wind', 'gear', 'closed_throttle'];

export const leversHelp = (cause: Cause): boolean => LEVERED.includes(cause);

/**
 * What would hold on a hill: a lower gear, a lower set speed, more force, less load, each alone, gains fixed, found by replays over
 * the hill's window that start settled. "Holds": the run gets over and stays in the band.
 *
 * The number of steps is bracketed by doubling and then bisected under the fast scheme, and both neighbours are
 * replayed by the plan's own scheme; where that disagrees, the search is made again under it. So the value that is
 * said to hold holds, and the step before it does not.
 *
 * Speeds in words are those of the set speed, and say so where that is the indicated one; power is at the true speed.
 *
 * @param brakePower that holds the set speed where the demand is least [W]; told for `closed_throttle`
 * @returns one remedy a lever; `{none}` where the lever cannot help
 */
export function remediesFor(
  plan: LoopPlan,
  hill: HillFacts,
  window: HillWindow,
  band: number,
  cause: Cause,
  brakePower: number,
): Remedy[] {
  const windowed = planOverWindow(plan, window);
  const steps = (change: (n: number) => LoopPlan, most: number): number | null =>
    fewestSteps((n, scheme) => holds(passHill({ ...change(n), scheme }, window), band), most, plan.scheme);
  const free = { ...without(windowed, 'range'), scheme: 'fast' as const };
  let why: string | null = null;
  /** Said where a lever finds nothing: looked at once, when it is first asked. */
  const unlimited = (): string => {
    why ??= holds(passHill(free, window), band) ? '' : ': the gains leave the band even without limits';
    return why;
  };
  const search: Search = { steps, unlimited };
  const gear = gearRemedy(windowed, hill, window, band);
  const inGear = gear === null ? [] : [gear];
  if (cause === 'closed_throttle' || hill.share < 0) {
    const brake = `${inKw(brakePower)} holds the set speed at the worst place`;
    const aside = brakePower > 0 ? `the rider must brake, ${brake}` : null;
    return [...inGear, speedRemedy(windowed, search, aside), loadRemedy(windowed, search)];
  }
  const sustained = hill.sustainedSpeed / trueSpeedFactor(windowed.hold, windowed.vehicle);
  const full =
    sustained > 0
      ? `full throttle sustains ${speedWords(windowed, sustained, 1)}`
      : 'even with full throttle it would come to a stop';
  return [
    ...inGear,
    speedRemedy(windowed, search, hill.share > 1 ? full : null),
    forceRemedy(windowed, search),
    loadRemedy(windowed, search),
  ];
}

interface Search {
  /** Fewest steps of a lever that hold, up to a number of them; null: none. */
  readonly steps: (change: (n: number) => LoopPlan, most: number) => number | null;
  readonly unlimited: () => string;
}

/** A speed in the terms of the set speed, and which those are where they are not the true ones. */
const speedWords = ({ hold }: LoopPlan, speed: number, decimals = 0): string =>
  `${inKmh(speed, decimals)}${hold.setSpeedIs === 'indicated' ? ' indicated' : ''}`;

function speedRemedy(windowed: LoopPlan, { steps, unlimited }: Search, aside: string | null): Remedy {
  const highest = [windowed.hold.setSpeed, ...windowed.hold.changes.map((change) => change.setSpeed)];
  const top = Math.ceil(toKmh(highest.reduce((a, b) => Math.max(a, b))) - 1e-9);
  const speedAt = (n: number): number => SPEED_STEP * (top - n);
  const least = Math.ceil(top * LEAST_SHARE);
  const n = steps((k) => withSetSpeed(windowed, speedAt(k)), top - least);
  const also = aside === null ? '' : ` (${aside})`;
  if (n === null)
    return noRemedy(
      'set_speed',
      `No set speed down to ${speedWords(windowed, least * SPEED_STEP)} holds${also}${unlimited()}.`,
    );
  return {
    lever: 'set_speed',
    holds: speedAt(n),
    fails: speedAt(n - 1),
    words: `Holds at ${speedWords(windowed, speedAt(n))}; at ${speedWords(windowed, speedAt(n - 1))} it does not${also}.`,
  };
}

function forceRemedy(windowed: LoopPlan, { steps, unlimited }: Search): Remedy {
  const speed = windowed.hold.setSpeed * trueSpeedFactor(windowed.hold, windowed.vehicle);
  const powerAt = (n: number): number => {
    const { drive } = withMoreForce(windowed, n * FORCE_STEP).vehicle;
    return forceRange(drive, drive.gear, speed, 1).greatest * speed;
  };
  const n = steps((k) => withMoreForce(windowed, k * FORCE_STEP), FORCE_STEPS);
  if (n === null) return noRemedy('power', `Twice the force does not hold either${unlimited()}.`);
  const at = windowed.hold.setSpeedIs === 'indicated' ? `${inKmh(speed)} true` : inKmh(speed, 0);
  return {
    lever: 'power',
    holds: powerAt(n),
    fails: powerAt(n - 1),
    words: `Holds with ${inPct(n * FORCE_STEP)} more force, ${inKw(powerAt(n))} at the wheel at ${at} at sea level; with ${inPct((n - 1) * FORCE_STEP)} more it does not.`,
  };
}

function loadRemedy(windowed: LoopPlan, { steps, unlimited }: Search): Remedy {
  const { payload } = windowed.vehicle;
  if (payload <= 0) return noRemedy('load', 'There is no payload to take off.');
  const top = Math.ceil(payload / LOAD_STEP - 1e-9);
  const loadAt = (n: number): number => (n === 0 ? payload : LOAD_STEP * (top - n));
  const n = steps((k) => withPayload(windowed, loadAt(k)), top);
  if (n === null)
    return noRemedy('load', `Taking off all ${inKg(payload)} of payload does not hold either${unlimited()}.`);
  return {
    lever: 'load',
    holds: loadAt(n),
    fails: loadAt(n - 1),
    words: `Holds with ${inKg(loadAt(n))} of payload; with ${inKg(loadAt(n - 1))} it does not.`,
  };
}

const noRemedy = (lever: Remedy['lever'], words: string): Remedy => ({
  lever,
  holds: { none: words },
  fails: { none: words },
  words,
});

type Trial = (n: number, scheme: LoopPlan['scheme']) => boolean;

/** Fewest steps that hold, with the step before failing; null where none up to `most` was found. */
function fewestSteps(trial: Trial, most: number, scheme: LoopPlan['scheme']): number | null {
  const guess = bracketAndBisect((n) => trial(n, 'fast'), most);
  if (scheme === 'fast' || guess === null) return guess;
  const confirmed = trial(guess, scheme) && (guess === 1 || !trial(guess - 1, scheme));
  return confirmed ? guess : bracketAndBisect((n) => trial(n, scheme), most);
}

/** Doubles from 1 until a step holds, then bisects; 0 steps are known to fail. */
function bracketAndBisect(trial: (n: number) => boolean, most: number): number | null {
  let fails = 0;
  let works = 0;
  for (let n = 1; works === 0 && fails < most; n = Math.min(2 * n, most)) {
    if (trial(n)) works = n;
    else fails = n;
  }
  if (works === 0) return null;
  while (works - fails > 1) {
    const middle = (works + fails) >> 1;
    if (trial(middle)) works = middle;
    else fails = middle;
  }
  return works;
}
