import * as z from 'zod';

/** What a field says beside its check. */
export interface FieldNotes {
  /** What is allowed, in words with the unit. */
  readonly allowed?: string;
  readonly unit?: string;
  /** Where the default comes from. */
  readonly source?: string;
  /** What a missing optional key stands for, as the list of defaults writes it. */
  readonly absent?: string;
}

/** Notes of the fields, looked up by messages, the list of defaults and the JSON Schema. */
export const fieldNotes = z.registry<FieldNotes>();

function noted<T extends z.ZodType>(field: T, notes: FieldNotes): T {
  fieldNotes.add(field as z.ZodType, notes);
  return field;
}

export const NOT_GIVEN = 'not given';
export const IDEAL = 'ideal: not given';

type Unit =
  | 's'
  | 'm'
  | 'km'
  | 'kg'
  | 'N'
  | 'kW'
  | 'km/h'
  | 'm/s'
  | 'm/s2'
  | '%'
  | '%/s'
  | '% per km/h'
  | '% per km/h s'
  | '% s per km/h'
  | 'counts per km/h'
  | 'Hz'
  | 'deg'
  | 'deg C'
  | 'hPa'
  | 'bar'
  | 'kg/m3'
  | 'm2'
  | '1/rad2'
  | 's/m'
  | 's2/m2'
  | 'N per km/h'
  | 'N per (km/h)2'
  | 'N m'
  | 'rpm'
  | 'kg m2'
  | 'W'
  | 'Wh'
  | 'V'
  | 'ohm'
  | 'MJ/kg'
  | 'kg/l'
  | 'l'
  | 'g/kWh'
  | 'g/h'
  | '';

/** A finite number in a range, ends included. */
export function number(unit: Unit, least: number, most: number, words: string) {
  const allowed = `a number from ${least} to ${most}${unit === '' ? '' : ` ${unit}`}`;
  const described = unit === '' ? words : `${words} [${unit}]`;
  return z
    .number()
    .min(least)
    .max(most)
    .meta({ description: described })
    .register(fieldNotes, { allowed, unit });
}

/** A whole number in a range, ends included. */
export function integer(least: number, most: number, words: string) {
  return z
    .int()
    .min(least)
    .max(most)
    .meta({ description: words })
    .register(fieldNotes, { allowed: `a whole number from ${least} to ${most}` });
}

/** One of some words. */
export function word<const T extends readonly [string, ...string[]]>(
  options: T,
  words: string,
  allowed: string = options.join(', '),
) {
  return z.enum(options).meta({ description: words }).register(fieldNotes, { allowed });
}

/** The word that tells a kind. */
export function kind<const T extends string>(name: T) {
  return noted(z.literal(name).meta({ description: `Kind: ${name}` }), { allowed: name });
}

/** A text of a line. */
export function line(words: string, most = 200) {
  return z
    .string()
    .min(1)
    .max(most)
    .meta({ description: words })
    .register(fieldNotes, { allowed: `a text of 1 to ${most} characters` });
}

/** A mapping with these keys and no others. */
export function mapping<T extends z.core.$ZodLooseShape>(words: string, shape: T) {
  return z.strictObject(shape).meta({ description: words });
}

/** A list. */
export function list<T extends z.ZodType>(item: T, least: number, most: number, words: string) {
  return z
    .array(item)
    .min(least)
    .max(most)
    .meta({ description: words })
    .register(fieldNotes, { allowed: `a list of ${least} to ${most}` });
}

/** The value of a key that is not given, and where it comes from; null: nobody needs to be told. */
export function otherwise<T extends z.ZodType>(
  field: T,
  value: z.output<T> & z.util.NoUndefined<z.output<T>>,
  source: string | null,
) {
  return source === null ? field.default(value) : noted(field.default(value), { source });
}

/** A block whose keys all have defaults: left out, it is its defaults. */
export function block<T extends z.ZodType>(field: T) {
  return field.prefault({} as z.input<T>);
}

/** A key that may be missing. With `absent`, what that means is listed among the defaults, with its source. */
export function optional<T extends z.ZodType>(
  field: T,
  absent?: string,
  source = NOT_GIVEN,
): z.ZodExactOptional<T> {
  return absent === undefined ? field.exactOptional() : noted(field.exactOptional(), { absent, source });
}

/** Fields that several kinds of drive have. */
export const driveLag = otherwise(number('s', 0, 20, 'First-order lag from throttle to force'), 0, IDEAL);
export const altitudeDerate = otherwise(
  word(['none', 'naturally_aspirated'], 'Loss of full-throttle force with air density'),
  'none',
  'not given: full-throttle force is the same at every altitude',
);

export const kmh = (words: string) => number('km/h', 1, 300, words);
export const km = (words: string) => number('km', 0, 5000, words);
export const fileName = line('File name, seen from the folder of this file', 1000);
