import type { LoopPlan } from '../loop/plan.ts';
import { runLoop } from '../loop/run-loop.ts';
import { fromKm } from '../units/convert.ts';
import type { Remedy } from './findings.ts';
import type { HillFacts } from './hill-facts.ts';
import { type HillWindow, holds, passHill } from './hill-window.ts';
import { withGear, withShift } from './levers.ts';
import { atKm, gearName, inKmh } from './wording.ts';

/** Places at which the rider may be told to change down [m]. */
const PLACES = fromKm(0.1);

/**
 * A lower gear: the nearest that holds all over the window, from the one below the gear in force on the hill. On a
 * clutch gearbox the rider must change down, which cancels hold; where is found by replay too: the latest whole 0.1 km
 * before the hill from which the run, the shift with its open clutch and its resuming included, is back in its band
 * when the hill begins and stays there.
 *
 * @param windowed the candidate's plan over the window
 * @returns null for a drive that has only one gear by its kind; `{none}` where the gearbox or the belt chooses by itself,
 * and where no lower gear holds
 */
export function gearRemedy(
  windowed: LoopPlan,
  hill: HillFacts,
  window: HillWindow,
  band: number,
): Remedy | null {
  const { drive } = windowed.vehicle;
  if (drive.belt !== null) return none('A belt has no gears to change.');
  if (drive.gears.length < 2) return null;
  if (drive.gearbox.kind === 'automatic') return none('The gearbox chooses its gear by itself.');
  const engaged = hill.gears?.engaged ?? drive.gear;
  // The candidate's own shifts are none of the plans that are tried.
  const judged = { ...window, course: { ...window.course, settling: window.course.following } };
  const passes = (plan: LoopPlan): boolean =>
    holds(passHill({ ...plan, scheme: 'fast' }, judged), band) &&
    (plan.scheme === 'fast' || holds(passHill(plan, judged), band));
  let gear = engaged - 1;
  while (gear >= 0 && !passes(withGear(windowed, gear))) gear--;
  if (gear < 0) return none(engaged > 0 ? 'No lower gear holds either.' : 'There is no lower gear.');
  const found = { lever: 'gear', holds: gear + 1, fails: gear + 2 } as const;
  const fails = `in ${gearName(gear + 1)} it does not`;
  if (drive.gearbox.kind === 'fixed')
    return { ...found, at: null, words: `In ${gearName(gear)} it holds; ${fails}.` };
  const at = latestShift(windowed, gear, judged, passes);
  if (at === null)
    return {
      ...found,
      at: null,
      words: `In ${gearName(gear)} it holds, but from no place up to ${atKm(window.start)} back does the rider's shift leave time to be in the band when the hill begins; ${fails}.`,
    };
  return {
    ...found,
    at,
    words: `The rider changes down to ${gearName(gear)} at ${atKm(at)} (hold is cancelled and must be resumed)${dipWords(withShift(windowed, at - window.start, gear), at - window.start, band)}; ${fails}.`,
  };
}

/** Latest whole 0.1 km before the hill from which a shift passes [m]; null: none in the window. */
function latestShift(
  windowed: LoopPlan,
  gear: number,
  window: HillWindow,
  passes: (plan: LoopPlan) => boolean,
): number | null {
  for (let k = Math.floor(window.from / PLACES); k * PLACES > window.start; k--)
    if (passes(withShift(windowed, k * PLACES - window.start, gear))) return k * PLACES;
  return null;
}

/** What the shift itself costs, where that leaves the band. */
function dipWords(plan: LoopPlan, at: number, band: number): string {
  const { bins } = runLoop(plan);
  let low = 0;
  for (let i = 0; i < bins.size; i++) if (bins.edge[i + 1] > at) low = Math.min(low, bins.errorMin[i]);
  return -low > band ? `; the shift itself lets the speed fall ${inKmh(-low)} below the set speed` : '';
}

const none = (words: string): Remedy => ({
  lever: 'gear',
  holds: { none: words },
  fails: { none: words },
  at: null,
  words,
});
