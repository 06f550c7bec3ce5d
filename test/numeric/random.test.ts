import { describe, expect, test } from 'vitest';
import { seededStream } from '../../src/numeric/random.ts';

describe('seededStream', () => {
  test('gives the same numbers for the same seed and others for another', () => {
    const take = (seed: number): number[] => {
      const stream = seededStream(seed);
      return Array.from({ length: 50 }, () => stream.uniform());
    };
    expect(take(7)).toEqual(take(7));
    expect(take(7)).not.toEqual(take(8));
    expect(take(-1)).not.toEqual(take(1));
    expect(take(2 ** 32 + 1)).not.toEqual(take(1));
  });

  test('stays in [0, 1) and spreads evenly over ten classes', () => {
    const stream = seededStream(1);
    const n = 100_000;
    const counts = new Array<number>(10).fill(0);
    for (let i = 0; i < n; i++) {
      const x = stream.uniform();
      expect(x >= 0 && x < 1).toBe(true);
      counts[Math.floor(10 * x)]!++;
    }
    // Chi-square with 9 degrees of freedom: 27.9 is passed once in a thousand (published table).
    const chi = counts.reduce((sum, c) => sum + (c - n / 10) ** 2 / (n / 10), 0);
    expect(chi).toBeLessThan(27.9);
  });

  test('normal numbers have the moments of the normal law', () => {
    const stream = seededStream(2);
    const n = 100_000;
    let m1 = 0;
    let m2 = 0;
    let m3 = 0;
    let m4 = 0;
    let lag = 0;
    let before = 0;
    for (let i = 0; i < n; i++) {
      const x = stream.normal();
      m1 += x / n;
      m2 += x ** 2 / n;
      m3 += x ** 3 / n;
      m4 += x ** 4 / n;
      lag += (x * before) / n;
      before = x;
    }
    // Four standard errors: 1, sqrt 2, sqrt 15, sqrt 96 over sqrt n.
    expect(Math.abs(m1)).toBeLessThan(0.0127);
    expect(Math.abs(m2 - 1)).toBeLessThan(0.0179);
    expect(Math.abs(m3)).toBeLessThan(0.049);
    expect(Math.abs(m4 - 3)).toBeLessThan(0.124);
    expect(Math.abs(lag)).toBeLessThan(0.0127);
  });

  test('goes on from a copied state as if nothing had happened', () => {
    const stream = seededStream(3);
    stream.normal();
    const kept = stream.state();
    const first = [stream.normal(), stream.uniform(), stream.normal()];
    stream.restore(kept);
    expect([stream.normal(), stream.uniform(), stream.normal()]).toEqual(first);
  });
});
