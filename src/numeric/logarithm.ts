import { highWord, withHighWord } from './float-words.ts';

const LN2_HIGH = 0.6931471803691238;
const LN2_LOW = 1.9082149292705877e-10;
const TWO_TO_54 = 18014398509481984;
const LEAST_NORMAL = 2.2250738585072014e-308;
const L1 = 0.6666666666666735;
const L2 = 0.3999999999940942;
const L3 = 0.2857142874366239;
const L4 = 0.22222198432149784;
const L5 = 0.1818357216161805;
const L6 = 0.15313837699209373;
const L7 = 0.14798198605116586;

/**
 * Natural logarithm, the same bits on every engine, within 1 ulp.
 *
 * Method of fdlibm, e_log.c: x = 2^k (1 + f) with sqrt(2)/2 < 1 + f < sqrt(2); log(1 + f) from s = f / (2 + f)
 * by a Remez approximation; k ln 2 added in two parts. The notice of fdlibm is in elementary.ts.
 *
 * @param x any number
 * @returns log x; -infinity for 0, NaN for x < 0 and NaN
 */
export function log(x: number): number {
  if (!(x > 0)) return x === 0 ? Number.NEGATIVE_INFINITY : Number.NaN;
  if (x === Number.POSITIVE_INFINITY) return x;
  let k = 0;
  if (x < LEAST_NORMAL) {
    k = -54;
    x *= TWO_TO_54;
  }
  const word = highWord(x);
  const fraction = word & 0xfffff;
  const half = (fraction + 0x95f64) & 0x100000;
  k += (word >> 20) - 1023 + (half >> 20);
  const f = withHighWord(x, fraction | (half ^ 0x3ff00000)) - 1;
  if ((0xfffff & (2 + fraction)) < 3) return nearOne(f, k);
  const s = f / (2 + f);
  const z = s * s;
  const w = z * z;
  const r = z * (L1 + w * (L3 + w * (L5 + w * L7))) + w * (L2 + w * (L4 + w * L6));
  if (((fraction - 0x6147a) | (0x6b851 - fraction)) > 0) {
    const square = 0.5 * f * f;
    if (k === 0) return f - (square - s * (square + r));
    return k * LN2_HIGH - (square - (s * (square + r) + k * LN2_LOW) - f);
  }
  if (k === 0) return f - s * (f - r);
  return k * LN2_HIGH - (s * (f - r) - k * LN2_LOW - f);
}

// |f| < 2^-20: three terms of the series are enough.
function nearOne(f: number, k: number): number {
  if (f === 0) return k === 0 ? 0 : k * LN2_HIGH + k * LN2_LOW;
  const r = f * f * (0.5 - 0.3333333333333333 * f);
  return k === 0 ? f - r : k * LN2_HIGH - (r - k * LN2_LOW - f);
}
