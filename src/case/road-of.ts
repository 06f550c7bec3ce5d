import type { Air, RoadOptions, SteadyWind } from '../road/options.ts';
import type { Profile } from '../track/track.ts';
import { fromCelsius, fromDeg, fromHpa, fromKm, fromKmh, fromPct } from '../units/convert.ts';
import type { CaseFile } from './case-schema.ts';
import type { CaseDocument } from './read-case-file.ts';
import { TERRAIN_ROUGHNESS } from './weather-schema.ts';

/**
 * What the road is made with.
 *
 * @param name of the road, for tables; the case's track name where the caller knows it
 */
export function roadOptionsOf({ file }: CaseDocument, name = ''): RoadOptions {
  const { road, track } = file;
  const stretch = (given: { from_km: number; to_km: number; reason?: string }) => ({
    from: fromKm(given.from_km),
    to: fromKm(given.to_km),
    reason: given.reason ?? 'no reason given',
  });
  return {
    name,
    grid: road.grid_m,
    elevationSource: road.elevation_source,
    smoothingWavelength: road.smoothing_wavelength_m ?? null,
    masks: road.masks.map(stretch),
    shelter: road.shelter.map((given) => ({ ...stretch(given), factor: given.factor })),
    trimEnds: 'file' in track ? track.trim_ends_m : 0,
    direction: track.direction,
    wind: windOf(file.wind),
    air: airOf(file.air),
    nominalSpeed: fromKmh(file.hold.set_speed_kmh),
  };
}

function windOf(wind: CaseFile['wind']): SteadyWind | null {
  if (wind === undefined) return null;
  return {
    speed: wind.speed_m_s,
    from: fromDeg(wind.from_deg),
    height: wind.height_m,
    terrainRoughness: 'terrain' in wind ? TERRAIN_ROUGHNESS[wind.terrain] : wind.roughness_m,
    riderHeight: wind.rider_height_m,
  };
}

function airOf(air: CaseFile['air']): Air {
  if ('density_kg_m3' in air) return { kind: 'density', density: air.density_kg_m3 };
  return {
    kind: 'standard',
    temperature: fromCelsius(air.temperature_c),
    pressure: fromHpa(air.sea_level_pressure_hpa),
  };
}

/** The written road of a case; null where the road comes from a file. */
export function profileOf({ file }: CaseDocument): Profile | null {
  const { track } = file;
  if (!('profile' in track)) return null;
  return {
    by: track.profile.some((piece) => 'for_s' in piece) ? 'time' : 'length',
    pieces: track.profile.map((piece) => ({
      extent: 'for_s' in piece ? piece.for_s : piece.length_m,
      grade: fromPct(piece.grade_pct),
      heading: piece.heading_deg === undefined ? null : fromDeg(piece.heading_deg % 360),
      headwind: piece.headwind_m_s ?? null,
    })),
    verticalCurve: track.vertical_curve_m,
    startElevation: track.start_elevation_m,
  };
}

/** Which track of the file: its name, its number from 1, or null for the only one. */
export function trackChoiceOf({ file }: CaseDocument): string | number | null {
  return 'file' in file.track ? (file.track.track ?? null) : null;
}
