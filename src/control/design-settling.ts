import { log } from '../numeric/elementary.ts';
import { bracketedRoot } from '../numeric/root.ts';
import { toPct } from '../units/convert.ts';
import { checkSpec } from '../vehicle/check-spec.ts';
import {
  type Designed,
  type DesignLoop,
  type DesignPoint,
  designLoop,
  figure,
  figureAbove,
  gainWords,
  notFeasible,
  pairDuration,
  promisedFigures,
  setSpeedStep,
  speedWords,
} from './design-point.ts';
import { type SearchResult, searchFrequency, type Trial } from './design-search.ts';
import type { Gains } from './sampled-loop.ts';

export interface SettlingDemand extends DesignPoint {
  /** Time after which the speed stays within 2 % of a small step of set speed [s]. */
  readonly settling: number;
  /** Ratio of the step, 0 or more and below 1. */
  readonly overshoot: number;
}

/** Below this overshoot nobody sees one: what is aimed at when none is asked for. */
const NO_OVERSHOOT = 1e-4;
const LARGEST_DAMPING = 30;
const LEAST_DAMPING = 0.01;
/** First step away from the guess; each next one is twice as long. */
const STRIDE = 0.01;

interface Placed {
  readonly gains: Gains;
  readonly frequency: number;
  readonly damping: number;
}

/**
 * PI gains from how a small step of set speed shall be answered. Two poles of the sampled loop, with all its lags, are placed
 * exactly; their damping is sought for the overshoot and their frequency for the settling time, both measured on the
 * response of that loop, so that neither the zero of P on the error nor the lags spoil what was asked. The first guess is
 * the loop without lags: s^2 + (b kp - a) s + b ki (K. J. Astrom, R. M. Murray, Feedback Systems, 2nd ed., section 11,
 * section number from memory).
 *
 * An overshoot of 0 is met to 0.01 %. Where the vehicle by itself is faster than asked, P comes out negative.
 *
 * @param demand operating point, controller and what is asked of it
 * @returns gains, and what the linear loop promises with them
 * @throws InputError `out-of-range`; `design-not-feasible` with the settling time that can be reached
 */
export function designSettling(demand: SettlingDemand): Designed {
  checkSpec('design', [
    { key: 'design.settling', value: demand.settling, unit: 's', least: 0, above: true },
    { key: 'design.overshoot', value: demand.overshoot, unit: '', least: 0, greatest: 0.99 },
  ]);
  const design = designLoop(demand);
  let result = place(design, demand.settling, demand.overshoot);
  if (result.status === 'found' && !result.design.exact) {
    // Where the swing after the overshoot grazes the band (at 14 % without a zero) the settling time jumps: a hair less
    // overshoot may be met on one side of the jump.
    const other = place(design, demand.settling, demand.overshoot * 0.985);
    if (other.status === 'found' && other.design.exact) result = other;
  }
  if (result.status === 'limit') throw beyondReach(demand, result.nearest);
  const { gains, frequency, damping } = result.design;
  const asked = { settling: demand.settling, overshoot: demand.overshoot };
  const promised = promisedFigures(design, gains, frequency, damping);
  const grazing = result.design.exact
    ? ''
    : `; no gains settle in just that time, because the swing after the overshoot grazes the 2 % band: with these it takes ${figure(promised.settling ?? demand.settling)} s`;
  const words =
    `Designed at ${speedWords(demand.at)} to settle within 2 % in ${figure(demand.settling)} s after a step of set speed, ` +
    `with ${figure(toPct(demand.overshoot))} % of overshoot: ${gainWords(gains)}${grazing}.`;
  return { ...gains, record: { method: 'settling_overshoot', speed: demand.at, asked, promised, words } };
}

interface Met extends Placed {
  /** The settling time is met, not jumped over. */
  readonly exact: boolean;
}

function place(design: DesignLoop, settling: number, overshoot: number): SearchResult<Met> {
  const target = Math.max(overshoot, NO_OVERSHOOT);
  const decrement = -log(target);
  let damping = decrement / Math.sqrt(Math.PI * Math.PI + decrement * decrement);
  const trial = (frequency: number): Trial<Met> | null => {
    const placed = matchOvershoot(design, frequency, damping, target);
    if (placed === null) return null;
    damping = placed.damping;
    const reached = setSpeedStep(design, placed.gains, pairDuration(frequency, damping)).settling;
    if (!(reached > 0 && reached < Number.POSITIVE_INFINITY)) return null;
    return { reached, design: { ...placed, exact: Math.abs(log(reached / settling)) < 1e-3 } };
  };
  return searchFrequency(trial, settling, 4 / (damping * settling), design.careful);
}

/** Damping at which a pair of this frequency overshoots by the target; null where no damping does. */
function matchOvershoot(design: DesignLoop, frequency: number, guess: number, target: number): Placed | null {
  const gainsAt = (damping: number): Gains => design.loop.placePair(frequency, damping);
  const excess = (damping: number): number => {
    const { overshoot } = setSpeedStep(design, gainsAt(damping), pairDuration(frequency, damping));
    return (Number.isNaN(overshoot) ? 10 : Math.min(overshoot, 10)) - target;
  };
  const first = excess(guess);
  let near = guess;
  let far = guess;
  let stride = STRIDE;
  do {
    near = far;
    far = first > 0 ? far * (1 + stride) : far / (1 + stride);
    stride *= 2;
    if (far > LARGEST_DAMPING || far < LEAST_DAMPING) return null;
  } while (excess(far) > 0 === first > 0);
  const damping = bracketedRoot(excess, near, far, 1e-8).x;
  return { gains: gainsAt(damping), frequency, damping };
}

function beyondReach(demand: SettlingDemand, nearest: Trial<Met> | null): Error {
  const asked = `${figure(demand.settling)} s with ${figure(toPct(demand.overshoot))} % of overshoot`;
  const reach =
    nearest === null
      ? 'more overshoot, a shorter sample time or less lag'
      : `${figureAbove(nearest.reached)} s with this overshoot`;
  return notFeasible('the lags of the loop do not allow this design', asked, reach);
}
