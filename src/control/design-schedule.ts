import type { GainSchedule } from './setup.ts';

/** Gain of the vehicle at a place of the schedule: m/s2 for a full throttle; null: it cannot be driven there. */
export interface PlaceGain {
  /** Index into the drive's gears. */
  readonly gear: number;
  /** Measured speed [m/s]. */
  readonly speed: number;
  readonly gain: number | null;
}

/** Factors are written with so many digits. */
const DIGITS = 4;
/** A gain that changes by less needs no schedule. */
const SAME = 0.02;

/**
 * A schedule that makes the gain of the loop the same everywhere: the factor at a place is the gain of the vehicle at the
 * place where the gains stand as they are over the gain there (gain scheduling; K. J. Astrom, B. Wittenmark, Adaptive
 * Control, 2nd ed. (1995), chapter 9, chapter number from memory). Where the vehicle cannot be driven, the factor of the
 * nearest speed in the gear stands; a gear in which it nowhere can has no row.
 *
 * @param places every speed in every gear
 * @param base gain of the vehicle where the factor is 1
 * @returns null where the gain is the same everywhere within 2 %: there is nothing to schedule
 */
export function equalGainSchedule(places: readonly PlaceGain[], base: number): GainSchedule | null {
  const speeds = [...new Set(places.map(({ speed }) => speed))].sort((a, b) => a - b);
  const gears = [...new Set(places.map(({ gear }) => gear))].sort((a, b) => a - b);
  const rows = gears.flatMap((gear) => {
    const known = places.flatMap((place) =>
      place.gear === gear && place.gain !== null ? [{ speed: place.speed, factor: base / place.gain }] : [],
    );
    if (known.length === 0) return [];
    const factors = Float64Array.from(speeds, (speed) => {
      const nearest = known.reduce((best, one) =>
        Math.abs(one.speed - speed) < Math.abs(best.speed - speed) ? one : best,
      );
      return Number(nearest.factor.toPrecision(DIGITS));
    });
    return [{ gear: gears.length > 1 ? gear : null, proportional: factors, integral: factors }];
  });
  const all = rows.flatMap(({ proportional }) => [...proportional]);
  if (all.every((factor) => Math.abs(factor - 1) < SAME)) return null;
  return { speed: Float64Array.from(speeds), rows };
}
