import { type Complex, complex, divideComplex, expComplex, multiplyComplex } from '../numeric/complex.ts';
import {
  addPolynomials,
  multiplyPolynomials,
  type Polynomial,
  polynomialRoots,
  valueOfPolynomial,
} from './polynomial.ts';

/** numerator(s) / denominator(s) e^(-delay s). */
export interface TransferFunction {
  readonly numerator: Polynomial;
  readonly denominator: Polynomial;
  /** [s], >= 0 */
  readonly delay: number;
}

/** Value at a complex frequency; Infinity at a pole. */
export function transferAt({ numerator, denominator, delay }: TransferFunction, s: Complex): Complex {
  const below = valueOfPolynomial(denominator, s);
  if (below.re === 0 && below.im === 0) return complex(Number.POSITIVE_INFINITY);
  const value = divideComplex(valueOfPolynomial(numerator, s), below);
  return delay === 0 ? value : multiplyComplex(value, expComplex(complex(-delay * s.re, -delay * s.im)));
}

/** One behind the other; nothing is cancelled. */
export function inSeries(first: TransferFunction, second: TransferFunction): TransferFunction {
  return {
    numerator: multiplyPolynomials(first.numerator, second.numerator),
    denominator: multiplyPolynomials(first.denominator, second.denominator),
    delay: first.delay + second.delay,
  };
}

export const polesOf = ({ denominator }: TransferFunction): readonly Complex[] =>
  polynomialRoots(denominator);
export const zerosOf = ({ numerator }: TransferFunction): readonly Complex[] => polynomialRoots(numerator);

/**
 * Poles under unity negative feedback with the gain multiplied by a factor: roots of denominator + factor numerator.
 *
 * @param loop without dead time, which would have poles without end: put `padeDelay` in its place
 */
export function closedPoles({ numerator, denominator }: TransferFunction, factor = 1): readonly Complex[] {
  return polynomialRoots(addPolynomials(denominator, numerator, factor));
}

/**
 * Dead time as a rational function, the diagonal Pade approximant of e^(-delay s) (G. H. Golub, C. F. Van Loan, Matrix
 * Computations, section 9.3, section number from memory). Its phase is right to frequencies of about order / delay.
 *
 * @param delay [s], > 0
 * @param order 1 to 12
 */
export function padeDelay(delay: number, order: number): TransferFunction {
  const denominator: number[] = [];
  let c = 1;
  for (let k = 0; k <= order; k++) {
    denominator.unshift(c);
    c *= (delay * (order - k)) / ((2 * order - k) * (k + 1));
  }
  const numerator = denominator.map((value, i) => ((order - i) % 2 === 0 ? value : -value));
  return { numerator, denominator, delay: 0 };
}
