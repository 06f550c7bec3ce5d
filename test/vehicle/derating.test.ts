import { expect, test } from 'vitest';
import { correctionFactor, derateFactor, deratingExtrapolates } from '../../src/vehicle/derating.ts';
import { expectClose } from '../compare.ts';

const engine = { derate: 'naturally_aspirated' } as const;
// ISO 2533 rows (height, density, temperature) and ISO 1585 factors recomputed outside of this project from the formula.
test.each([
  [0, 1.225, 288.15, 0.9531],
  [1000, 1.11164, 281.65, 1.0857],
  [2000, 1.00649, 275.15, 1.2404],
  [3000, 0.90912, 268.65, 1.4217],
])('the ISO 1585 factor at %i m of the standard atmosphere', (_, density, temperature, factor) => {
  expectClose(correctionFactor(density, temperature), factor, 6e-5);
  expectClose(derateFactor(engine, density, temperature), Math.min(1, 1 / factor), 6e-5);
  expect(deratingExtrapolates(engine, density, temperature)).toBe(factor > 1.07);
});

test('a drive without derating keeps its force at any height', () => {
  expect(derateFactor({ derate: 'none' }, 0.7, 250)).toBe(1);
  expect(deratingExtrapolates({ derate: 'none' }, 0.7, 250)).toBe(false);
});
