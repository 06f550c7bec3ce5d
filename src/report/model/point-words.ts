import { USUAL_GAIN_MARGIN, USUAL_PHASE_MARGIN } from '../../control/loop-stability.ts';
import type { CandidateLoop, LoopSheet } from '../../study/loop-sheet.ts';
import type { NotHeld, OperatingPoint, PointMargins } from '../../study/operating-point.ts';
import { toDeg } from '../../units/convert.ts';
import { fixed, gradeText, type SpeedUnit, significant, speedText, withUnit } from '../quantity.ts';
import { gearName, hasGears } from './gear-words.ts';

/** Usual in practice: 1.2 to 2 (Astrom and Hagglund, Advanced PID Control, 2006, from memory). */
export const USUAL_SENSITIVITY = 2;
/** Below these a grade and a wind are not worth a word. */
const LEVEL = 0.005;
const CALM = 0.5;

type Place = Pick<OperatingPoint, 'speed' | 'gear' | 'surroundings' | 'load' | 'vehicle'>;

/** Where a point is: `gear 2, 35 km/h, +6.2 %, 3 m/s headwind, two up`. */
export function placeOfPoint(point: Place, speed: SpeedUnit): string {
  const { grade, headwind } = point.surroundings;
  return [
    hasGears(point.vehicle.drive) && gearName(point.gear),
    speedText(point.speed, speed, 0),
    Math.abs(grade) < LEVEL ? 'level' : gradeText(grade),
    Math.abs(headwind) >= CALM &&
      `${withUnit(fixed(Math.abs(headwind)), 'm/s')} ${headwind > 0 ? 'headwind' : 'tailwind'}`,
    point.load,
  ]
    .filter((part) => part !== false && part !== null)
    .join(', ');
}

/** The same as the beginning of a sentence: `In gear 2 at 35 km/h, on a grade of +6.2 %, with two up,`. */
export function atPoint(point: Place, speed: SpeedUnit): string {
  const { grade, headwind } = point.surroundings;
  const gear = hasGears(point.vehicle.drive) ? `In ${gearName(point.gear)} at` : 'At';
  return [
    `${gear} ${speedText(point.speed, speed, 0)}`,
    Math.abs(grade) >= LEVEL && ` on ${gradeText(grade)}`,
    Math.abs(headwind) >= CALM &&
      ` ${headwind > 0 ? 'against' : 'with'} ${withUnit(fixed(Math.abs(headwind)), 'm/s')} of wind${headwind > 0 ? '' : ' from behind'}`,
    point.load !== null && `, load ${point.load},`,
  ]
    .filter((part) => part !== false)
    .join('');
}

export const phaseText = (margin: number | null): string =>
  margin === null ? '' : Number.isFinite(margin) ? `${fixed(toDeg(margin))}°` : 'no limit';
export const factorText = (margin: number | null): string =>
  margin === null ? '' : Number.isFinite(margin) ? fixed(margin, margin < 100 ? 1 : 0) : 'no limit';
export const sensitivityText = (sensitivity: number | null): string =>
  sensitivity === null ? '' : fixed(sensitivity, 2);

/** Thinner than is usual in practice. */
export const isThin = ({ gainMargin, phaseMargin, sensitivity }: PointMargins): boolean =>
  (gainMargin ?? 0) < USUAL_GAIN_MARGIN ||
  Math.abs(phaseMargin ?? 0) < USUAL_PHASE_MARGIN ||
  (sensitivity ?? Number.POSITIVE_INFINITY) > USUAL_SENSITIVITY;

/**
 * How a candidate stands at its worst operating point: `In gear 2 at 35 km/h, load two up, the phase margin is 31 deg: the
 * least of 48 points. ...`
 */
export function worstPointWords({ points }: LoopSheet, loop: CandidateLoop, speed: SpeedUnit): string {
  const [worst] = loop.order;
  if (worst === undefined) return '';
  const at = atPoint(points[worst], speed);
  const many = points.length > 1;
  const unstable = loop.figures.filter(({ margins }) => !margins.stable).length;
  if (unstable > 0) {
    const others = unstable > 1 ? `, as at ${unstable} of ${points.length} points` : '';
    return `${at} the loop is unstable${many && unstable === 1 ? `: the only one of ${points.length} points` : others}. There it swings between its limits whatever the road does.`;
  }
  const phaseOf = (i: number): number => Math.abs(loop.figures[i].margins.phaseMargin ?? 0);
  const least = loop.order.reduce((best, i) => (phaseOf(i) < phaseOf(best) ? i : best), worst);
  const { phaseMargin, gainMargin, sensitivity } = loop.figures[worst].margins;
  const of = many ? ` of ${points.length} points` : '';
  const phase =
    phaseMargin !== null && Number.isFinite(phaseMargin)
      ? `the phase margin is ${phaseText(phaseMargin)}${many && least === worst ? `: the least${of}` : ''}`
      : 'the gain never reaches 1, so that no lag makes it oscillate';
  const gain =
    gainMargin !== null && Number.isFinite(gainMargin)
      ? `the gain may grow ${significant(gainMargin, 2)}-fold before it oscillates`
      : 'no gain makes it oscillate';
  const elsewhere =
    least === worst
      ? ''
      : ` The least phase margin, ${phaseText(loop.figures[least].margins.phaseMargin)}, is elsewhere: ${placeOfPoint(points[least], speed)}.`;
  return `${at} ${phase}; ${gain}, and the greatest sensitivity Ms is ${sensitivityText(sensitivity)}${many ? `, the largest${of}` : ''}.${elsewhere}`;
}

/** Why no steady throttle holds a speed. */
export const NOT_HELD_WORDS: Readonly<Record<NotHeld, string>> = {
  too_much_asked: 'full throttle is not enough',
  less_than_least: 'even the least throttle is too much',
  no_effect: 'the throttle has no effect',
  gear_cannot_turn: 'the gear cannot turn so slowly',
};
