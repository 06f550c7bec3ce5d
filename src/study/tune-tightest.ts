import {
  type DesignLoop,
  droopOf,
  pairDominates,
  pairDuration,
  setSpeedStep,
} from '../control/design-point.ts';
import { delayedLag, simcGains } from '../control/design-simc.ts';
import type { Gains } from '../control/sampled-loop.ts';
import { exp, log } from '../numeric/elementary.ts';

/** Gains keep what is asked of them at every operating point. */
export type Keeps = (gains: Gains) => boolean;

/** Steps of the search over the frequency of a pair of poles, and how far below and above that of the lags it goes. */
const STEP = 0.02;
const ABOVE = 20;
const BELOW = 1e-3;
/** Steps of the search over the time constant of a closed loop, from that of its delay up. */
const LONGEST = 400;

/**
 * The least droop on a step of grade that a pair of poles of a damping can have [m/s], with gains that keep; null: none.
 */
export function tightestDroop(
  design: DesignLoop,
  keeps: Keeps,
  gradeStep: number,
  damping: number,
): number | null {
  const pair = fastestPair(design, keeps, damping);
  if (pair === null) return null;
  return droopOf(design, pair.gains, gradeStep, pairDuration(pair.frequency, damping));
}

/**
 * The shortest settling time after a step of set speed that a pair of poles can have [s], with gains that keep; null:
 * none. The damping is that of a loop without lags and zeros that overshoots so much.
 */
export function tightestSettling(design: DesignLoop, keeps: Keeps, overshoot: number): number | null {
  const decrement = -log(Math.max(overshoot, 1e-4));
  const damping = decrement / Math.sqrt(Math.PI * Math.PI + decrement * decrement);
  const pair = fastestPair(design, keeps, damping);
  if (pair === null) return null;
  const { settling } = setSpeedStep(design, pair.gains, pairDuration(pair.frequency, damping));
  return Number.isFinite(settling) && settling > 0 ? settling : null;
}

/** The shortest time constant of a closed loop by SIMC, no shorter than the delay [s], with gains that keep; null: none. */
export function tightestClosedLoop(design: DesignLoop, keeps: Keeps): number | null {
  const model = delayedLag(design);
  for (let time = model.delay; time < LONGEST; time *= 1 + STEP)
    if (keeps(simcGains(model, time, 'simc'))) return time;
  return null;
}

function fastestPair(
  design: DesignLoop,
  keeps: Keeps,
  damping: number,
): { readonly gains: Gains; readonly frequency: number } | null {
  const lowest = log(design.careful * BELOW);
  for (let x = log(design.careful * ABOVE); x > lowest; x -= STEP) {
    const frequency = exp(x);
    const gains = design.loop.placePair(frequency, damping);
    if (!(gains.kp > 0 && gains.ki > 0) || !keeps(gains)) continue;
    if (pairDominates(design.loop.poles(gains), frequency, damping)) return { gains, frequency };
  }
  return null;
}
