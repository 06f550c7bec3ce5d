import type { MaskedStretch } from './road.ts';

/** Where the elevations of a track come from: it sets how far they are smoothed and what grade uncertainty they carry. */
export type ElevationSource = 'exact' | 'lidar' | 'barometric' | 'gnss' | 'dem30' | 'dem90';

/** A stretch on which trees, walls or cuttings keep part of the wind away. Horizontal distances along the file's own track [m]. */
export interface ShelteredStretch {
  readonly from: number;
  readonly to: number;
  /** 0 .. 1, multiplies the wind: open country 1, hedges about 0.7, forest or town 0.3 to 0.5. */
  readonly factor: number;
  readonly reason: string;
}

/** A steady wind, the same along the whole road. */
export interface SteadyWind {
  /** At `height` [m/s], >= 0. */
  readonly speed: number;
  /** Direction it blows from, clockwise from true north [rad]. */
  readonly from: number;
  /** Height above ground of `speed` [m]. */
  readonly height: number;
  /** Roughness length z0 of the terrain [m]. */
  readonly terrainRoughness: number;
  /** Height above ground at which the rider meets the wind [m]. */
  readonly riderHeight: number;
}

export type Air =
  /** The standard atmosphere above these values at sea level: temperature [K], pressure [Pa]. */
  | { readonly kind: 'standard'; readonly temperature: number; readonly pressure: number }
  /** The same density everywhere [kg/m3]. */
  | { readonly kind: 'density'; readonly density: number };

/** What both roads need to know of the weather and of the tables to make. */
export interface ProfileOptions {
  readonly name: string;
  /** Spacing of the knots [m]. */
  readonly grid: number;
  readonly wind: SteadyWind | null;
  readonly air: Air;
  readonly shelter: readonly ShelteredStretch[];
  /** Without effect on a written road, which says so. */
  readonly masks?: readonly MaskedStretch[];
  /** Set speed at the start [m/s], > 0: distance over time of a profile by time. Tracks do not use it. */
  readonly nominalSpeed: number;
  readonly direction: 'there' | 'back' | 'both';
}

export interface RoadOptions extends ProfileOptions {
  readonly elevationSource: ElevationSource;
  /** Wavelength at which the smoother's gain is one half [m]; null: the default of the source. */
  readonly smoothingWavelength: number | null;
  /** Bridges and tunnels; places are horizontal distances along the file's own track [m]. */
  readonly masks: readonly MaskedStretch[];
  /** Cut from both ends of the file's track [m], before anything else is computed. */
  readonly trimEnds: number;
}
