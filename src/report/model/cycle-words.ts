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

/**
 * The greatest oscillation of a design, as a part of a sentence about it; where its own loop is steady, that of the
 * candidate that swings most: the reader of the one sentence must know that the vehicle can do it. Null: nothing swings.
 */
export function cycleClause({ result: { cycles }, speed }: View, design: string): string | null {
  const own = cycles.filter((cycle) => cycle.candidate === design);
  const told = own.length > 0 ? own : cycles;
  const most = told.reduce<LimitCycle | null>(
    (greatest, cycle) =>
      greatest === null || cycle.speedAmplitude > greatest.speedAmplitude ? cycle : greatest,
    null,
  );
  if (most === null) return null;
  const others = told.filter(({ candidate }) => candidate === most.candidate).length - 1;
  const more = others === 0 ? '' : ` (and ${others === 1 ? 'once' : `${others} times`} elsewhere)`;
  const subject = own.length > 0 ? 'it' : most.candidate;
  return `${subject} swings by itself on ${stretchText(most.from, most.to)}${more}: ${swingText(most, speed)}, because of ${CYCLE_CAUSES[most.cause]}`;
}
