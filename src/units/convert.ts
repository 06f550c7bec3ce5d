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
/** [1/(m/s)] -> [% per km/h] */
export const toPctPerKmh = (gain: number): number => fromKmh(toPct(gain));
/** [m/s per whole throttle] -> [km/h per %] */
export const toKmhPerPct = (gain: number): number => toKmh(fromPct(gain));
/** [N per km/h] -> [N/(m/s)] */
export const fromNPerKmh = (slope: number): number => toKmh(slope);
/** [N per (km/h)2] -> [N/(m/s)2] */
export const fromNPerKmh2 = (curve: number): number => toKmh(toKmh(curve));
/** [N/(m/s)] -> [N per km/h] */
export const toNPerKmh = (slope: number): number => fromKmh(slope);
/** [N/(m/s)2] -> [N per (km/h)2] */
export const toNPerKmh2 = (curve: number): number => fromKmh(fromKmh(curve));
/** [K] -> [degree Celsius] */
export const toCelsius = (temperature: number): number => temperature - 273.15;
/** [Pa] -> [hPa] */
export const toHpa = (pressure: number): number => pressure / 100;
/** [Hz] -> [rad/s] */
export const fromHz = (frequency: number): number => 2 * Math.PI * frequency;
/** [1 per km/h] -> [1/(m/s)] */
export const fromPerKmh = (perKmh: number): number => toKmh(perKmh);
/** [rpm] -> [rad/s] */
export const fromRpm = (rpm: number): number => (rpm * Math.PI) / 30;
/** [rad/s] -> [rpm] */
export const toRpm = (shaftSpeed: number): number => (shaftSpeed * 30) / Math.PI;
/** [Wh] -> [J] */
export const fromWh = (energy: number): number => energy * 3600;
/** [MJ/kg] -> [J/kg] */
export const fromMjPerKg = (heat: number): number => heat * 1e6;
/** [kg/l] -> [kg/m3] */
export const fromKgPerLitre = (density: number): number => density * 1000;
/** [l] -> [m3] */
export const fromLitre = (volume: number): number => volume / 1000;
/** [m3] -> [l] */
export const toLitre = (volume: number): number => volume * 1000;
/** [g/kWh] -> [kg/J] */
export const fromGPerKwh = (consumption: number): number => consumption / 3.6e9;
/** [g/h] -> [kg/s] */
export const fromGPerHour = (flow: number): number => flow / 3.6e6;
/** [bar] -> [Pa] */
export const fromBar = (bar: number): number => bar * 1e5;
/** [Pa] -> [bar] */
export const toBar = (pressure: number): number => pressure / 1e5;
/** [1/(km/h)2] -> [1/(m/s)2] */
export const fromPerKmh2 = (curve: number): number => toKmh(toKmh(curve));
