import type { LoopPlan } from '../loop/plan.ts';
import { type Left, type SteadyReplay, whatIsLeft } from './cycle-replay.ts';
import type { CycleCause } from './findings.ts';
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
/** The cause is that without which less than this share of the amplitude is left. */
const HALF = 0.5;

export interface CycleFinding {
  readonly cause: CycleCause;
  readonly why: string;
}

/**
 * Why a loop keeps swinging: replays over the steady road (see SteadyReplay) with one thing taken away at a time.
 *
 * 1. Without all that is not linear at once (slack, step of the fuel cut, pulses, steps of the throttle, shifts), at
 *    least half of the amplitude is left: none of them is to blame (3).
 * 2. One by one: that without which least of the amplitude is left, if that is less than half.
 * 3. `gains` where half of the gains, a quarter or an eighth leave less than half of it, with what else would end it;
 *    else `unknown`.
 *
 * @param amplitude on the steady road with everything in place [m/s]
 * @param before cause found on another stretch of the same run, tried first; null: none
 */
export function causeOfCycle(
  { plan, period }: SteadyReplay,
  amplitude: number,
  before: CycleCause | null,
): CycleFinding {
  const left = (changed: LoopPlan): Left => whatIsLeft(changed, period);
  const ends = ({ amplitude: rest }: Left): boolean => rest < HALF * amplitude;
  const found = ({ cause, words }: Suspect, rest: number): CycleFinding => ({
    cause,
    why: `Without ${words} ${leftWords(rest, amplitude)}`,
  });
  const suspects = SUSPECTS.filter(({ limitation }) => has(plan, limitation));
  const known = suspects.find(({ cause }) => cause === before);
  if (known !== undefined) {
    const rest = left(without(plan, known.limitation));
    if (ends(rest)) return found(known, rest.amplitude);
  }
  const bare = suspects.reduce((barer, { limitation }) => without(barer, limitation), plan);
  if (suspects.length > 0 && ends(left(bare))) {
    let best: { readonly suspect: Suspect; readonly rest: Left } | null = null;
    for (const suspect of suspects) {
      const rest = left(without(plan, suspect.limitation));
      if (best === null || rest.amplitude < best.rest.amplitude) best = { suspect, rest };
    }
    if (best !== null && ends(best.rest)) return found(best.suspect, best.rest.amplitude);
  }
  return gainsOrUnknown(plan, amplitude, left, ends);
}

/** Gains that are tried, as shares of the candidate's own. */
const SOFTER: readonly (readonly [number, string])[] = [
  [1 / 2, 'half'],
  [1 / 4, 'a quarter of'],
  [1 / 8, 'an eighth of'],
];

function gainsOrUnknown(
  plan: LoopPlan,
  amplitude: number,
  left: (changed: LoopPlan) => Left,
  ends: (rest: Left) => boolean,
): CycleFinding {
  const { controller } = plan;
  if (controller.kind !== 'pi') return { cause: 'unknown', why: 'A locked throttle has no gains.' };
  let why = '';
  for (const [share, words] of SOFTER) {
    const softer = { ...controller, kp: share * controller.kp, ki: share * controller.ki };
    const rest = left({ ...plan, controller: softer });
    why = `With ${words} the gains ${leftWords(rest.amplitude, amplitude)}`;
    if (ends(rest)) return { cause: 'gains', why: `${why}${lateWords(plan, left, ends)}` };
  }
  return { cause: 'unknown', why };
}

/** What beside lower gains would end it. */
function lateWords(plan: LoopPlan, left: (changed: LoopPlan) => Left, ends: (rest: Left) => boolean): string {
  for (const [limitation, words] of LATENESS) {
    if (!has(plan, limitation)) continue;
    const rest = left(without(plan, limitation));
    if (ends(rest)) return ` Without ${words}: ${inKmh(rest.amplitude)}.`;
  }
  return '';
}

const leftWords = (rest: number, amplitude: number): string =>
  Number.isFinite(rest)
    ? `${inKmh(rest)} of the amplitude of ${inKmh(amplitude)} on a steady road is left.`
    : 'the run would end on the way.';
