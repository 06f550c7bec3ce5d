import { InputError } from '../problems/input-error.ts';
import { parseNumber } from '../track/parse-number.ts';

/** An option that is a number. */
export interface NumberOption {
  readonly name: string;
  readonly unit: string;
  readonly least: number;
  readonly most: number;
}

/**
 * The number that an option was given; undefined where it was not.
 *
 * @throws InputError `option-value`: it is no number, or out of range
 */
export function numberOption(
  text: string | undefined,
  { name, unit, least, most }: NumberOption,
): number | undefined {
  if (text === undefined) return undefined;
  const value = parseNumber(text);
  if (value !== null && value >= least && value <= most) return value;
  throw new InputError({
    code: 'option-value',
    place: {},
    message: `--${name} cannot be '${text}'`,
    allowed: `a number from ${least} to ${most} ${unit}`,
  });
}
