import { expect, it } from 'vitest';
import { noiseOf, normalAt, normalQuantile } from '../../src/loop/sensor-noise.ts';
import { expectClose } from '../compare.ts';

// Table of the normal law (Abramowitz and Stegun, Handbook of Mathematical Functions, tables 26.1 and 26.5; from memory).
it.each([
  [0.5, 0],
  [0.6, 0.253347103],
  [0.75, 0.67448975],
  [0.9, 1.281551566],
  [0.95, 1.644853627],
  [0.975, 1.959963985],
  [0.99, 2.326347874],
  [0.995, 2.575829304],
  [0.999, 3.090232306],
  [0.9999, 3.719016485],
  [0.999999, 4.753424309],
])('%d of normal numbers lie below %d', (share, value) => {
  expectClose(normalQuantile(share), value, 1e-6);
  expectClose(normalQuantile(1 - share), -value, 1e-6);
});

it('rises all the way, over the seams of its parts too', () => {
  let before = Number.NEGATIVE_INFINITY;
  for (let i = 1; i < 20_000; i++) {
    const value = normalQuantile(i / 20_000);
    expect(value).toBeGreaterThan(before);
    before = value;
  }
  // The seam to the far tails: r = 5.
  const far = Math.exp(-25);
  expectClose(normalQuantile(far * 1.0001), normalQuantile(far * 0.9999), 1e-4);
});

it('gives the same number for the same seed and tick, and others for others', () => {
  const of = (seed: number, tick: number): number => normalAt(noiseOf(seed), 0, tick);
  expect(of(2 ** 40 + 7, 12)).toBe(of(2 ** 40 + 7, 12));
  const some = [0, 1, 2, 7, 2 ** 32, 2 ** 40 + 7, -1].flatMap((seed) =>
    [0, 1, 2, 65_536].map((tick) => of(seed, tick)),
  );
  expect(new Set(some).size).toBe(some.length);
});

it('gives the same numbers in whatever order the ticks are asked for', () => {
  const noise = noiseOf(5);
  for (const tick of [0, 40, 31, 32, 2 ** 32 - 1, 33, 33, 64, 63, 1, 2 ** 31, 95])
    expect(normalAt(noise, 0, tick)).toBe(normalAt(noiseOf(5), 0, tick));
});

it.each([3, 2 ** 45 + 11])('is distributed as the normal law over the ticks, with seed %d', (seed) => {
  const noise = noiseOf(seed);
  const ticks = 200_000;
  // Shares of the normal law below these values (the same tables).
  const table = [
    [-2.326347874, 0.01],
    [-1.959963985, 0.025],
    [-0.67448975, 0.25],
    [0, 0.5],
    [0.253347103, 0.6],
    [1.644853627, 0.95],
    [2.326347874, 0.99],
    [3.090232306, 0.999],
  ] as const;
  const below = table.map(() => 0);
  let sum = 0;
  let squares = 0;
  let products = 0;
  let before = 0;
  for (let tick = 0; tick < ticks; tick++) {
    const value = normalAt(noise, 0, tick);
    table.forEach(([edge], i) => {
      if (value < edge) below[i]! += 1;
    });
    sum += value;
    squares += value * value;
    products += value * before;
    before = value;
  }
  // Four standard deviations of each figure.
  const spread = (variance: number): number => 4 * Math.sqrt(variance / ticks);
  table.forEach(([, share], i) => {
    expectClose(below[i]! / ticks, share, spread(share * (1 - share)));
  });
  expectClose(sum / ticks, 0, spread(1));
  expectClose(squares / ticks, 1, spread(2));
  expectClose(products / ticks, 0, spread(1));
});
