/** Exact conversion factors: each number crosses a boundary once in and once out, by one of these. */

/** [km/h] -> [m/s] */
export const fromKmh = (kmh: number): number => kmh / 3.6;
/** [m/s] -> [km/h] */
export const toKmh = (speed: number): number => speed * 3.6;
/** [m/s] -> [mph]: the international mile, 1609.344 m exactly */
export const toMph = (speed: number): number => speed / 0.44704;
/** [%] -> ratio */
export const fromPct = (pct: number): number => pct / 100;
/** ratio -> [%] */
export const toPct = (ratio: number): number => ratio * 100;
/** [degree] -> [rad] */
export const fromDeg = (deg: number): number => (deg * Math.PI) / 180;
/** [rad] -> [degree] */
export const toDeg = (angle: number): number => (angle * 180) / Math.PI;
/** [km] -> [m] */
export const fromKm = (km: number): number => km * 1000;
/** [m] -> [km] */
export const toKm = (distance: number): number => distance / 1000;
/** [kW] -> [W] */
export const fromKw = (kw: number): number => kw * 1000;
/** [W] -> [kW] */
export const toKw = (power: number): number => power / 1000;
/** [J] -> [Wh] */
export const toWh = (energy: number): number => energy / 3600;
/** [degree Celsius] -> [K] */
export const fromCelsius = (celsius: number): number => celsius + 273.15;
/** [hPa] -> [Pa] */
export const fromHpa = (hpa: number): number => hpa * 100;
/** [% per km/h] -> [1/(m/s)]: a gain, or with another 1/s an integral gain. */
export const fromPctPerKmh = (pctPerKmh: number): number => toKmh(fromPct(pctPerKmh));
/** [N per km/h] -> [N/(m/s)] */
export const fromNPerKmh = (slope: number): number => toKmh(slope);
/** [N per (km/h)2] -> [N/(m/s)2] */
export const fromNPerKmh2 = (curve: number): number => toKmh(toKmh(curve));
