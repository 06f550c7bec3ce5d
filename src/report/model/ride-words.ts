import { SPEED_WINDOW } from '../../study/lay-ride.ts';
import type { LoggedRide } from '../../study/logged-ride.ts';
import { fixed, lengthText, placeText, stretchText, timeText, withUnit } from '../quantity.ts';
import type { View } from './view.ts';

/** Gaps and pauses are named one by one up to so many. */
const MOST = 8;

/** How much of the road a ride covers, how it was laid on it, and where its speed comes from. */
export function laidWords({ length }: Pick<View, 'length'>, ride: LoggedRide): string {
  const laid =
    ride.laidBy === 'position'
      ? `laid by its positions, which lie ${withUnit(fixed(ride.rmsOffset ?? 0, 1), 'm')} rms off the road`
      : 'laid by its distances, from the start of the driven road';
  const speed =
    ride.speedFrom === 'log'
      ? 'Its speed is that of the log.'
      : `Its speed is the slope of its way over time, by robust local parabolas over ±${SPEED_WINDOW} s.`;
  return `It covers ${lengthText(ride.covered)} of ${lengthText(length)}, ${laid}. ${speed}`;
}

/** Where it stood or turned back; empty where it did not. */
export function pauseWords({ pauses }: LoggedRide): string {
  if (pauses.length === 0) return '';
  const listed = pauses.slice(0, MOST).map(({ at, duration, reason }) => {
    const what = reason === 'stood' ? 'stood' : 'went back and came again';
    return `${what} at ${placeText(at)} for ${timeText(duration)}`;
  });
  return ` Left out of its time: ${listOf(listed, pauses.length)}.`;
}

/** What it does not cover; empty where it covers all. */
export function gapWords({ gaps }: LoggedRide): string {
  if (gaps.length === 0) return '';
  const listed = gaps.slice(0, MOST).map(({ from, to, reason }) => `${stretchText(from, to)} (${reason})`);
  return ` Not covered: ${listOf(listed, gaps.length)}.`;
}

const listOf = (listed: readonly string[], count: number): string =>
  `${listed.join('; ')}${count > listed.length ? `; and ${count - listed.length} more` : ''}`;
