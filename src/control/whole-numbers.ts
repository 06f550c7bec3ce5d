/** Arithmetic of signed words of up to 48 bits, held exactly in doubles. */

/** Brings a whole number, exact below 2^53, into a word as two's complement does. */
export function wrapTo(value: number, bits: number): number {
  const span = powerOfTwo(bits);
  const half = powerOfTwo(bits - 1);
  if (value >= -half && value < half) return value;
  const rest = value - span * Math.floor(value / span);
  return rest >= half ? rest - span : rest;
}

/** Keeps a whole number within a word. */
export function saturateTo(value: number, bits: number): number {
  const half = powerOfTwo(bits - 1);
  return value < -half ? -half : value >= half ? half - 1 : value;
}

/**
 * The low `bits` of a product of two words of up to 32 bits, as two's complement. Where the product is beyond 2^53 the
 * second factor is taken in two halves.
 *
 * @param bits not less than those of the words, up to 48
 */
export function wrappedProduct(a: number, b: number, bits: number): number {
  // Adding 0 makes a negative zero, which no word has, a plain one.
  const product = a * b + 0;
  if (product < EXACT && product > -EXACT) return wrapTo(product, bits);
  const upper = Math.floor(b / 65536);
  const lower = b - 65536 * upper;
  return wrapTo(65536 * wrapTo(a * upper, bits - 16) + a * lower, bits);
}

/**
 * Scales a whole number down by a divisor, a whole number above 0: by the arithmetic shift to the right, towards minus
 * infinity, or by division as in C, towards 0.
 */
export function scaleDown(value: number, divisor: number, shifts: boolean): number {
  return shifts || value >= 0 ? Math.floor(value / divisor) : 0 - Math.floor(-value / divisor);
}

/** 2^n for n of 0 to 52. */
export function powerOfTwo(n: number): number {
  return n < 31 ? 1 << n : 1073741824 * (1 << (n - 30));
}

/** Whole numbers and their products are exact up to here. */
const EXACT = 9007199254740992;
