import { highWord, withoutLowWord } from './float-words.ts';

const INVERSE_HALF_PI = 0.6366197723675814;
// pi/2 in pieces of 33 bits, and what is left after each.
const HALF_PI_1 = 1.5707963267341256;
const HALF_PI_1_REST = 6.077100506506192e-11;
const HALF_PI_2 = 6.077100506303966e-11;
const HALF_PI_2_REST = 2.0222662487959506e-21;
const HALF_PI_3 = 2.0222662487111665e-21;
const HALF_PI_3_REST = 8.4784276603689e-32;
const QUARTER_PI = 0.7853981633974483;
const QUARTER_PI_LOW = 3.061616997868383e-17;
/** Largest argument [rad] whose reduction stays exact to the last place. */
const LARGEST = 1.6e6;

// Result of `reduce`: the angle left over, as a sum of two numbers.
let angle = 0;
let angleLow = 0;

/** x = n pi/2 + angle + angleLow with |angle| <= pi/4 (fdlibm e_rem_pio2.c, Cody and Waite); returns n. */
function reduce(x: number): number {
  const n = Math.round(x * INVERSE_HALF_PI);
  const exponent = (highWord(x) >> 20) & 0x7ff;
  let r = x - n * HALF_PI_1;
  let w = n * HALF_PI_1_REST;
  angle = r - w;
  if (exponent - ((highWord(angle) >> 20) & 0x7ff) > 16) {
    let before = r;
    w = n * HALF_PI_2;
    r = before - w;
    w = n * HALF_PI_2_REST - (before - r - w);
    angle = r - w;
    if (exponent - ((highWord(angle) >> 20) & 0x7ff) > 49) {
      before = r;
      w = n * HALF_PI_3;
      r = before - w;
      w = n * HALF_PI_3_REST - (before - r - w);
      angle = r - w;
    }
  }
  angleLow = r - angle - w;
  return n;
}

const S1 = -0.16666666666666632;
const S2 = 0.00833333333332249;
const S3 = -0.0001984126982985795;
const S4 = 0.0000027557313707070068;
const S5 = -2.5050760253406863e-8;
const S6 = 1.58969099521155e-10;

/** sin(x + y), |x| <= pi/4, y a small tail (k_sin.c). */
function sinNearZero(x: number, y: number): number {
  if (x < 7e-9 && x > -7e-9) return x;
  const z = x * x;
  const v = z * x;
  const r = S2 + z * (S3 + z * (S4 + z * (S5 + z * S6)));
  return x - (z * (0.5 * y - v * r) - y - v * S1);
}

const C1 = 0.0416666666666666;
const C2 = -0.001388888888887411;
const C3 = 0.00002480158728947673;
const C4 = -2.7557314351390663e-7;
const C5 = 2.087572321298175e-9;
const C6 = -1.1359647557788195e-11;

/** cos(x + y), |x| <= pi/4, y a small tail (k_cos.c). */
function cosNearZero(x: number, y: number): number {
  const z = x * x;
  const r = z * (C1 + z * (C2 + z * (C3 + z * (C4 + z * (C5 + z * C6)))));
  const half = 0.5 * z;
  const w = 1 - half;
  return w + (1 - w - half + (z * r - x * y));
}

const T0 = 0.3333333333333341;
const T1 = 0.13333333333320124;
const T2 = 0.05396825397622605;
const T3 = 0.021869488294859542;
const T4 = 0.0088632398235993;
const T5 = 0.0035920791075913124;
const T6 = 0.0014562094543252903;
const T7 = 0.0005880412408202641;
const T8 = 0.0002464631348184699;
const T9 = 0.00007817944429395571;
const T10 = 0.00007140724913826082;
const T11 = -0.000018558637485527546;
const T12 = 0.00002590730518636337;

/** tan(x + y), or -1 / tan(x + y) where `inverse`; |x| <= pi/4, y a small tail (k_tan.c). */
function tanNearZero(x: number, y: number, inverse: boolean): number {
  if (x < 3e-9 && x > -3e-9) return inverse ? -1 / x : x;
  const negative = x < 0;
  const large = negative ? x < -0.6744 : x > 0.6744;
  if (large) {
    const a = negative ? -x : x;
    const b = negative ? -y : y;
    x = QUARTER_PI - a + (QUARTER_PI_LOW - b);
    y = 0;
  }
  const z = x * x;
  const w = z * z;
  const odd = T1 + w * (T3 + w * (T5 + w * (T7 + w * (T9 + w * T11))));
  const even = z * (T2 + w * (T4 + w * (T6 + w * (T8 + w * (T10 + w * T12)))));
  const s = z * x;
  const r = y + z * (s * (odd + even) + y) + T0 * s;
  const sum = x + r;
  if (large) {
    const unit = inverse ? -1 : 1;
    const value = unit - 2 * (x - ((sum * sum) / (sum + unit) - r));
    return negative ? -value : value;
  }
  if (!inverse) return sum;
  // -1 / (x + r), corrected by the rest of the division.
  const high = withoutLowWord(sum);
  const rest = r - (high - x);
  const quotient = -1 / sum;
  const quotientHigh = withoutLowWord(quotient);
  return quotientHigh + quotient * (1 + quotientHigh * high + quotientHigh * rest);
}

const outOfRange = (x: number): boolean => !(x <= LARGEST && x >= -LARGEST);

/**
 * Sine, cosine and tangent, the same bits on every engine, within 1 ulp.
 *
 * Methods of fdlibm (e_rem_pio2.c, k_sin.c, k_cos.c, k_tan.c), whose notice is in elementary.ts. The argument is
 * reduced with pi/2 in three pieces, which is exact enough up to 1.6e6 rad; no angle of this program comes near.
 *
 * @param x angle [rad], |x| <= 1.6e6
 * @returns the function; NaN beyond the range, for infinities and NaN
 */
export function sin(x: number): number {
  if (x <= QUARTER_PI && x >= -QUARTER_PI) return sinNearZero(x, 0);
  if (outOfRange(x)) return Number.NaN;
  switch (reduce(x) & 3) {
    case 0:
      return sinNearZero(angle, angleLow);
    case 1:
      return cosNearZero(angle, angleLow);
    case 2:
      return -sinNearZero(angle, angleLow);
    default:
      return -cosNearZero(angle, angleLow);
  }
}

/** Cosine: see `sin`. */
export function cos(x: number): number {
  if (x <= QUARTER_PI && x >= -QUARTER_PI) return cosNearZero(x, 0);
  if (outOfRange(x)) return Number.NaN;
  switch (reduce(x) & 3) {
    case 0:
      return cosNearZero(angle, angleLow);
    case 1:
      return -sinNearZero(angle, angleLow);
    case 2:
      return -cosNearZero(angle, angleLow);
    default:
      return sinNearZero(angle, angleLow);
  }
}

/** Tangent: see `sin`. */
export function tan(x: number): number {
  if (x <= QUARTER_PI && x >= -QUARTER_PI) return tanNearZero(x, 0, false);
  if (outOfRange(x)) return Number.NaN;
  const odd = (reduce(x) & 1) === 1;
  return tanNearZero(angle, angleLow, odd);
}
