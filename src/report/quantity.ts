import { toKm, toKmh, toKw, toMph, toPct, toWh } from '../units/convert.ts';

/** True minus sign, and a no-break space between a number and its unit: what people read, never what files carry. */
const MINUS = '\u2212';
const GAP = '\u00a0';
/** Thin no-break space between groups of three digits (SI Brochure, 5.4.4). */
const GROUP = '\u202f';
export const NO_VALUE = '\u2013';

/** Number in fixed notation for people: true minus, no minus before zero, groups of three from 10 000 on. */
export function fixed(value: number, digits = 0): string {
  if (!Number.isFinite(value)) return NO_VALUE;
  const text = Math.abs(value).toFixed(digits);
  const [whole, rest] = text.split('.') as [string, string | undefined];
  const grouped = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, GROUP) : whole;
  const negative = value < 0 && /[1-9]/.test(text);
  return `${negative ? MINUS : ''}${grouped}${rest === undefined ? '' : `.${rest}`}`;
}

/** As `fixed`, with a plus before what is above zero: for errors, changes and grades. */
export function signed(value: number, digits = 0): string {
  const text = fixed(value, digits);
  return value > 0 && /[1-9]/.test(text) ? `+${text}` : text;
}

/** As `fixed`, with up to three digits more where fewer would make it look equal to another number. */
export function fixedApart(value: number, others: readonly number[], digits = 0): string {
  const alike = (n: number) => others.some((other) => other !== value && fixed(other, n) === fixed(value, n));
  let n = digits;
  while (n < digits + 3 && alike(n)) n++;
  return fixed(value, n);
}

/** Digits after the point that leave `figures` significant digits, at most 6. */
export function digitsFor(value: number, figures: number): number {
  let size = Math.abs(value);
  if (!Number.isFinite(size) || size === 0) return 0;
  let digits = figures;
  for (; size >= 1 && digits > 0; size /= 10) digits--;
  for (; size < 0.1 && digits < 6; size *= 10) digits++;
  return Math.min(digits, 6);
}

/** Number with so many significant digits. */
export const significant = (value: number, figures = 3): string => fixed(value, digitsFor(value, figures));

export const withUnit = (text: string, unit: string): string =>
  unit === '' ? text : unit === '%' ? `${text}${GAP}%` : `${text}${GAP}${unit}`;

export type Units = 'kmh' | 'mph';

/** The unit in which people read speeds. Distances, forces and energies are metric in both. */
export interface SpeedUnit {
  readonly name: 'km/h' | 'mph';
  /** As it stands in an axis label after the solidus: `speed / (km/h)`. */
  readonly axis: string;
  /** [m/s] -> this unit */
  readonly of: (speed: number) => number;
}

export const SPEED_UNITS: Readonly<Record<Units, SpeedUnit>> = {
  kmh: { name: 'km/h', axis: '(km/h)', of: toKmh },
  mph: { name: 'mph', axis: 'mph', of: toMph },
};

/** Speed [m/s] with its unit; a tenth is as fine as any record supports. */
export const speedText = (speed: number, unit: SpeedUnit, digits = 1): string =>
  withUnit(fixed(unit.of(speed), digits), unit.name);

/** Error or change of speed [m/s], signed, with its unit. */
export const changeText = (change: number, unit: SpeedUnit, digits = 1): string =>
  withUnit(signed(unit.of(change), digits), unit.name);

/** Half-width of a band [m/s]: `±2 km/h`. */
export const bandText = (band: number, unit: SpeedUnit): string =>
  withUnit(`±${trimmed(unit.of(band), 1)}`, unit.name);

/** Fixed, without zeros after the point that say nothing: 2, 2.5. */
export function trimmed(value: number, digits: number): string {
  const text = fixed(value, digits);
  return text.includes('.') ? text.replace(/\.?0+$/, '') : text;
}

/** Place along the route [m] as `km 12.34`. */
export const placeText = (distance: number): string => `km${GAP}${fixed(toKm(distance), 2)}`;
export const stretchText = (from: number, to: number): string =>
  `km${GAP}${fixed(toKm(from), 2)} to ${fixed(toKm(to), 2)}`;

/** Length [m]: metres below one kilometre. */
export const lengthText = (length: number): string =>
  length < 1000 ? withUnit(fixed(length), 'm') : withUnit(fixed(toKm(length), 1), 'km');

/** Grade (ratio) in per cent, signed. */
export const gradeText = (grade: number, digits = 1): string => withUnit(signed(toPct(grade), digits), '%');

/** Ratio in per cent. */
export const shareText = (share: number, digits = 0): string => withUnit(fixed(toPct(share), digits), '%');

/** Time [s]: seconds below two minutes, else minutes and seconds, else hours and minutes. */
export function timeText(time: number): string {
  if (!Number.isFinite(time)) return NO_VALUE;
  if (time < 9.95) return withUnit(fixed(time, 1), 's');
  if (time < 120) return withUnit(fixed(time), 's');
  const seconds = Math.round(time);
  if (seconds < 3600) return `${Math.floor(seconds / 60)}${GAP}min ${seconds % 60}${GAP}s`;
  const minutes = Math.round(seconds / 60);
  return `${Math.floor(minutes / 60)}${GAP}h ${minutes % 60}${GAP}min`;
}

/** Energy [J] in watt hours, three significant digits. */
export const energyText = (energy: number): string => withUnit(significant(toWh(energy)), 'Wh');
/** Power [W] in kilowatts. */
export const powerText = (power: number): string => withUnit(significant(toKw(power), 2), 'kW');
/** Force [N], whole. */
export const forceText = (force: number): string => withUnit(fixed(force), 'N');
