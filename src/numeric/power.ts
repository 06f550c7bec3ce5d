import { highWord, scaleByPowerOfTwo, withHighWord, withoutLowWord } from './float-words.ts';

const TWO_TO_53 = 9007199254740992;
const LEAST_NORMAL = 2.2250738585072014e-308;
const L1 = 0.5999999999999946;
const L2 = 0.4285714285785502;
const L3 = 0.33333332981837743;
const L4 = 0.272728123808534;
const L5 = 0.23066074577556175;
const L6 = 0.20697501780033842;
const P1 = 0.16666666666666602;
const P2 = -0.0027777777777015593;
const P3 = 0.00006613756321437934;
const P4 = -0.0000016533902205465252;
const P5 = 4.1381367970572385e-8;
const LN2 = Math.LN2;
const LN2_HIGH = 0.6931471824645996;
const LN2_LOW = -1.904654299957768e-9;
// 2 / (3 ln 2) whole and in two pieces, and log2(3/2) in two pieces.
const CP = 0.9617966939259756;
const CP_HIGH = 0.9617967009544373;
const CP_LOW = -7.028461650952758e-9;
const LOG2_1_5_HIGH = 0.5849624872207642;
const LOG2_1_5_LOW = 1.350039202129749e-8;

// Result of `log2`: a sum of two numbers.
let logHigh = 0;
let logLow = 0;

/** log2 of a positive finite number to about 70 bits (fdlibm e_pow.c). */
function log2(base: number): void {
  let n = 0;
  let x = base;
  if (x < LEAST_NORMAL) {
    x *= TWO_TO_53;
    n = -53;
  }
  const word = highWord(x);
  n += (word >> 20) - 1023;
  const fraction = word & 0xfffff;
  let top = fraction | 0x3ff00000;
  let near = 0;
  if (fraction > 0x3988e && fraction < 0xbb67a) near = 1;
  else if (fraction >= 0xbb67a) {
    n += 1;
    top -= 0x100000;
  }
  x = withHighWord(x, top);
  const anchor = near === 1 ? 1.5 : 1;
  const u = x - anchor;
  const v = 1 / (x + anchor);
  const s = u * v;
  const sHigh = withoutLowWord(s);
  const tHigh = withHighWord(0, ((top >> 1) | 0x20000000) + 0x80000 + (near << 18));
  const tLow = x - (tHigh - anchor);
  const sLow = v * (u - sHigh * tHigh - sHigh * tLow);
  const s2 = s * s;
  const r = s2 * s2 * (L1 + s2 * (L2 + s2 * (L3 + s2 * (L4 + s2 * (L5 + s2 * L6))))) + sLow * (sHigh + s);
  const sHigh2 = sHigh * sHigh;
  const cHigh = withoutLowWord(3 + sHigh2 + r);
  const cLow = r - (cHigh - 3 - sHigh2);
  const a = sHigh * cHigh;
  const b = sLow * cHigh + cLow * s;
  const pHigh = withoutLowWord(a + b);
  const pLow = b - (pHigh - a);
  const zHigh = CP_HIGH * pHigh;
  const zLow = CP_LOW * pHigh + pLow * CP + (near === 1 ? LOG2_1_5_LOW : 0);
  const shift = near === 1 ? LOG2_1_5_HIGH : 0;
  logHigh = withoutLowWord(zHigh + zLow + shift + n);
  logLow = zLow - (logHigh - n - shift - zHigh);
}

/**
 * Power of a base that is not negative, the same bits on every engine, within 1 ulp.
 *
 * Method of fdlibm, e_pow.c: log2 of the base in two pieces, times the exponent, then 2 to that power. The notice of
 * fdlibm is in elementary.ts.
 *
 * @param base >= 0
 * @param exponent any number
 * @returns base^exponent; 1 for exponent 0; NaN for a negative base, for NaN, and for 1 to an infinite power
 */
export function pow(base: number, exponent: number): number {
  if (exponent === 0) return 1;
  if (!(base >= 0) || Number.isNaN(exponent)) return Number.NaN;
  const infinite = exponent === Number.POSITIVE_INFINITY || exponent === Number.NEGATIVE_INFINITY;
  if (base === 1) return infinite ? Number.NaN : 1;
  if (exponent === 1) return base;
  if (infinite || base === 0 || base === Number.POSITIVE_INFINITY)
    return base > 1 === exponent > 0 ? Number.POSITIVE_INFINITY : 0;
  log2(base);
  const exponentHigh = withoutLowWord(exponent);
  const low = (exponent - exponentHigh) * logHigh + exponent * logLow;
  const high = exponentHigh * logHigh;
  const z = low + high;
  if (!(z < 1024.5)) return Number.POSITIVE_INFINITY;
  if (z < -1080) return 0;
  const n = Math.round(z);
  const rest = high - n;
  const t = withoutLowWord(low + rest);
  const u = t * LN2_HIGH;
  const v = (low - (t - rest)) * LN2 + t * LN2_LOW;
  const y = u + v;
  const w = v - (y - u);
  const y2 = y * y;
  const c = y - y2 * (P1 + y2 * (P2 + y2 * (P3 + y2 * (P4 + y2 * P5))));
  const r = (y * c) / (c - 2) - (w + y * w);
  return scaleByPowerOfTwo(1 - (r - y), n);
}
