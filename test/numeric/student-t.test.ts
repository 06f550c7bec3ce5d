import { describe, expect, test } from 'vitest';
import { studentQuantile, studentTail } from '../../src/numeric/student-t.ts';
import { expectClose } from '../compare.ts';

// Percentage points of the t distribution as textbooks print them (R. A. Fisher, F. Yates, Statistical Tables,
// table III; E. S. Pearson, H. O. Hartley, Biometrika Tables for Statisticians, vol. 1, table 12; from memory):
// degrees of freedom, then two-sided 90, 95 and 99 %.
const PUBLISHED = [
  [1, 6.314, 12.706, 63.657],
  [2, 2.92, 4.303, 9.925],
  [3, 2.353, 3.182, 5.841],
  [5, 2.015, 2.571, 4.032],
  [8, 1.86, 2.306, 3.355],
  [10, 1.812, 2.228, 3.169],
  [20, 1.725, 2.086, 2.845],
  [30, 1.697, 2.042, 2.75],
  [60, 1.671, 2.0, 2.66],
  [120, 1.658, 1.98, 2.617],
] as const;

describe('studentQuantile', () => {
  test.each(PUBLISHED)('gives the printed table at %i degrees of freedom', (degrees, ...points) => {
    [0.9, 0.95, 0.99].forEach((confidence, i) => {
      expectClose(studentQuantile(confidence, degrees), points[i]!, 0.000501);
    });
  });

  test('has its closed forms at one and two degrees of freedom', () => {
    for (let k = 1; k < 100; k++) {
      const confidence = k / 100;
      const cauchy = Math.tan((Math.PI * confidence) / 2);
      expectClose(studentQuantile(confidence, 1) / cauchy, 1, 1e-12);
      const two = (confidence * Math.SQRT2) / Math.sqrt(1 - confidence ** 2);
      expectClose(studentQuantile(confidence, 2) / two, 1, 1e-12);
    }
  });

  test('tends to the normal distribution, whose 95 % lie within 1.959964', () => {
    expectClose(studentQuantile(0.95, 1e8), 1.959964, 1e-6);
  });

  test('takes degrees that are not whole, between those that are', () => {
    const between = studentQuantile(0.95, 4.5);
    expect(between).toBeLessThan(studentQuantile(0.95, 4));
    expect(between).toBeGreaterThan(studentQuantile(0.95, 5));
  });

  test('is undone by the tail', () => {
    for (const degrees of [1, 2.5, 7, 40, 1000])
      for (const confidence of [0.1, 0.5, 0.95, 0.999])
        expectClose(studentTail(studentQuantile(confidence, degrees), degrees), 1 - confidence, 1e-13);
    expect(studentTail(0, 5)).toBe(1);
    expect(studentTail(-2.571, 5)).toBe(studentTail(2.571, 5));
  });
});
