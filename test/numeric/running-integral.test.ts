import { describe, expect, test } from 'vitest';
import { seededStream } from '../../src/numeric/random.ts';
import { runningIntegral } from '../../src/numeric/running-integral.ts';
import { expectClose } from '../compare.ts';

describe('runningIntegral', () => {
  test('is exact for any parabola at any places', () => {
    const random = seededStream(11);
    for (let round = 0; round < 50; round++) {
      const [a, b, c] = [random.normal(), random.normal(), random.normal()];
      let last = 10 * random.normal();
      const at = Float64Array.from({ length: 3 + Math.floor(20 * random.uniform()) }, () => {
        last += 0.05 + random.uniform();
        return last;
      });
      const whole = (x: number) => a * x + (b * x * x) / 2 + (c * x ** 3) / 3;
      const integral = runningIntegral(
        at,
        at.map((x) => a + b * x + c * x * x),
      );
      expectClose(
        integral,
        at.map((x) => whole(x) - whole(at[0]!)),
        1e-9 * (1 + Math.abs(whole(last))),
      );
    }
  });

  test('is of fourth order on an even grid', () => {
    const errorOf = (count: number): number => {
      const at = Float64Array.from({ length: count + 1 }, (_, i) => (2 * i) / count);
      return Math.abs(runningIntegral(at, at.map(Math.exp))[count]! - (Math.exp(2) - 1));
    };
    const order = Math.log2(errorOf(64) / errorOf(128));
    expect(order).toBeGreaterThan(3.8);
    expect(order).toBeLessThan(4.3);
  });

  test('is the trapezium for two samples, and nothing for one or none', () => {
    expect([...runningIntegral(Float64Array.of(1, 3), Float64Array.of(4, 8))]).toEqual([0, 12]);
    expect([...runningIntegral(Float64Array.of(1), Float64Array.of(4))]).toEqual([0]);
    expect([...runningIntegral(new Float64Array(0), new Float64Array(0))]).toEqual([]);
  });
});
