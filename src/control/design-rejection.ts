import { loopMargins } from '../linear/margins.ts';
import { checkSpec } from '../vehicle/check-spec.ts';
import {
  type Designed,
  type DesignPoint,
  designLoop,
  figure,
  gainWords,
  notFeasible,
  promisedFigures,
  speedWords,
} from './design-point.ts';
import { type GainRegion, gainRegion } from './gain-region.ts';
import type { Gains } from './sampled-loop.ts';

export interface RejectionDemand extends DesignPoint {
  /** Greatest sensitivity Ms, above 1. */
  readonly sensitivity: number;
}

/** A golden section, and how often it is taken: the gains come to 1e-7. */
const GOLDEN = (Math.sqrt(5) - 1) / 2;
const SECTIONS = 34;
/** First look at each range of kp. */
const LOOKS = 48;
/** The peak of the sensitivity may lie between two frequencies of the grid. */
const TRIM = 0.9995;
const TRIMS = 40;

/**
 * The gains of the greatest integral gain in a region: a step of load then costs the least integral of error, which is
 * 1 / ki for a unit step at the throttle.
 *
 * @returns null where the region is empty
 */
export function greatestIntegralGain(region: GainRegion): Gains | null {
  let best: Gains = { kp: 0, ki: 0 };
  const keep = (kp: number): number => {
    const ki = region.greatestIntegral(kp);
    if (ki > best.ki) best = { kp, ki };
    return ki;
  };
  for (const { low, high } of region.ranges) {
    const stride = (high - low) / LOOKS;
    let top = low;
    for (let i = 0, most = 0; i <= LOOKS; i++) {
      const kp = i === LOOKS ? high : low + i * stride;
      const ki = keep(kp);
      if (ki > most) [most, top] = [ki, kp];
    }
    let [from, to] = [Math.max(low, top - stride), Math.min(high, top + stride)];
    for (let i = 0; i < SECTIONS; i++) {
      const [near, far] = [to - GOLDEN * (to - from), from + GOLDEN * (to - from)];
      if (keep(near) >= keep(far)) to = far;
      else from = near;
    }
  }
  return best.ki > 0 ? best : null;
}

/**
 * PI gains that take a load best: the greatest integral gain whose loop keeps a sensitivity at the operating point
 * (K. J. Astrom, H. Panagopoulos, T. Hagglund, Design of PI controllers based on non-convex optimization, Automatica 34
 * (1998) 585-601, from memory), here for the sampled loop with all its lags.
 *
 * @param demand operating point, controller and the bound
 * @returns gains, and what the linear loop promises with them
 * @throws InputError `out-of-range`; `design-not-feasible` where no gains keep the bound
 */
export function designRejection(demand: RejectionDemand): Designed {
  const { sensitivity, sample } = demand;
  checkSpec('design', [
    { key: 'design.sensitivity', value: sensitivity, unit: '', least: 1.05, greatest: 10 },
  ]);
  const design = designLoop(demand);
  const found = greatestIntegralGain(gainRegion([{ loop: design.loop, sample }], sensitivity));
  const reached = ({ kp, ki }: Gains): number =>
    loopMargins((w) => design.loop.openLoop({ kp, ki }, w), 1e-4, Math.PI / sample).sensitivity;
  const gains = found === null ? null : trimmed(found, (one) => reached(one) <= sensitivity);
  if (gains === null)
    throw notFeasible(
      'no gains keep this sensitivity at the operating point',
      `a sensitivity of ${figure(sensitivity)}`,
      'a greater one, a shorter sample time or less lag',
    );
  const { b, a } = design.model;
  const frequency = Math.sqrt(b * gains.ki);
  const damping = Math.max(0.1, (b * gains.kp - a) / (2 * frequency));
  const { damping: _, frequency: __, ...promised } = promisedFigures(design, gains, frequency, damping);
  const words =
    `Designed at ${speedWords(demand.at)} to take a load best, with the greatest sensitivity at no more than ` +
    `${figure(sensitivity)}: ${gainWords(gains)}.`;
  return {
    ...gains,
    record: { method: 'load_rejection', speed: demand.at, asked: { sensitivity }, promised, words },
  };
}

/** Gains taken back by hairs until they keep what a finer look asks; null where they never do. */
export function trimmed(gains: Gains, keeps: (gains: Gains) => boolean): Gains | null {
  let { kp, ki } = gains;
  for (let i = 0; i <= TRIMS; i++) {
    if (keeps({ kp, ki })) return { kp, ki };
    // P is kept where it can be: it damps what the integral stirs.
    ki *= TRIM;
    if (i % 2 === 1) kp *= TRIM;
  }
  return null;
}
