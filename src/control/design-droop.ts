import { atan2, exp, log } from '../numeric/elementary.ts';
import { toKmh, toPct } from '../units/convert.ts';
import { checkSpec } from '../vehicle/check-spec.ts';
import {
  type Designed,
  type DesignPoint,
  designLoop,
  droopOf,
  figure,
  figureAbove,
  gainWords,
  gradePush,
  notFeasible,
  pairDominates,
  pairDuration,
  promisedFigures,
  speedWords,
} from './design-point.ts';
import { searchFrequency, type Trial } from './design-search.ts';
import type { Gains } from './sampled-loop.ts';

export interface DroopDemand extends DesignPoint {
  /** Greatest loss of speed after the step of grade [m/s]; greatest gain after a step downhill. */
  readonly droop: number;
  /** Step of grade, as a ratio; negative downhill. */
  readonly gradeStep: number;
  /** Damping ratio of the dominant pair of poles. */
  readonly damping: number;
}

/**
 * PI gains from the hill: a step of grade at the operating point shall cost no more than this much speed, and the loop shall
 * be damped so well. The pair of poles is placed exactly in the sampled loop with all its lags; its frequency is sought for the
 * droop. The first guess is the loop without lags, whose droop after a step of acceleration D is
 * D / w exp(-zeta phi), phi = acos(zeta) / sqrt(1 - zeta^2).
 *
 * The set-point weight plays no part in it, other than in what is promised for a step of set speed.
 *
 * @param demand operating point, controller and what is asked of it
 * @returns gains, and what the linear loop promises with them
 * @throws InputError `out-of-range`; `design-not-feasible` with the droop that can be reached
 */
export function designDroop(demand: DroopDemand): Designed {
  const { droop, gradeStep, damping } = demand;
  checkSpec('design', [
    { key: 'design.droop', value: droop, unit: 'm/s', least: 0, above: true },
    { key: 'design.gradeStep', value: Math.abs(gradeStep), unit: '', least: 0, greatest: 1, above: true },
    { key: 'design.damping', value: damping, unit: '', least: 0.05, greatest: 10 },
  ]);
  const design = designLoop(demand);
  const trial = (frequency: number): Trial<{ readonly gains: Gains; readonly frequency: number }> | null => {
    const gains = design.loop.placePair(frequency, damping);
    if (!Number.isFinite(gains.kp + gains.ki)) return null;
    if (!pairDominates(design.loop.poles(gains), frequency, damping)) return null;
    return {
      reached: droopOf(design, gains, gradeStep, pairDuration(frequency, damping)),
      design: { gains, frequency },
    };
  };
  const guess = (Math.abs(gradePush(design, gradeStep)) / droop) * exp(-damping * peakAngle(damping));
  const result = searchFrequency(trial, droop, guess, design.careful);
  if (result.status === 'limit')
    throw notFeasible(
      'the lags of the loop do not allow this design',
      `a droop of ${speedWords(droop)} with a damping of ${figure(damping)}`,
      result.nearest === null
        ? 'less damping, a shorter sample time or less lag'
        : `${figureAbove(toKmh(result.nearest.reached))} km/h with this damping`,
    );
  const { gains, frequency } = result.design;
  const words =
    `Designed at ${speedWords(demand.at)} to ${gradeStep > 0 ? 'lose' : 'gain'} ${speedWords(droop)} on a step of ${figure(toPct(gradeStep))} % of grade, ` +
    `with a damping of ${figure(damping)}: ${gainWords(gains)}.`;
  const promised = {
    ...promisedFigures(design, gains, frequency, damping),
    droop: droopOf(design, gains, gradeStep, pairDuration(frequency, damping)),
    gradeStep,
  };
  const asked = { droop, gradeStep, damping };
  return { ...gains, record: { method: 'droop', speed: demand.at, asked, promised, words } };
}

/** Frequency times time of the peak: acos(zeta) / sqrt(1 - zeta^2), acosh(zeta) / sqrt(zeta^2 - 1) above 1. */
function peakAngle(damping: number): number {
  const root = Math.sqrt(Math.abs(1 - damping * damping));
  if (root < 1e-6) return 1;
  return damping < 1 ? atan2(root, damping) / root : log(damping + root) / root;
}
