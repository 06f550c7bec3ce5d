import { describe, expect, test } from 'vitest';
import { bracketedRoot } from '../../src/numeric/root.ts';
import { expectClose } from '../compare.ts';

describe('bracketedRoot', () => {
  test('finds the root of the cubic that Wallis gave, x^3 - 2x - 5', () => {
    // 2.0945514815423265915 (published since Newton's time, digits from memory)
    const root = bracketedRoot((x) => x * x * x - 2 * x - 5, 2, 3, 0);
    expectClose(root.x, 2.0945514815423265, 1e-15);
    expect(root.status).toBe('found');
    expect(root.evaluations).toBeLessThan(14);
  });

  test('takes either order of the ends and an end that is a root', () => {
    expectClose(bracketedRoot((x) => x - 0.25, 1, -3, 1e-14).x, 0.25, 1e-14);
    expect(bracketedRoot((x) => x, 0, 1, 1e-9)).toEqual({ x: 0, value: 0, evaluations: 2, status: 'found' });
    expect(bracketedRoot((x) => x - 1, 0, 1, 1e-9).x).toBe(1);
  });

  test('keeps the tolerance on flat, steep and jumping functions', () => {
    for (let k = 1; k <= 40; k++) {
      const at = -2 + 0.1 * k + 0.013;
      for (const f of [
        (x: number) => (x - at) ** 9,
        (x: number) => Math.atan(1e6 * (x - at)),
        (x: number) => (x < at ? -1 : 2),
      ])
        expectClose(bracketedRoot(f, -3, 5, 1e-10).x, at, 1.1e-10);
    }
  });

  test('says so when the signs do not differ or the function is not a number', () => {
    expect(bracketedRoot((x) => x * x + 1, -1, 2, 1e-9)).toMatchObject({ x: -1, status: 'no_bracket' });
    expect(bracketedRoot((x) => Math.sqrt(x) - 5, -1, 2, 1e-9).status).toBe('no_bracket');
    expect(bracketedRoot((x) => (x > 0.1 && x < 0.9 ? Number.NaN : x - 0.5), 0, 1, 1e-9).status).toBe(
      'non_finite',
    );
  });
});
