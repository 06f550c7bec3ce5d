import { withoutLowWord } from './float-words.ts';

const PI = Math.PI;
const PI_LOW = 1.2246467991473532e-16;
const HALF_PI = 1.5707963267948966;
const HALF_PI_LOW = 6.123233995736766e-17;
const QUARTER_PI = 0.7853981633974483;

const P0 = 0.16666666666666666;
const P1 = -0.3255658186224009;
const P2 = 0.20121253213486293;
const P3 = -0.04005553450067941;
const P4 = 0.0007915349942898145;
const P5 = 0.00003479331075960212;
const Q1 = -2.403394911734414;
const Q2 = 2.0209457602335057;
const Q3 = -0.6882839716054533;
const Q4 = 0.07703815055590194;

/** (asin(x) - x) / x as a function of t = x^2, t <= 1/4. */
function arcsineTail(t: number): number {
  const p = t * (P0 + t * (P1 + t * (P2 + t * (P3 + t * (P4 + t * P5)))));
  const q = 1 + t * (Q1 + t * (Q2 + t * (Q3 + t * Q4)));
  return p / q;
}

/**
 * Arc sine, the same bits on every engine, within 1 ulp. Method of fdlibm, e_asin.c (notice in elementary.ts).
 *
 * @param x in [-1, 1]
 * @returns angle in [-pi/2, pi/2] [rad]; NaN outside of the domain
 */
export function asin(x: number): number {
  const size = x < 0 ? -x : x;
  if (!(size < 1)) return size === 1 ? x * HALF_PI + x * HALF_PI_LOW : Number.NaN;
  if (size < 0.5) return size < 7.4e-9 ? x : x + x * arcsineTail(x * x);
  const t = (1 - size) * 0.5;
  const tail = arcsineTail(t);
  const s = Math.sqrt(t);
  let value: number;
  if (size >= 0.975) value = HALF_PI - (2 * (s + s * tail) - HALF_PI_LOW);
  else {
    const high = withoutLowWord(s);
    const c = (t - high * high) / (s + high);
    value = QUARTER_PI - (2 * s * tail - (HALF_PI_LOW - 2 * c) - (QUARTER_PI - 2 * high));
  }
  return x > 0 ? value : -value;
}

const A0 = 0.3333333333333293;
const A1 = -0.19999999999876483;
const A2 = 0.14285714272503466;
const A3 = -0.11111110405462356;
const A4 = 0.09090887133436507;
const A5 = -0.0769187620504483;
const A6 = 0.06661073137387531;
const A7 = -0.058335701337905735;
const A8 = 0.049768779946159324;
const A9 = -0.036531572744216916;
const A10 = 0.016285820115365782;
// atan(1/2), atan(1), atan(3/2), atan(infinity), each as a sum of two numbers.
const ANCHORS = [0.4636476090008061, QUARTER_PI, 0.982793723247329, HALF_PI] as const;
const ANCHORS_LOW = [
  2.2698777452961687e-17,
  3.061616997868383e-17,
  1.3903311031230998e-17,
  HALF_PI_LOW,
] as const;

/**
 * Arc tangent, the same bits on every engine, within 1 ulp. Method of fdlibm, s_atan.c (notice in elementary.ts).
 *
 * @param x any number
 * @returns angle in [-pi/2, pi/2] [rad]; NaN for NaN
 */
export function atan(x: number): number {
  const size = x < 0 ? -x : x;
  if (!(size < 73786976294838210000)) {
    if (Number.isNaN(x)) return x;
    return x > 0 ? HALF_PI + HALF_PI_LOW : -HALF_PI - HALF_PI_LOW;
  }
  let near = -1;
  let r = x;
  if (size < 0.4375) {
    if (size < 7.4e-9) return x;
  } else if (size < 0.6875) {
    near = 0;
    r = (2 * size - 1) / (2 + size);
  } else if (size < 1.1875) {
    near = 1;
    r = (size - 1) / (size + 1);
  } else if (size < 2.4375) {
    near = 2;
    r = (size - 1.5) / (1 + 1.5 * size);
  } else {
    near = 3;
    r = -1 / size;
  }
  const z = r * r;
  const w = z * z;
  const even = z * (A0 + w * (A2 + w * (A4 + w * (A6 + w * (A8 + w * A10)))));
  const odd = w * (A1 + w * (A3 + w * (A5 + w * (A7 + w * A9))));
  if (near < 0) return r - r * (even + odd);
  const value = ANCHORS[near as 0] - (r * (even + odd) - ANCHORS_LOW[near as 0] - r);
  return x < 0 ? -value : value;
}

/**
 * Angle of the point (x, y), the same bits on every engine, within 2 ulp. Method of fdlibm, e_atan2.c
 * (notice in elementary.ts).
 *
 * @param y ordinate
 * @param x abscissa
 * @returns angle from the x axis in [-pi, pi] [rad]; signed zeros and infinities as IEEE 754 asks; NaN if either is NaN
 */
export function atan2(y: number, x: number): number {
  if (Number.isNaN(x) || Number.isNaN(y)) return Number.NaN;
  const left = x < 0 || Object.is(x, -0);
  const below = y < 0 || Object.is(y, -0);
  if (y === 0) return left ? (below ? -PI : PI) : y;
  const tall = Math.abs(y);
  const wide = Math.abs(x);
  const value = angleAboveAxis(tall, wide, left);
  return below ? -value : value;
}

// Angle of (+-wide, tall), tall > 0, on the left of the y axis where `left`.
function angleAboveAxis(tall: number, wide: number, left: boolean): number {
  if (wide === Number.POSITIVE_INFINITY) {
    if (tall === wide) return left ? 3 * QUARTER_PI : QUARTER_PI;
    return left ? PI : 0;
  }
  const ratio = tall / wide;
  if (ratio > 1e18) return HALF_PI;
  const angle = left && ratio < 8e-19 ? 0 : atan(ratio);
  return left ? PI - (angle - PI_LOW) : angle;
}
