import { exp, log } from '../numeric/elementary.ts';
import { bracketedRoot } from '../numeric/root.ts';

/** A trial of a design at one frequency of the loop: what it reaches and with which gains. */
export interface Trial<T> {
  readonly reached: number;
  readonly design: T;
}

export type SearchResult<T> =
  | { readonly status: 'found'; readonly design: T }
  /** The demand lies beyond what any trial reached; null: no trial was possible. */
  | { readonly status: 'limit'; readonly nearest: Trial<T> | null };

/** All of these in the logarithm of frequency or figure. */
const TOLERANCE = 1e-6;
/** A figure that is missed by more at the root jumps there. */
const JUMP = 1e-3;
const LEAST_STRIDE = 1e-3;
const CAREFUL_STRIDE = 0.06;
const LARGEST_STRIDE = 0.8;
/** A settling time may rise by half a period on the way down; past this ratio it is on its way up. */
const RISE = 1.3;
const STEPS = 150;
const REFINEMENTS = 25;

/**
 * Frequency of the loop [rad/s] at which a figure that falls about as 1 / frequency, as long as the lags do not matter, takes
 * its demanded value (settling time, droop). Steps in the logarithm lead from a first guess to a change of sign, which
 * Brent's method refines; where the lags matter the steps are small, and the search ends where the figure begins to rise again
 * or no gains are left.
 *
 * @param trial what a frequency reaches; null: nothing
 * @param demanded value of the figure, > 0
 * @param guess [rad/s]
 * @param careful frequency above which lags matter [rad/s]; the search starts no higher
 */
export function searchFrequency<T>(
  trial: (frequency: number) => Trial<T> | null,
  demanded: number,
  guess: number,
  careful: number,
): SearchResult<T> {
  const at = (x: number): Trial<T> | null => trial(exp(x));
  const miss = (made: Trial<T>): number => log(made.reached / demanded);
  const caution = log(careful);
  let x = Math.min(log(guess), caution);
  let made = at(x);
  for (let i = 0; made === null && i < STEPS; i++) {
    x -= CAREFUL_STRIDE;
    made = at(x);
  }
  if (made === null) return { status: 'limit', nearest: null };
  let nearest = made;
  let nearestX = x;
  for (let i = 0; i < STEPS; i++) {
    const gap = miss(made);
    if (Math.abs(gap) < TOLERANCE) return { status: 'found', design: made.design };
    const most = gap > 0 && x > caution - LARGEST_STRIDE ? CAREFUL_STRIDE : LARGEST_STRIDE;
    const stride = Math.min(Math.max(1.1 * Math.abs(gap), LEAST_STRIDE), most);
    const nextX = x + (gap > 0 ? stride : -stride);
    const next = at(nextX);
    if (next !== null && miss(next) > 0 !== gap > 0) return refine(at, miss, x, nextX);
    if (next === null || (gap > 0 && next.reached > RISE * nearest.reached))
      return best(at, miss, nearestX - CAREFUL_STRIDE, nextX, nearest);
    x = nextX;
    made = next;
    if (gap < 0 || made.reached < nearest.reached) {
      nearest = made;
      nearestX = x;
    }
  }
  return { status: 'limit', nearest };
}

/** Between two frequencies where the figure lies on both sides of the demand. */
function refine<T>(
  at: (x: number) => Trial<T> | null,
  miss: (made: Trial<T>) => number,
  from: number,
  to: number,
): SearchResult<T> {
  const root = bracketedRoot(
    (x) => {
      const made = at(x);
      return made === null ? Number.NaN : miss(made);
    },
    from,
    to,
    TOLERANCE,
  );
  const there = at(root.x);
  // On the faster side of a jump the demand is met, on the slower it is not.
  const made = there !== null && miss(there) > JUMP ? at(root.x + 4 * TOLERANCE) : there;
  return made === null ? { status: 'limit', nearest: null } : { status: 'found', design: made.design };
}

/**
 * The least figure between two frequencies, found by taking thirds away; what cannot be tried counts as large. Ends as soon
 * as the demand is met on the way.
 */
function best<T>(
  at: (x: number) => Trial<T> | null,
  miss: (made: Trial<T>) => number,
  from: number,
  to: number,
  known: Trial<T>,
): SearchResult<T> {
  let low = from;
  let high = to;
  let nearest = known;
  for (let i = 0; i < REFINEMENTS; i++) {
    const x1 = low + (high - low) / 3;
    const x2 = high - (high - low) / 3;
    const first = at(x1);
    const second = at(x2);
    for (const [x, made] of [
      [x1, first],
      [x2, second],
    ] as const) {
      if (made === null) continue;
      if (miss(made) <= 0) return refine(at, miss, from, x);
      if (made.reached < nearest.reached) nearest = made;
    }
    if (first !== null && (second === null || first.reached <= second.reached)) high = x2;
    else if (first === null) high = x1;
    else low = x1;
  }
  return { status: 'limit', nearest };
}
