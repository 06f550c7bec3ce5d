const NUMBER = /^[-+]?(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d+)?$/;
const NON_FINITE = /^[-+]?(?:nan|inf|infinity)$/i;

/**
 * Reads a decimal number strictly: the whole text or nothing, a decimal point, no spaces or group marks.
 *
 * @returns the number; Infinity for the words `NaN`, `inf`, `Infinity` and for numbers too large to hold, in any
 *   sign; null for anything else
 */
export function parseNumber(text: string): number | null {
  if (NUMBER.test(text)) {
    const value = Number(text);
    return Number.isFinite(value) ? value : Number.POSITIVE_INFINITY;
  }
  return NON_FINITE.test(text) ? Number.POSITIVE_INFINITY : null;
}
