import { Matrix } from 'ml-matrix';
import { describe, expect, test } from 'vitest';
import { balance } from '../../src/linear/balance.ts';
import { eigenvalues } from '../../src/linear/eigenvalues.ts';
import { polynomialOfRoots, polynomialRoots, valueOfPolynomial } from '../../src/linear/polynomial.ts';
import { rootLocus } from '../../src/linear/root-locus.ts';
import {
  holdSystem,
  responseOf,
  sampledResponseOf,
  stateSpaceOf,
  transferFunctionOf,
} from '../../src/linear/state-space.ts';
import { closedPoles, padeDelay, transferAt } from '../../src/linear/transfer-function.ts';
import { complex, expComplex } from '../../src/numeric/complex.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { expectClose } from '../compare.ts';

const real = (...roots: number[]) => roots.map((root) => complex(root));
const sizes = (roots: ReturnType<typeof polynomialRoots>) => roots.map(({ re, im }) => Math.hypot(re, im));

describe('roots of a polynomial', () => {
  test('are good to rounding although they lie ten decades apart', () => {
    const found = polynomialRoots(polynomialOfRoots(real(-1e-4, -1, -1e5, -1e6)));
    [1e-4, 1, 1e5, 1e6].forEach((size, i) => {
      expectClose(found[i]!.re / -size, 1, 1e-12);
      expect(found[i]!.im).toBe(0);
    });
  });
  test.each([2, 3, 4, 5, 6])('come back %i times where they are one', (times) => {
    const found = polynomialRoots(polynomialOfRoots(new Array(times).fill(complex(-0.7))));
    expectClose(
      found.map(({ re }) => re),
      new Array(times).fill(-0.7),
      1e-13,
    );
    expectClose(
      found.map(({ im }) => im),
      new Array(times).fill(0),
      0,
    );
  });
  test('stay apart where they are near but not one', () => {
    const found = polynomialRoots(polynomialOfRoots(real(-1, -1.01, -1.02)));
    expectClose(sizes(found), [1, 1.01, 1.02], 1e-9);
  });
  test('at zero and of leading zeros count', () => {
    expect(polynomialRoots([0, 0, 1, 2, 0, 0]).map(({ re }) => re)).toEqual([0, 0, -2]);
    expect(polynomialRoots([3])).toEqual([]);
    expect(polynomialRoots([0])).toEqual([]);
  });
  test('of random polynomials are zeros of them, and conjugate in pairs', () => {
    const random = seededStream(11);
    for (let run = 0; run < 200; run++) {
      const degree = 1 + Math.floor(7 * random.uniform());
      const coefficients = Array.from({ length: degree + 1 }, () => 10 * (random.uniform() - 0.5));
      const roots = polynomialRoots(coefficients);
      expect(roots.length).toBe(degree);
      for (const root of roots) {
        const value = valueOfPolynomial(coefficients, root);
        const terms = coefficients.reduce(
          (sum, c, i) => sum + Math.abs(c) * Math.hypot(root.re, root.im) ** (degree - i),
          0,
        );
        expect(Math.hypot(value.re, value.im)).toBeLessThan(1e-12 * terms);
      }
      expectClose(
        roots.reduce((sum, { im }) => sum + im, 0),
        0,
        1e-12 * Math.max(...sizes(roots)),
      );
    }
  });
});

test('a balanced matrix has the eigenvalues of the matrix, and rows and columns of like size', () => {
  const random = seededStream(5);
  for (let run = 0; run < 50; run++) {
    const n = 5;
    const values = Array.from({ length: n }, () => -(10 ** (8 * random.uniform() - 4)));
    // Triangular: its eigenvalues stand on the diagonal.
    const a = Matrix.zeros(n, n);
    for (let i = 0; i < n; i++)
      for (let j = i; j < n; j++) a.set(i, j, i === j ? values[i]! : 10 ** (12 * random.uniform() - 6));
    const found = eigenvalues(a).map(({ re }) => re);
    expectClose(
      found.sort((p, q) => p - q).map((value, i) => value / [...values].sort((p, q) => p - q)[i]!),
      new Array(n).fill(1),
      1e-9,
    );
  }
  const spread = balance(
    new Matrix([
      [1, 1e8],
      [1e-8, 2],
    ]),
  );
  expect(Math.abs(spread.get(0, 1)) / Math.abs(spread.get(1, 0))).toBeLessThan(4);
  expectClose(spread.get(0, 1) * spread.get(1, 0), 1, 1e-15);
});

test('state space and transfer function are the same system, whichever comes first', () => {
  const random = seededStream(3);
  for (let run = 0; run < 50; run++) {
    const poles = Array.from({ length: 4 }, () => complex(-(10 ** (3 * random.uniform() - 2))));
    const original = {
      numerator: [1 + random.uniform(), random.uniform(), 1],
      denominator: polynomialOfRoots(poles),
      delay: 0.1 * random.uniform(),
    };
    const space = stateSpaceOf(original);
    const back = transferFunctionOf(space);
    const respond = responseOf(space);
    for (const w of [0.01, 0.3, 2, 40]) {
      const s = complex(0.1, w);
      const expected = transferAt(original, s);
      const size = Math.hypot(expected.re, expected.im);
      for (const value of [transferAt(back, s), respond(s)!])
        expectClose([value.re, value.im], [expected.re, expected.im], 1e-9 * size);
    }
    // Two poles more than zeros: the terms in between are exactly none.
    expect(back.numerator.slice(0, 2)).toEqual([0, 0]);
  }
});

test('a system held over shorter and shorter samples tends to the continuous one', () => {
  const space = stateSpaceOf({ numerator: [3], denominator: [0.2, 1.3, 1], delay: 0.37 });
  const w = 1.7;
  const target = responseOf(space)(complex(0, w))!;
  const miss = [0.1, 0.05, 0.025].map((h) => {
    const held = sampledResponseOf(holdSystem(space, h))(expComplex(complex(0, w * h)))!;
    // A hold is half a sample late; the rest of it is of second order.
    const late = expComplex(complex(0, (w * h) / 2));
    return Math.hypot(
      held.re * late.re - held.im * late.im - target.re,
      held.re * late.im + held.im * late.re - target.im,
    );
  });
  expect(miss[0]! / miss[1]!).toBeGreaterThan(3);
  expect(miss[1]! / miss[2]!).toBeGreaterThan(3);
  expect(miss[2]!).toBeLessThan(1e-3 * Math.hypot(target.re, target.im));
});

test('a rational dead time is the published approximant, and has gain 1 and the right lag', () => {
  // Order 2: (s^2 T^2 - 6 s T + 12) / (s^2 T^2 + 6 s T + 12), as every textbook prints it.
  const { numerator, denominator } = padeDelay(0.3, 2);
  expectClose(
    numerator.map((c) => 12 * c),
    [0.09, -1.8, 12],
    1e-14,
  );
  expectClose(
    denominator.map((c) => 12 * c),
    [0.09, 1.8, 12],
    1e-14,
  );
  for (const w of [0.5, 5]) {
    const value = transferAt(padeDelay(0.3, 8), complex(0, w));
    expectClose([value.re, value.im], [Math.cos(0.3 * w), -Math.sin(0.3 * w)], 1e-9);
  }
});

test('branches of a root locus are unbroken where two poles meet and part', () => {
  // s (s + 2) + K: both on the axis until K = 1, then straight up and down from -1.
  const factors = Array.from({ length: 201 }, (_, i) => i / 100);
  const open = { numerator: [1], denominator: [1, 2, 0], delay: 0 };
  const { branches } = rootLocus((factor) => closedPoles(open, factor), factors);
  expect(branches.length).toBe(2);
  for (const { re, im } of branches)
    for (let k = 1; k < factors.length; k++)
      expect(Math.hypot(re[k]! - re[k - 1]!, im[k]! - im[k - 1]!)).toBeLessThan(0.11);
  const at = branches.map(({ re, im }) => [re[200], Math.abs(im[200]!)]);
  expectClose(at.flat() as number[], [-1, 1, -1, 1], 1e-12);
});
