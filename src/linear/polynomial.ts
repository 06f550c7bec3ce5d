import { Matrix } from 'ml-matrix';
import { addComplex, type Complex, complex, multiplyComplex, sizeOfComplex } from '../numeric/complex.ts';
import { pow } from '../numeric/elementary.ts';
import { eigenvalues } from './eigenvalues.ts';

/** Coefficients of a polynomial, the one of the highest power first. */
export type Polynomial = readonly number[];

/** Value at a place, by Horner's rule. */
export function valueOfPolynomial(polynomial: Polynomial, s: Complex): Complex {
  return polynomial.reduce((sum, c) => addComplex(multiplyComplex(sum, s), complex(c)), complex(0));
}

export function multiplyPolynomials(p: Polynomial, q: Polynomial): Polynomial {
  const product = new Array<number>(p.length + q.length - 1).fill(0);
  p.forEach((a, i) => {
    q.forEach((b, j) => {
      product[i + j]! += a * b;
    });
  });
  return product;
}

/** p + factor q. */
export function addPolynomials(p: Polynomial, q: Polynomial, factor = 1): Polynomial {
  const length = Math.max(p.length, q.length);
  return Array.from({ length }, (_, i) => {
    const power = length - 1 - i;
    return (p[p.length - 1 - power] ?? 0) + factor * (q[q.length - 1 - power] ?? 0);
  });
}

/** Product of (s - root), its conjugates included among the roots. */
export function polynomialOfRoots(roots: readonly Complex[]): Polynomial {
  let product: Complex[] = [complex(1)];
  for (const root of roots) {
    const next = [...product, complex(0)];
    for (let i = 0; i < product.length; i++) {
      const term = multiplyComplex(root, product[i]!);
      next[i + 1] = complex(next[i + 1]!.re - term.re, next[i + 1]!.im - term.im);
    }
    product = next;
  }
  return product.map(({ re }) => re);
}

/** Roots nearer to each other than this share of their size may be one root several times. */
const NEAR = 0.05;
/** A change of the roots that leaves the coefficients this well (relative to their terms) is below rounding. */
const ROUNDING = 1e-13;

/**
 * Roots of a real polynomial as eigenvalues of its companion matrix, in a variable scaled so that the outer coefficients
 * are of one size, and balanced (A. Edelman, H. Murakami, Mathematics of Computation 64 (1995) 763-776). An m-fold root
 * comes out as m roots on a small circle, eps^(1/m) wide, whose mean is right: near roots are replaced by their mean
 * where the polynomial cannot tell the difference.
 *
 * @param polynomial leading zeros do not count
 * @returns roots in rising order of size, conjugates next to each other; none for a constant
 */
export function polynomialRoots(polynomial: Polynomial): readonly Complex[] {
  const first = polynomial.findIndex((c) => c !== 0);
  if (first < 0) return [];
  let last = polynomial.length - 1;
  while (polynomial[last] === 0) last--;
  const coefficients = polynomial.slice(first, last + 1);
  const atZero = new Array<Complex>(polynomial.length - 1 - last).fill(complex(0));
  const degree = coefficients.length - 1;
  if (degree === 0) return atZero;
  const lead = coefficients[0]!;
  const scale = pow(Math.abs(coefficients[degree]! / lead), 1 / degree);
  const companion = Matrix.zeros(degree, degree);
  for (let j = 0, power = 1; j < degree; j++) {
    power *= scale;
    companion.set(0, j, -coefficients[j + 1]! / lead / power);
    if (j > 0) companion.set(j, j - 1, 1);
  }
  const scaled = coefficients.map((c, i) => c / lead / pow(scale, i));
  const roots = mergeRepeated(eigenvalues(companion), scaled);
  const back = roots.map(({ re, im }) => complex(scale * re, scale * im));
  return [...atZero, ...back.sort((p, q) => sizeOfComplex(p) - sizeOfComplex(q) || p.im - q.im)];
}

/** Replaces clusters of roots by their means, where the coefficients stay as they are to rounding. */
function mergeRepeated(roots: readonly Complex[], coefficients: Polynomial): readonly Complex[] {
  const clusters: Complex[][] = [];
  for (const root of roots) {
    const home = clusters.find((members) =>
      members.some(
        (member) =>
          sizeOfComplex(complex(member.re - root.re, member.im - root.im)) <= NEAR * sizeOfComplex(root),
      ),
    );
    if (home === undefined) clusters.push([root]);
    else home.push(root);
  }
  let best = roots;
  for (const members of clusters) {
    if (members.length < 2) continue;
    const count = members.length;
    const re = members.reduce((sum, root) => sum + root.re, 0) / count;
    const im = members.reduce((sum, root) => sum + root.im, 0) / count;
    // A cluster around the real axis is its own conjugate.
    const real = members.some((root) => root.im >= 0) && members.some((root) => root.im <= 0);
    const mean = complex(re, real ? 0 : im);
    const trial = best.map((root) => (members.includes(root) ? mean : root));
    if (misfit(trial, coefficients) <= Math.max(ROUNDING, misfit(best, coefficients))) best = trial;
  }
  return best;
}

/** Largest difference of the coefficients that roots make, each relative to the terms that add up to it. */
function misfit(roots: readonly Complex[], coefficients: Polynomial): number {
  const made = polynomialOfRoots(roots);
  const terms = polynomialOfRoots(roots.map((root) => complex(-sizeOfComplex(root))));
  return made.reduce((most, c, i) => Math.max(most, Math.abs(c - coefficients[i]!) / terms[i]!), 0);
}
