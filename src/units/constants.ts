/** Standard acceleration of gravity [m/s2], exact by definition (CGPM 1901, ISO 80000-3). */
export const STANDARD_GRAVITY = 9.80665;
/** Specific gas constant of dry air [J/(kg K)], ISO 2533:1975. */
export const DRY_AIR_GAS_CONSTANT = 287.05287;
/** Standard atmosphere, ISO 2533:1975: temperature at sea level [K] and lapse rate [K/m]. */
export const SEA_LEVEL_TEMPERATURE = 288.15;
export const TEMPERATURE_LAPSE_RATE = 0.0065;
/** WGS 84 ellipsoid: equatorial radius [m] and flattening (NIMA TR8350.2). */
export const WGS84_EQUATORIAL_RADIUS = 6378137;
export const WGS84_FLATTENING = 1 / 298.257223563;
