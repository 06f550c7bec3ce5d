import { describe, expect, test } from 'vitest';
import { actuatorStep } from '../../src/loop/actuator-step.ts';
import { lagFactors } from '../../src/loop/lags.ts';
import * as at from '../../src/loop/layout.ts';

/** Parameters of lags as the loop lays them out: weights from their definition. */
function parameters(more: {
  actuator?: number;
  drive?: number;
  filter?: number;
  rate?: number;
  step?: number;
}) {
  const { actuator = 0, drive = 0, filter = 0, rate = Number.POSITIVE_INFINITY, step = 0.02 } = more;
  const p = new Float64Array(at.P_SIZE);
  p[at.P_STEP] = step;
  p[at.P_ACTUATOR_LAG] = actuator;
  p[at.P_DRIVE_LAG] = drive;
  p[at.P_FILTER] = filter;
  p[at.P_RATE] = rate;
  p[at.P_RATE_GAP] = rate * actuator;
  p[at.P_LAG_WEIGHT] = actuator === drive ? 0 : actuator / (actuator - drive);
  p[at.P_LAG_EQUAL] = actuator === drive && drive > 0 ? 1 / drive : 0;
  return p;
}

/** Classical RK4 in 2,000 steps. */
function solve(
  slope: (t: number, y: readonly number[]) => number[],
  start: readonly number[],
  time: number,
): number[] {
  const h = time / 2000;
  let y = [...start];
  const move = (k: readonly number[], share: number): number[] =>
    y.map((value, i) => value + share * h * k[i]!);
  for (let i = 0; i < 2000; i++) {
    const t = i * h;
    const k1 = slope(t, y);
    const k2 = slope(t + h / 2, move(k1, 0.5));
    const k3 = slope(t + h / 2, move(k2, 0.5));
    const k4 = slope(t + h, move(k3, 1));
    y = y.map((value, j) => value + (h / 6) * (k1[j]! + 2 * (k2[j]! + k3[j]!) + k4[j]!));
  }
  return y;
}

describe('two lags in a row under a held command', () => {
  for (const [actuator, drive] of [
    [0.06, 0.15],
    [0.1, 0.1],
    [0.05, 0.0500001],
  ] as const)
    test(`${actuator} s and ${drive} s`, () => {
      const lags = new Float64Array(at.G_SIZE);
      lagFactors(parameters({ actuator, drive }), lags, 0, 0.02);
      const [u, x, y] = [0.7, 0.2, 0.3];
      const [ye, xe] = solve((_, [a, b]) => [(u - a!) / actuator, (a! - b!) / drive], [y, x], 0.02);
      expect(Math.abs(u + (y - u) * lags[at.G_ACTUATOR]! - ye!)).toBeLessThan(1e-12);
      expect(Math.abs(u + (x - u) * lags[at.G_DRIVE]! + (y - u) * lags[at.G_PULL]! - xe!)).toBeLessThan(1e-9);
    });
});

describe('the filter behind a cubic', () => {
  for (const [filter, time] of [
    [0.05, 0.02],
    [0.5, 0.02],
    [0.5, 0.003],
    [0.01, 0.025],
  ] as const)
    test(`${filter} s over ${time} s`, () => {
      const lags = new Float64Array(at.G_SIZE);
      lagFactors(parameters({ filter }), lags, 0, time);
      const speed = (t: number): number => 17 + t * (0.8 + t * (-6 + 40 * t));
      const slope = (t: number): number => 0.8 + t * (-12 + 120 * t);
      const [z] = solve((t, [a]) => [(speed(t) - a!) / filter], [16.4], time);
      const found =
        17 +
        (16.4 - 17) * lags[at.G_FILTER]! +
        (speed(time) - 17) * lags[at.G_FILTER_RISE]! +
        slope(0) * lags[at.G_FILTER_BEGIN]! +
        slope(time) * lags[at.G_FILTER_END]!;
      expect(Math.abs(found - z!)).toBeLessThan(1e-9);
    });

  test('a step too short for a cubic takes the speed as a line', () => {
    const lags = new Float64Array(at.G_SIZE);
    lagFactors(parameters({ filter: 0.5 }), lags, 0, 1e-4);
    const [z] = solve((t, [a]) => [(17 + 2 * t - a!) / 0.5], [16], 1e-4);
    const found = 17 - lags[at.G_FILTER]! + 2e-4 * lags[at.G_FILTER_RISE]!;
    expect(Math.abs(found - z!)).toBeLessThan(1e-11);
  });
});

test('a step that leaves the rate limit within it', () => {
  const [u, x, y] = [0.5, 0.1, 0.2];
  const p = parameters({ actuator: 0.06, drive: 0.15, rate: 4.5 });
  const lags = new Float64Array(at.G_SIZE);
  actuatorStep(p, lags, u, x, y, y);
  const limited = (a: number): number => Math.min(4.5, Math.max(-4.5, (u - a) / 0.06));
  const [ye, xe, area] = solve((_, [a, b]) => [limited(a!), (a! - b!) / 0.15, b!], [y, x, 0], 0.02);
  expect(Math.abs(lags[at.G_MOVED_ACTUATOR]! - ye!)).toBeLessThan(1e-8);
  expect(Math.abs(lags[at.G_MOVED_DRIVE]! - xe!)).toBeLessThan(1e-8);
  expect(Math.abs(lags[at.G_MOVED_MEAN]! - area! / 0.02)).toBeLessThan(1e-8);
});
