import fc from 'fast-check';
import { expect, test } from 'vitest';
import { simplifyLine } from '../../../src/report/data/simplify-line.ts';

test('a straight line keeps its ends only', () => {
  const x = Array.from({ length: 100 }, (_, i) => i * 7);
  const zero = x.map(() => 0);
  expect(simplifyLine(x, zero, zero, 0.01)).toEqual([0, 99]);
});

test('a corner stays when it is further off than the tolerance, and goes when it is not', () => {
  const bend = (height: number) => simplifyLine([0, 50, 100], [0, height, 0], [0, 0, 0], 1);
  expect(bend(1.01)).toEqual([0, 1, 2]);
  expect(bend(0.99)).toEqual([0, 2]);
});

test('a way out and back keeps the place where it turns', () => {
  const out = [0, 10, 20, 30, 40, 30, 20, 10, 0];
  const zero = out.map(() => 0);
  expect(simplifyLine(out, zero, zero, 1)).toEqual([0, 4, 8]);
});

test('a hill on a straight road stays', () => {
  expect(simplifyLine([0, 100, 200], [0, 0, 0], [0, 8, 0], 1)).toEqual([0, 1, 2]);
});

test('short lines come back whole', () => {
  expect(simplifyLine([], [], [], 1)).toEqual([]);
  expect(simplifyLine([1], [1], [1], 1)).toEqual([0]);
  expect(simplifyLine([1, 2], [1, 1], [1, 1], 1)).toEqual([0, 1]);
});

test('no point of a random walk is further from its chord than the tolerance', () => {
  const step = fc.tuple(fc.integer({ min: -20, max: 20 }), fc.integer({ min: -20, max: 20 }));
  fc.assert(
    fc.property(fc.array(step, { minLength: 2, maxLength: 120 }), (steps) => {
      const x = [0];
      const y = [0];
      for (const [dx, dy] of steps) {
        x.push(x.at(-1)! + dx);
        y.push(y.at(-1)! + dy);
      }
      const kept = simplifyLine(
        x,
        y,
        x.map(() => 0),
        5,
      );
      for (let k = 0; k + 1 < kept.length; k++)
        for (let i = kept[k]! + 1; i < kept[k + 1]!; i++)
          expect(toSegment(x, y, i, kept[k]!, kept[k + 1]!)).toBeLessThanOrEqual(5 + 1e-9);
    }),
    { seed: 1973 },
  );
});

function toSegment(x: number[], y: number[], i: number, a: number, b: number): number {
  const length = Math.hypot(x[b]! - x[a]!, y[b]! - y[a]!);
  if (length === 0) return Math.hypot(x[i]! - x[a]!, y[i]! - y[a]!);
  const along = ((x[i]! - x[a]!) * (x[b]! - x[a]!) + (y[i]! - y[a]!) * (y[b]! - y[a]!)) / length;
  if (along <= 0) return Math.hypot(x[i]! - x[a]!, y[i]! - y[a]!);
  if (along >= length) return Math.hypot(x[i]! - x[b]!, y[i]! - y[b]!);
  return Math.abs((x[i]! - x[a]!) * (y[b]! - y[a]!) - (y[i]! - y[a]!) * (x[b]! - x[a]!)) / length;
}
