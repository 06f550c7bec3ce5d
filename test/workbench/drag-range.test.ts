import fc from 'fast-check';
import { expect, it } from 'vitest';
import { dragRange } from '../../src/workbench/page/drag-range.ts';

const range = (least: number, most: number, value: number, whole = false) =>
  dragRange({ least, most, whole }, value);

it('a range of the size of its value is dragged over whole', () => {
  expect(range(0, 360, 70)).toEqual({ low: 0, high: 360, step: 2 });
  expect(range(-40, 55, 8)).toEqual({ low: -40, high: 55, step: 0.5 });
  expect(range(1, 20, 4, true)).toEqual({ low: 1, high: 20, step: 1 });
});

it('of a wide range, the part up to three times the value', () => {
  expect(range(1, 300, 20)).toEqual({ low: 1, high: 60, step: 0.5 });
  expect(range(0.000001, 10000, 4)).toEqual({ low: 0.1, high: 12, step: 0.1 });
  expect(range(0.0005, 2, 0.02)).toEqual({ low: 0.0005, high: 0.06, step: 0.0005 });
});

it('from nothing it goes some way', () => {
  expect(range(0, 20, 0)).toEqual({ low: 0, high: 1, step: 0.005 });
  expect(range(-50, 50, 0)).toEqual({ low: -5, high: 5, step: 0.05 });
});

it('it lies in what is allowed, has the value in it to a step, and has between a hundred and a few hundred steps', () => {
  fc.assert(
    fc.property(
      fc.double({ min: -1000, max: 1000, noNaN: true }),
      fc.double({ min: 0.01, max: 1e6, noNaN: true }),
      fc.double({ min: 0, max: 1, noNaN: true }),
      (least, span, share) => {
        const most = least + span;
        const value = Math.min(most, least + share * span);
        const { low, high, step } = range(least, most, value);
        expect(low).toBeGreaterThanOrEqual(least);
        expect(high).toBeLessThanOrEqual(most);
        expect(value).toBeGreaterThanOrEqual(low - 1.001 * step);
        expect(value).toBeLessThanOrEqual(high + 1.001 * step);
        const steps = (high - low) / step;
        expect(steps).toBeGreaterThan(70);
        expect(steps).toBeLessThan(210);
      },
    ),
    { seed: 11, numRuns: 500 },
  );
});
