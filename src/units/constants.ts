/** Standard acceleration of gravity [m/s2], exact by definition (CGPM 1901, ISO 80000-3). */
export const STANDARD_GRAVITY = 9.80665;
/** Specific gas constant of dry air [J/(kg K)], ISO 2533:1975. */
export const DRY_AIR_GAS_CONSTANT = 287.05287;
/** Standard atmosphere at sea level, ISO 2533:1975: pressure [Pa], temperature [K], lapse rate [K/m], density [kg/m3]. */
export const SEA_LEVEL_PRESSURE = 101325;
export const SEA_LEVEL_TEMPERATURE = 288.15;
export const TEMPERATURE_LAPSE_RATE = 0.0065;
export const SEA_LEVEL_DENSITY = 1.225;
/** WGS 84 ellipsoid: equatorial radius [m] and flattening (NIMA TR8350.2). */
export const WGS84_EQUATORIAL_RADIUS = 6378137;
export const WGS84_FLATTENING = 1 / 298.257223563;
