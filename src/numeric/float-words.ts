// The two 32-bit halves of a double, for the elementary functions. The order of the halves is the machine's.
const cell = new Float64Array(1);
const halves = new Int32Array(cell.buffer);
cell[0] = 1;
const HIGH = halves[1] !== 0 ? 1 : 0;
const LOW = 1 - HIGH;

/** Sign, exponent and the upper 20 bits of the fraction, as a signed 32-bit integer. */
export function highWord(x: number): number {
  cell[0] = x;
  return halves[HIGH]!;
}

/** x with its high half replaced. */
export function withHighWord(x: number, high: number): number {
  cell[0] = x;
  halves[HIGH] = high;
  return cell[0]!;
}

/** x with the lower 32 bits of its fraction cleared: products of two such numbers of half length are exact. */
export function withoutLowWord(x: number): number {
  cell[0] = x;
  halves[LOW] = 0;
  return cell[0]!;
}

const LEAST = -1021;
const powersOfTwo = new Float64Array(1023 - LEAST + 1);
for (let power = 2 * 2.2250738585072014e-308, k = 0; k < powersOfTwo.length; k++, power *= 2)
  powersOfTwo[k] = power;

/**
 * y 2^k, rounded once, for y in [1/2, 2] and any whole k: infinity above the range of a double, 0 below it.
 */
export function scaleByPowerOfTwo(y: number, k: number): number {
  if (k >= LEAST && k <= 1023) return y * powersOfTwo[k - LEAST]!;
  if (k > 1023) return k > 1025 ? Number.POSITIVE_INFINITY : y * powersOfTwo[k - 2 - LEAST]! * 4;
  // One exact step down to the border of the normal range, then one rounding into the subnormal numbers.
  return k < -1080 ? 0 : y * powersOfTwo[k + 1000 - LEAST]! * powersOfTwo[-1000 - LEAST]!;
}
