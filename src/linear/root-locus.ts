import { type Complex, complex, sizeOfComplex } from '../numeric/complex.ts';

/** The way of one closed pole as the gain grows. Equal lengths. */
export interface Branch {
  readonly re: Float64Array;
  readonly im: Float64Array;
}

export interface RootLocus {
  /** Factors on the gain, rising. */
  readonly factors: Float64Array;
  readonly branches: readonly Branch[];
}

/**
 * Root locus (W. R. Evans, Transactions of the AIEE 69 (1950) 66-69): the poles at each factor, put on branches so that
 * together they move least, pair by pair from the nearest.
 *
 * @param polesAt closed poles with the gain multiplied by a factor; always as many
 * @param factors rising, >= 0
 * @throws RangeError where the number of poles changes
 */
export function rootLocus(
  polesAt: (factor: number) => readonly Complex[],
  factors: ArrayLike<number>,
): RootLocus {
  const steps = Array.from(factors, polesAt);
  const count = steps[0]?.length ?? 0;
  const branches = Array.from({ length: count }, () => ({
    re: new Float64Array(steps.length),
    im: new Float64Array(steps.length),
  }));
  let before = steps[0] ?? [];
  steps.forEach((poles, k) => {
    if (poles.length !== count) throw new RangeError('the number of closed poles changes with the gain');
    const ordered = k === 0 ? poles : nearest(before, poles);
    ordered.forEach(({ re, im }, i) => {
      branches[i]!.re[k] = re;
      branches[i]!.im[k] = im;
    });
    before = ordered;
  });
  return { factors: Float64Array.from(factors), branches };
}

/** The later poles in the order of the former ones. */
function nearest(before: readonly Complex[], after: readonly Complex[]): readonly Complex[] {
  const pairs = before.flatMap((p, i) =>
    after.map((q, j) => ({ i, j, way: sizeOfComplex(complex(p.re - q.re, p.im - q.im)) })),
  );
  pairs.sort((p, q) => p.way - q.way || p.i - q.i || p.j - q.j);
  const ordered: Complex[] = [];
  const taken = new Set<number>();
  for (const { i, j } of pairs) {
    if (ordered[i] !== undefined || taken.has(j)) continue;
    ordered[i] = after[j]!;
    taken.add(j);
  }
  return ordered;
}
