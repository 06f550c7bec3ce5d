import type { CycleCause, LimitCycle } from '../../study/findings.ts';
import { fixed, type SpeedUnit, significant, stretchText, timeText, withUnit } from '../quantity.ts';
import type { View } from './view.ts';

/** What keeps an oscillation going, as the end of `because of ...`. */
export const CYCLE_CAUSES: Readonly<Record<CycleCause, string>> = {
  slack: 'slack in the throttle',
  fuel_cut: 'the step of the fuel cut',
  pulse_counting: 'the steps of the counted speed',
  resolution: 'the steps of the throttle command',
  shifting: 'gears that hunt',
  gains: 'gains too high for its delays',
  unknown: 'a cause that was not found',
};

/** `±0.4 km/h every 2.8 s`. */
export const swingText = ({ speedAmplitude, period }: LimitCycle, speed: SpeedUnit): string =>
  `±${amplitudeText(speedAmplitude, speed)} every ${periodText(period)}`;

/** Amplitude [m/s]: two significant digits, because it may be small beside the band. */
export const amplitudeText = (amplitude: number, speed: SpeedUnit): string =>
  withUnit(significant(speed.of(amplitude), 2), speed.name);

export const periodText = (period: number): string =>
  period < 9.95 ? withUnit(fixed(period, 1), 's') : timeText(period);

/** The greatest oscillation of a candidate, as a part of a sentence about it; null: its loop is steady. */
export function cycleClause({ result: { cycles }, speed }: View, candidate: string): string | null {
  const own = cycles.filter((cycle) => cycle.candidate === candidate);
  const [first, ...others] = own.toSorted((a, b) => b.speedAmplitude - a.speedAmplitude);
  if (first === undefined) return null;
  const more =
    others.length === 0 ? '' : ` (and ${others.length === 1 ? 'once' : `${others.length} times`} elsewhere)`;
  return `it swings by itself on ${stretchText(first.from, first.to)}${more}: ${swingText(first, speed)}, because of ${CYCLE_CAUSES[first.cause]}`;
}
