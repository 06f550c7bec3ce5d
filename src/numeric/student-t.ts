import { exp, log } from './elementary.ts';
import { bracketedRoot } from './root.ts';

/** Lanczos's approximation of the gamma function with g = 7 and nine terms: good to about 1e-15. */
const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
] as const;
const HALF_LOG_TWO_PI = 0.9189385332046727;

/** log of the gamma function for x > 0 (C. Lanczos, SIAM J. Numer. Anal. B 1 (1964) 86-96; coefficients from memory). */
function logGamma(x: number): number {
  let sum = LANCZOS[0];
  for (let i = 1; i < LANCZOS.length; i++) sum += LANCZOS[i]! / (x + i - 1);
  const t = x + 6.5;
  return HALF_LOG_TWO_PI + (x - 0.5) * log(t) - t + log(sum);
}

/** Largest number of terms; a hundred are enough for a million degrees of freedom. */
const MOST_TERMS = 500;

/**
 * The regularised incomplete beta function I_x(a, b) by its continued fraction, evaluated from the front (modified
 * Lentz, I. J. Thompson and A. R. Barnett, J. Comput. Phys. 64 (1986) 490-509; the fraction is 8.17.22 of the NIST
 * Digital Library of Mathematical Functions, from memory).
 */
function incompleteBeta(a: number, b: number, x: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(b, a, 1 - x);
  const front = exp(a * log(x) + b * log(1 - x) + logGamma(a + b) - logGamma(a) - logGamma(b));
  const term = (m: number, odd: boolean): number =>
    odd
      ? (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1))
      : (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
  let c = 1;
  let d = 1 / (1 + term(0, true));
  let value = d;
  for (let m = 1; m < MOST_TERMS; m++)
    for (const odd of [false, true]) {
      const step = term(m, odd);
      d = 1 / (1 + step * d);
      c = 1 + step / c;
      value *= c * d;
      if (odd && Math.abs(c * d - 1) < 1e-16) return (front / a) * value;
    }
  return (front / a) * value;
}

/**
 * Student's t: how many standard errors an estimate must be widened, up and down, to take in the truth with a given
 * confidence (Student, Biometrika 6 (1908) 1-25), from P(|T| > t) = I_(n / (n + t^2))(n / 2, 1 / 2) (NIST Digital Library
 * of Mathematical Functions, section 8.17, from memory). Relative error below 1e-12.
 *
 * @param confidence two-sided, above 0 and below 1: 0.95 leaves 2.5 % on either side
 * @param degrees of freedom, > 0, whole or not
 * @returns t > 0: 12.706 for 0.95 and one degree, 1.960 for 0.95 and many
 */
export function studentQuantile(confidence: number, degrees: number): number {
  const outside = 1 - confidence;
  let most = 2;
  while (studentTail(most, degrees) > outside && most < 1e150) most *= 2;
  return bracketedRoot((t) => studentTail(t, degrees) - outside, 0, most, 0).x;
}

/**
 * Probability that Student's t with so many degrees of freedom lies farther from 0 than a value, on either side: see
 * `studentQuantile`.
 *
 * @param t of either sign
 * @param degrees of freedom, > 0
 */
export function studentTail(t: number, degrees: number): number {
  return incompleteBeta(degrees / 2, 0.5, degrees / (degrees + t * t));
}
