import { expect, it } from 'vitest';
import { noiseWords, normalAt, normalQuantile } from '../../src/loop/sensor-noise.ts';
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
  const [first, second] = noiseWords(2 ** 40 + 7);
  expect(normalAt(first, second, 12)).toBe(normalAt(first, second, 12));
  const of = (seed: number, tick: number): number => {
    const words = noiseWords(seed);
    return normalAt(words[0], words[1], tick);
  };
  const some = [0, 1, 2, 7, 2 ** 32, 2 ** 40 + 7, -1].flatMap((seed) =>
    [0, 1, 2, 65_536].map((tick) => of(seed, tick)),
  );
  expect(new Set(some).size).toBe(some.length);
});
