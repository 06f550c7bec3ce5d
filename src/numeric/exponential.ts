import { scaleByPowerOfTwo } from './float-words.ts';

const LN2_HIGH = 0.6931471803691238;
const LN2_LOW = 1.9082149292705877e-10;
const INVERSE_LN2 = Math.LOG2E;
const P1 = 0.16666666666666602;
const P2 = -0.0027777777777015593;
const P3 = 0.00006613756321437934;
const P4 = -0.0000016533902205465252;
const P5 = 4.1381367970572385e-8;

/**
 * e^x, the same bits on every engine, within 1 ulp.
 *
 * Method of fdlibm, e_exp.c: x = k ln 2 + r with |r| <= ln 2 / 2, e^r by a Remez approximation of
 * r (e^r + 1) / (e^r - 1), then scaling by 2^k. The notice of fdlibm is in elementary.ts.
 *
 * @param x any number
 * @returns e^x; infinity above 709.78, 0 below -745.13, NaN for NaN
 */
export function exp(x: number): number {
  if (!(x < 709.782712893384)) return Number.isNaN(x) ? x : Number.POSITIVE_INFINITY;
  if (x < -745.1332191019411) return 0;
  const k = Math.trunc(INVERSE_LN2 * x + (x < 0 ? -0.5 : 0.5));
  const high = x - k * LN2_HIGH;
  const low = k * LN2_LOW;
  const r = high - low;
  const t = r * r;
  const c = r - t * (P1 + t * (P2 + t * (P3 + t * (P4 + t * P5))));
  const y = 1 - (low - (r * c) / (2 - c) - high);
  return k === 0 ? y : scaleByPowerOfTwo(y, k);
}
