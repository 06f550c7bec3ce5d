import { loopStability } from '../control/loop-stability.ts';
import type { LoopPlan } from '../loop/plan.ts';
import { stillAndLevel } from '../vehicle/surroundings.ts';
import { type SteadyReplay, whatIsLeft } from './cycle-replay.ts';
import type { CycleCause } from './findings.ts';
import { trueSpeedFactor } from './hold-course.ts';
import { has, type Limitation, without } from './limitations.ts';
import { inKmh } from './wording.ts';

interface Suspect {
  readonly limitation: Limitation;
  readonly cause: CycleCause;
  readonly words: string;
}

/** What is not linear in a loop, and can keep it swinging whatever its margins; of two that explain as much, the first. */
const SUSPECTS: readonly Suspect[] = [
  { limitation: 'slack', cause: 'slack', words: 'the slack of the actuator' },
  { limitation: 'fuel_cut', cause: 'fuel_cut', words: 'the step of the fuel cut' },
  { limitation: 'pulses', cause: 'pulse_counting', words: 'the pulses of the speed sensor' },
  { limitation: 'resolution', cause: 'resolution', words: 'the steps of the throttle' },
  { limitation: 'shifting', cause: 'shifting', words: 'the shifts of the gearbox' },
];
/** What makes gains too high for the loop that they are in. */
const LATENESS: readonly (readonly [Limitation, string])[] = [
  ['rate', "the actuator's rate limit"],
  ['dead_time', "the actuator's dead time"],
  ['windup', 'the windup of the integral'],
];
/** Gains that are tried, as shares of the candidate's own. */
const SOFTER: readonly (readonly [number, string])[] = [
  [1 / 2, 'half'],
  [1 / 4, 'a quarter of'],
  [1 / 8, 'an eighth of'],
];
/** The cause is that without which less than this share of the amplitude is left. */
const HALF = 0.5;
/** Two that differ by less than this share of the amplitude explain as much. */
const AS_MUCH = 0.05;

export interface CycleFinding {
  readonly cause: CycleCause;
  readonly why: string;
}

/** A cycle on the steady road, and its amplitude there with everything in place [m/s]. */
interface Trial extends SteadyReplay {
  readonly amplitude: number;
}

/**
 * Why a loop keeps swinging: replays over the steady road (see SteadyReplay) with one thing taken away at a time.
 *
 * 0. `gains` where the linear loop, the speed itself seen, is unstable on the level at the speed and in the gear of the
 *    stretch: whatever else is in it, it could not stand still.
 * 1. Without all that is not linear at once (slack, step of the fuel cut, pulses, steps of the throttle, shifts), at
 *    least half of the amplitude is left: none of them is to blame (3).
 * 2. One by one: that without which least of the amplitude is left, if that is less than half.
 * 3. `gains` where half of the gains, a quarter or an eighth leave less than half of it, with what else would end it;
 *    else `unknown`.
 *
 * @param trial with the amplitude on the steady road with everything in place [m/s]
 * @param before cause found on another stretch of the same run, tried first; null: none
 */
export function causeOfCycle(trial: Trial, before: CycleCause | null): CycleFinding {
  if (isUnstable(trial.plan))
    return {
      cause: 'gains',
      why: `The linear loop is unstable by its gains, even on the level. ${gainsOrUnknown(trial).why}`,
    };
  const suspects = SUSPECTS.filter(({ limitation }) => has(trial.plan, limitation));
  const restWithout = ({ limitation }: Suspect): number => leftOf(trial, without(trial.plan, limitation));
  const known = suspects.find(({ cause }) => cause === before);
  if (known !== undefined) {
    const rest = restWithout(known);
    if (ends(trial, rest)) return named(trial, known, rest);
  }
  const bare = suspects.reduce((barer, { limitation }) => without(barer, limitation), trial.plan);
  if (suspects.length > 0 && ends(trial, leftOf(trial, bare))) {
    const rests = suspects.map(restWithout);
    const least = rests.reduce((a, b) => Math.min(a, b));
    const best = rests.findIndex((rest) => rest <= least + AS_MUCH * trial.amplitude);
    if (ends(trial, rests[best])) return named(trial, suspects[best], rests[best]);
  }
  return gainsOrUnknown(trial);
}

const leftOf = ({ period }: Trial, changed: LoopPlan): number => whatIsLeft(changed, period).amplitude;
const ends = ({ amplitude }: Trial, rest: number): boolean => rest < HALF * amplitude;
const named = (trial: Trial, { cause, words }: Suspect, rest: number): CycleFinding => ({
  cause,
  why: whyWords(trial, `without ${words}`, rest),
});

/** The linear loop is unstable on the level, at the set speed and in the gear of the plan, were the speed itself seen. */
function isUnstable({ controller, hold, road, vehicle }: LoopPlan): boolean {
  if (controller.kind !== 'pi') return false;
  const speed = hold.setSpeed * trueSpeedFactor(hold, vehicle);
  const air = stillAndLevel(road.airDensity[0], road.airTemperature[0]);
  const seen = { ...vehicle, sensor: { ...vehicle.sensor, pulses: null } };
  return loopStability(seen, controller, [speed], air)?.stable === false;
}

function gainsOrUnknown(trial: Trial): CycleFinding {
  const { controller } = trial.plan;
  let why = 'A locked throttle has no gains.';
  if (controller.kind !== 'pi') return { cause: 'unknown', why };
  for (const [share, words] of SOFTER) {
    const softer = { ...controller, kp: share * controller.kp, ki: share * controller.ki };
    const rest = leftOf(trial, { ...trial.plan, controller: softer });
    why = whyWords(trial, `with ${words} the gains`, rest);
    if (ends(trial, rest)) return { cause: 'gains', why: `${why}${lateWords(trial)}` };
  }
  return { cause: 'unknown', why };
}

/** What beside lower gains would end it. */
function lateWords(trial: Trial): string {
  for (const [limitation, words] of LATENESS) {
    if (!has(trial.plan, limitation)) continue;
    const rest = leftOf(trial, without(trial.plan, limitation));
    if (ends(trial, rest)) return ` So it is without ${words}: ${inKmh(rest)}.`;
  }
  return '';
}

const whyWords = ({ amplitude }: Trial, change: string, rest: number): string =>
  `On a steady road of the same mean grade it goes on by itself at ${inKmh(amplitude)}; ${change} ${
    Number.isFinite(rest) ? `${inKmh(rest)} of that is left` : 'the run would end on the way'
  }.`;
