// The one comparison of numbers in the tests: two-sided, with a stated tolerance; NaN and unequal lengths fail.
import { expect } from 'vitest';

type Numbers = ArrayLike<number>;

/** Fails unless |actual - expected| <= tolerance for the number, or for every element of arrays of equal length. */
export function expectClose(
  actual: number | Numbers,
  expected: number | Numbers,
  tolerance: number,
  what = 'value',
): void {
  if (!(tolerance >= 0)) throw new Error(`tolerance ${tolerance} is not a number >= 0`);
  const a = typeof actual === 'number' ? [actual] : Array.from(actual);
  const b = typeof expected === 'number' ? [expected] : Array.from(expected);
  expect(a.length, `${what}: length`).toBe(b.length);
  let worst = 0;
  let at = -1;
  for (let i = 0; i < a.length; i++) {
    const gap = Math.abs(a[i]! - b[i]!);
    if (!(gap <= tolerance) && !(gap <= worst)) {
      worst = Number.isNaN(gap) ? Number.POSITIVE_INFINITY : gap;
      at = i;
    }
  }
  if (at >= 0)
    expect.fail(`${what}[${at}]: ${a[at]} is not within ${tolerance} of ${b[at]} (off by ${worst})`);
}
