import { describe, expect, it } from 'vitest';
import { bandedQr, inverseBand, rotateIn, solveBandedQr } from '../../src/numeric/banded-qr.ts';
import { expectClose } from '../compare.ts';
import { randomness } from '../road/synthetic-road.ts';

/** Normal equations by Gauss-Jordan with pivoting: another way to the same numbers. */
function invert(a: number[][]): number[][] {
  const n = a.length;
  const m = a.map((row, i) => [...row, ...row.map((_, j) => (i === j ? 1 : 0))]);
  for (let c = 0; c < n; c++) {
    let pivot = c;
    for (let r = c; r < n; r++) if (Math.abs(m[r]![c]!) > Math.abs(m[pivot]![c]!)) pivot = r;
    [m[c], m[pivot]] = [m[pivot]!, m[c]!];
    const scale = m[c]![c]!;
    m[c] = m[c]!.map((v) => v / scale);
    for (let r = 0; r < n; r++)
      if (r !== c) {
        const factor = m[r]![c]!;
        m[r] = m[r]!.map((v, j) => v - factor * m[c]![j]!);
      }
  }
  return m.map((row) => row.slice(n));
}

function randomSystem(seed: number) {
  const random = randomness(seed);
  const size = 6 + Math.floor(10 * random.uniform());
  const bandwidth = 1 + Math.floor(4 * random.uniform());
  const rows: { first: number; row: number[]; right: number }[] = [];
  for (let first = 0; first < size; first++)
    for (let k = 0; k < 3; k++)
      rows.push({
        first,
        row: Array.from({ length: bandwidth }, (_, j) => (first + j < size ? random.normal() : 0)),
        right: random.normal(),
      });
  return { size, bandwidth, rows, random };
}

describe('banded QR', () => {
  it('solves random banded least squares as the normal equations do, whatever the order of the rows', () => {
    for (let seed = 1; seed <= 40; seed++) {
      const { size, bandwidth, rows, random } = randomSystem(seed);
      const normal = Array.from({ length: size }, () => new Array<number>(size).fill(0));
      const moment = new Array<number>(size).fill(0);
      for (const { first, row, right } of rows)
        row.forEach((a, i) => {
          if (first + i >= size) return;
          moment[first + i]! += a * right;
          row.forEach((b, j) => {
            if (first + j < size) normal[first + i]![first + j]! += a * b;
          });
        });
      const inverse = invert(normal);
      const expected = inverse.map((line) => line.reduce((sum, v, j) => sum + v * moment[j]!, 0));
      const shuffled = seed % 2 === 0 ? rows : rows.toSorted(() => random.uniform() - 0.5);
      const qr = bandedQr(size, bandwidth, 1);
      for (const { first, row, right } of shuffled)
        rotateIn(qr, first, Float64Array.from(row), Float64Array.of(right));
      expectClose(solveBandedQr(qr, 0), expected, 1e-9, `solution of seed ${seed}`);
      const band = inverseBand(qr);
      for (let i = 0; i < size; i++)
        for (let j = 0; j < bandwidth && i + j < size; j++)
          expectClose(band[i * bandwidth + j]!, inverse[i]![i + j]!, 1e-9, `covariance (${i}, ${i + j})`);
    }
  });

  it('solves several right-hand sides together', () => {
    const qr = bandedQr(2, 2, 2);
    rotateIn(qr, 0, Float64Array.of(2, 1), Float64Array.of(5, 1));
    rotateIn(qr, 1, Float64Array.of(4, 0), Float64Array.of(4, 8));
    expectClose(solveBandedQr(qr, 0), [2, 1], 1e-15);
    expectClose(solveBandedQr(qr, 1), [-0.5, 2], 1e-15);
  });

  it('gives non-finite values, not an exception, for an unknown that no row touches', () => {
    const qr = bandedQr(2, 2, 1);
    rotateIn(qr, 0, Float64Array.of(1, 0), Float64Array.of(1));
    expect(Number.isFinite(solveBandedQr(qr, 0)[1]!)).toBe(false);
  });
});
