/** A root and how it was reached. */
export interface Root {
  readonly x: number;
  /** f at x. */
  readonly value: number;
  readonly evaluations: number;
  /** `no_bracket`: f has the same sign at both ends, or is not a number there; x is the end with the smaller |f|. */
  readonly status: 'found' | 'no_bracket' | 'non_finite';
}

/**
 * Root of a continuous function between two ends where its signs differ, by inverse quadratic interpolation, secant and
 * bisection (R. P. Brent, Algorithms for Minimization without Derivatives, Prentice-Hall 1973, chapter 4).
 *
 * @param f the function
 * @param a one end
 * @param b the other end, in any order
 * @param tolerance largest distance of x from the root, >= 0; never finer than rounding allows
 * @returns the root; an end that is itself a root counts as found
 */
export function bracketedRoot(f: (x: number) => number, a: number, b: number, tolerance: number): Root {
  let fa = f(a);
  let fb = f(b);
  let evaluations = 2;
  if (fa === 0) return { x: a, value: 0, evaluations, status: 'found' };
  if (fb === 0) return { x: b, value: 0, evaluations, status: 'found' };
  if (!(fa < 0 && fb > 0) && !(fa > 0 && fb < 0)) {
    const first = !(Math.abs(fb) < Math.abs(fa));
    return { x: first ? a : b, value: first ? fa : fb, evaluations, status: 'no_bracket' };
  }
  // b is the best point so far, c the end on its other side, a the point before b.
  let c = a;
  let fc = fa;
  let step = b - a;
  let before = step;
  for (;;) {
    if (Math.abs(fc) < Math.abs(fb)) {
      a = b;
      b = c;
      c = a;
      fa = fb;
      fb = fc;
      fc = fa;
    }
    const least = 2 * Number.EPSILON * Math.abs(b) + 0.5 * tolerance;
    const half = 0.5 * (c - b);
    if (Math.abs(half) <= least || fb === 0) return { x: b, value: fb, evaluations, status: 'found' };
    if (Math.abs(before) < least || Math.abs(fa) <= Math.abs(fb)) {
      step = half;
      before = half;
    } else {
      const s = fb / fa;
      let p: number;
      let q: number;
      if (a === c) {
        p = 2 * half * s;
        q = 1 - s;
      } else {
        const r = fb / fc;
        const t = fa / fc;
        p = s * (2 * half * t * (t - r) - (b - a) * (r - 1));
        q = (t - 1) * (r - 1) * (s - 1);
      }
      if (p > 0) q = -q;
      else p = -p;
      if (2 * p < Math.min(3 * half * q - Math.abs(least * q), Math.abs(before * q))) {
        before = step;
        step = p / q;
      } else {
        step = half;
        before = half;
      }
    }
    a = b;
    fa = fb;
    b += Math.abs(step) > least ? step : half > 0 ? least : -least;
    fb = f(b);
    evaluations += 1;
    if (Number.isNaN(fb)) return { x: b, value: fb, evaluations, status: 'non_finite' };
    if (fb > 0 === fc > 0) {
      c = a;
      fc = fa;
      step = b - a;
      before = step;
    }
  }
}
