/** A number that is not finite was about to be written to a file: a numerical failure of the program, never data. */
export class NotFiniteError extends Error {
  constructor(what: string, value: number) {
    super(`${what} is ${value}; nothing was written`);
    this.name = 'NotFiniteError';
  }
}

/**
 * Decimal text of a number with a fixed count of decimals, with an ASCII minus and never `-0.00`.
 * The same on every engine: the rounding of `toFixed` is defined exactly by ECMA-262.
 *
 * @param value finite
 * @param decimals 0 to 20
 * @param what name of the number, for the message
 * @throws NotFiniteError for NaN and the infinities
 */
export function fixed(value: number, decimals: number, what = 'a number'): string {
  if (!Number.isFinite(value)) throw new NotFiniteError(what, value);
  const text = value.toFixed(decimals);
  return text.startsWith('-') && Number(text) === 0 ? text.slice(1) : text;
}

/** The number that `fixed` writes: what a JSON file carries. */
export function rounded(value: number, decimals: number, what = 'a number'): number {
  return Number(fixed(value, decimals, what));
}
