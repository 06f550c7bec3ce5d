import { cellOf } from '../numeric/interpolate.ts';
import type { Belt } from './drive.ts';

/** Shaft speed of the belt's line at a throttle, and its slope; from the upper side at a corner. */
function lineAt(belt: Belt, throttle: number): { readonly speed: number; readonly slope: number } {
  const { throttle: x, shaftSpeed: w } = belt;
  const last = x.length - 1;
  if (throttle < x[0]!) return { speed: w[0]!, slope: 0 };
  if (throttle >= x[last]!) return { speed: w[last]!, slope: 0 };
  const i = cellOf(x, throttle);
  const slope = (w[i + 1]! - w[i]!) / (x[i + 1]! - x[i]!);
  return { speed: w[i]! + slope * (throttle - x[i]!), slope };
}

/**
 * Ratio at which a belt comes to rest: clamp(line(x) / v, least, greatest). At standstill it is the greatest.
 *
 * @param belt of the drive
 * @param speed of the wheel [m/s], >= 0
 * @param throttle any value; the line holds on beyond its ends
 * @returns shaft speed over wheel speed [1/m]
 */
export function beltRatio(belt: Belt, speed: number, throttle: number): number {
  const { speed: line } = lineAt(belt, throttle);
  if (line >= belt.greatest * speed) return belt.greatest;
  if (line <= belt.least * speed) return belt.least;
  return line / speed;
}

/** Derivatives of the ratio at rest by speed [1/m/(m/s)] and by throttle [1/m]; 0 at a limit of the ratio, limits included. */
export function beltRatioSlopes(
  belt: Belt,
  speed: number,
  throttle: number,
): { readonly bySpeed: number; readonly byThrottle: number } {
  const { speed: line, slope } = lineAt(belt, throttle);
  if (line >= belt.greatest * speed || line <= belt.least * speed) return { bySpeed: 0, byThrottle: 0 };
  return { bySpeed: -line / (speed * speed), byThrottle: slope / speed };
}
