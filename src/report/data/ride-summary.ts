import type { RideResult } from '../../study/ride-figures.ts';
import { toKm, toKmh } from '../../units/convert.ts';
import { type Json, numbers } from './json-parts.ts';

/** A logged ride in summary.json. */
export const rideJson = (ride: RideResult): Json => ({
  name: ride.name,
  laid_by: ride.laidBy,
  speed_from: ride.speedFrom,
  rows: ride.size,
  left_out: ride.leftOut,
  ...numbers({
    covered_m: ride.covered,
    ...(ride.rmsOffset === null ? {} : { rms_offset_m: ride.rmsOffset }),
    mean_speed_kmh: toKmh(ride.meanSpeed),
    ...ride.figures,
  }),
  ...placeOf('worst_low_at_km', ride.worstLowAt),
  ...placeOf('worst_high_at_km', ride.worstHighAt),
  gaps: ride.gaps.map(({ from, to, reason }) => ({
    ...numbers({ from_km: toKm(from), to_km: toKm(to) }),
    reason,
  })),
  pauses: ride.pauses.map(({ at, duration, reason }) => ({
    ...numbers({ at_km: toKm(at), duration_s: duration }),
    reason,
  })),
  beside: ride.beside.map(({ candidate, figures, meanSpeed }) => ({
    candidate,
    ...numbers({ mean_speed_kmh: toKmh(meanSpeed), ...figures }),
  })),
});

const placeOf = (key: string, place: number | null): Record<string, Json> =>
  place === null ? { [key]: null } : numbers({ [key]: toKm(place) });
