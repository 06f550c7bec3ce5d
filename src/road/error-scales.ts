import { exp } from '../numeric/elementary.ts';
import { intervalOf } from '../numeric/interpolate.ts';
import { SOURCE_CLASSES } from './elevation-source.ts';
import type { Road } from './road.ts';

/** Lengths of the Gaussians under whose derivatives the grade errors of a road are spread [m], and the long one's share of their variance. */
export interface ErrorScales {
  readonly short: number;
  readonly long: number;
  readonly longShare: number;
}

/**
 * How far along the road the grade's errors hang together. The slope of a height error with the kernel exp(-u^2 / 2),
 * u = x / a, has sqrt(2) a times its own s.d. as the height's s.d. The short length a = wavelength / (2 pi) puts the
 * errors' spectrum at the smoothing wavelength; since the source's height error is larger than that alone would give,
 * a second, longer part carries the rest. Null for a road without smoothing, which has no grade error.
 */
export function errorScales(road: Road): ErrorScales | null {
  if (road.smoothing === null) return null;
  const { source, wavelength } = road.smoothing;
  const own = Object.entries(SOURCE_CLASSES).find(([name]) => name === source)?.[1];
  const short = Math.max(wavelength / (2 * Math.PI), road.grid);
  if (own === undefined) return { short, long: 3 * short, longShare: 0 };
  const asked = own.heightSd / (Math.SQRT2 * own.gradeSd);
  const long = Math.max(3 * short, 1.5 * asked);
  const longShare = Math.max(0, (asked * asked - short * short) / (long * long - short * short));
  return { short, long, longShare };
}

/**
 * One s.d. of the mean grade between two places: less than that of a single knot, because a long climb between two
 * points of bounded height error is known better than its details. Same error model as `perturbRoad`: for a part of length
 * a over a stretch d the variance of the mean is 4 a^2 (1 - exp(-d^2 / (4 a^2))) / d^2 times that of a knot.
 *
 * @param from horizontal distance [m], < `to`
 * @returns 0 for a road without smoothing
 */
export function meanGradeSd(road: Road, from: number, to: number): number {
  const scales = errorScales(road);
  if (scales === null) return 0;
  const first = intervalOf(road.distance, from);
  const last = Math.max(first, intervalOf(road.distance, to));
  let sum = 0;
  for (let i = first; i <= last; i++) sum += road.gradeSd[i]! * road.gradeSd[i]!;
  const knot = sum / (last - first + 1);
  const share = (length: number): number => {
    const ratio = (to - from) / (2 * length);
    return ratio < 1e-6 ? 1 : (1 - exp(-ratio * ratio)) / (ratio * ratio);
  };
  return Math.sqrt(
    knot * ((1 - scales.longShare) * share(scales.short) + scales.longShare * share(scales.long)),
  );
}
