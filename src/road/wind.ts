import { cos, log, sin } from '../numeric/elementary.ts';
import { InputError } from '../problems/input-error.ts';
import type { ShelteredStretch, SteadyWind } from './options.ts';

/** Wind met along a road [m/s]: headwind positive against travel, crosswind positive from the right. */
export interface WindAlong {
  readonly headwind: Float64Array;
  readonly crosswind: Float64Array;
}

/**
 * Ratio of the wind at rider height to the wind at its given height, by the logarithmic profile
 * U(z) = U(z_r) ln(z / z0) / ln(z_r / z0) (Jia, Sill and Reinhold, J. Wind Eng. Ind. Aerodyn. 73 (1998), eq. 1, without
 * displacement). Heights and roughness z0 [m]; 0 for a rider below the roughness.
 */
export function windRatio(wind: Pick<SteadyWind, 'height' | 'riderHeight' | 'terrainRoughness'>): number {
  const { height, riderHeight, terrainRoughness } = wind;
  if (riderHeight <= terrainRoughness) return 0;
  return log(riderHeight / terrainRoughness) / log(height / terrainRoughness);
}

/**
 * The wind that meets a vehicle at each knot: the file's own headwind where it has one (`column`; no crosswind then),
 * else the steady wind at rider height, w = W cos(from - psi) and c = W sin(from - psi); either times the shelter's factor.
 *
 * @param heading [rad]; null: unknown
 * @throws InputError `wind-needs-heading` for a wind with nothing that says which way the road goes
 */
export function windMet(
  distance: Float64Array,
  heading: Float64Array | null,
  column: Float64Array | null,
  wind: SteadyWind | null,
  shelter: readonly ShelteredStretch[],
): WindAlong {
  const open = distance.map((x) =>
    shelter.reduce(
      (factor, part) => (x >= part.from && x <= part.to ? Math.min(factor, part.factor) : factor),
      1,
    ),
  );
  if (column !== null)
    return { headwind: column.map((w, i) => w * open[i]!), crosswind: new Float64Array(distance.length) };
  if (wind === null || wind.speed === 0)
    return { headwind: new Float64Array(distance.length), crosswind: new Float64Array(distance.length) };
  if (heading === null)
    throw new InputError({
      code: 'wind-needs-heading',
      place: { key: 'wind' },
      message: 'there is a wind, but nothing says which way the road goes',
      allowed: 'positions, a heading_deg column, or headwind_m_s in place of the wind',
    });
  const speed = wind.speed * windRatio(wind);
  return {
    headwind: heading.map((psi, i) => speed * open[i]! * cos(wind.from - psi)),
    crosswind: heading.map((psi, i) => speed * open[i]! * sin(wind.from - psi)),
  };
}
