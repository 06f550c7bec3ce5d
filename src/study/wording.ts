import { toKm, toKmh, toKw, toPct } from '../units/convert.ts';

/** Numbers in sentences: fixed decimals, a proper minus sign, the unit after a space. */
const fixed = (x: number, decimals: number): string => {
  const text = Math.abs(x).toFixed(decimals);
  return x < 0 && Number(text) !== 0 ? `\u2212${text}` : text;
};

export const inKmh = (speed: number, decimals = 1): string => `${fixed(toKmh(speed), decimals)} km/h`;
/** A place along the way. */
export const atKm = (distance: number): string => `km ${fixed(toKm(distance), 2)}`;
export const inPct = (ratio: number, decimals = 0): string => `${fixed(toPct(ratio), decimals)} %`;
/** To a tenth below 10 s, whole above. */
export const inSeconds = (time: number): string => `${fixed(time, Math.abs(time) < 9.95 ? 1 : 0)} s`;
export const inNewton = (force: number): string => `${fixed(force, 0)} N`;
export const inKw = (power: number): string => `${fixed(toKw(power), 1)} kW`;
export const inKg = (mass: number): string => `${fixed(mass, 0)} kg`;
/** A number with a unit of its own; decimals by size. */
export const withUnit = (x: number, unit: string): string => {
  const size = Math.abs(x);
  if (unit === 'shifts' || unit === 'events') return `${fixed(x, 0)} ${x === 1 ? unit.slice(0, -1) : unit}`;
  const decimals = size >= 100 ? 0 : size >= 0.005 || size === 0 ? (size >= 20 ? 1 : 2) : -1;
  const text = decimals < 0 ? x.toExponential(1) : fixed(x, decimals);
  return unit === '1' ? text : `${text} ${unit}`;
};

/** A gear as riders say it: index 4 is `5th`. */
export const gearName = (gear: number): string => `${gear + 1}${['st', 'nd', 'rd'][gear] ?? 'th'} gear`;

/** Share of a range in words (see Demand.share). */
export const demandWords = (share: number): string =>
  share >= 0 ? `${inPct(share)} of the full force` : `${inPct(-share)} of what the least throttle holds back`;
