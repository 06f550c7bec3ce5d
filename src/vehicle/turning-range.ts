import type { Drive } from './drive.ts';
import { forceRange } from './drive-law.ts';

/** Share of the greatest gain of throttle below which a drive gives nothing more: its limiter has it. */
const NOTHING = 1e-6;

/** Speeds of a gear at which it can turn and full throttle gives more than closed throttle [m/s]. */
export interface TurningRange {
  readonly least: number;
  readonly greatest: number;
}

/**
 * From where the gear can turn at all to where its rev limiter begins: the last corner of the drive's law before full
 * throttle falls to closed throttle. A drive without a limiter has no end: infinite.
 */
export function turningRange(drive: Drive, gear: number): TurningRange {
  const { speedEdges, gears, stallSpeed } = drive;
  const { ratio } = gears[gear]!;
  const least = drive.belt === null ? stallSpeed / ratio : 0;
  const lowest = drive.belt?.least ?? ratio;
  // The belt apart, which would move the ratio under the shaft speed that is asked for; and the fuel cut, whose step
  // stands between full and closed throttle at the limiter too.
  const shaft: Drive = {
    ...(drive.withoutFuelCut ?? drive),
    belt: null,
    gears: [{ ratio: 1, inertia: 0 }],
    gear: 0,
  };
  const gain = (shaftSpeed: number): number => {
    const range = forceRange(shaft, 0, shaftSpeed, 1);
    return range.greatest - range.least;
  };
  const gains = Array.from(speedEdges, gain);
  const middles = Array.from(speedEdges, (edge, i) => gain((edge + (speedEdges[i - 1] ?? 0)) / 2));
  const most = [...gains, ...middles].reduce((greatest, value) => Math.max(greatest, value), 0);
  const idle = (value: number): boolean => value <= NOTHING * most;
  const last = gains.findLastIndex((value, i) => idle(value) && !idle(middles[i]!));
  if (last < 0) return { least, greatest: Number.POSITIVE_INFINITY };
  // Down to nothing from a corner: a limiter, which begins there. Without one, as of a parabola, the torque itself ends.
  const begins = last > 0 && !idle(gains[last - 1]!) ? last - 1 : last;
  return { least, greatest: speedEdges[begins]! / lowest };
}
