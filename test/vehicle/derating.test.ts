import { expect, test } from 'vitest';
import { correctionFactor, derateFactor, deratingExtrapolates } from '../../src/vehicle/derating.ts';
import { wheelForce } from '../../src/vehicle/drive-law.ts';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';

interface Row {
  readonly height_m: number;
  readonly air_density_kg_m3: number;
  readonly temperature_k: number;
  readonly iso_1585: number;
  readonly sae_j1349: number;
}

const engine = { derate: 'naturally_aspirated' } as const;
const rows = readReference<Row[]>('vehicle/altitude_correction.json').map(
  (row) => [row.height_m, row.air_density_kg_m3, row.temperature_k, row.iso_1585, row.sae_j1349] as const,
);

test.each(rows)(
  'the ISO 1585 factor at %i m of the standard atmosphere',
  (_, density, temperature, factor) => {
    expectClose(correctionFactor(density, temperature), factor, 6e-5);
    expectClose(derateFactor(engine, density, temperature), Math.min(1, 1 / factor), 6e-5);
    expect(deratingExtrapolates(engine, density, temperature)).toBe(factor > 1.07);
  },
);

test.each(rows)(
  'at %i m it is within 1.5 %% of the correction of SAE J1349',
  (_, density, temperature, ...both) => {
    const [, other] = both;
    expectClose(correctionFactor(density, temperature) / other, 1, 0.015);
  },
);

test('the range that ISO 1585 vouches for ends at 890 m of the standard atmosphere', () => {
  // ISO 2533: T = 288.15 - 0.0065 H, p = 101 325 (T / 288.15)^5.25588.
  const extrapolates = (height: number): boolean => {
    const temperature = 288.15 - 0.0065 * height;
    const pressure = 101_325 * (temperature / 288.15) ** 5.25588;
    return deratingExtrapolates(engine, pressure / (287.05287 * temperature), temperature);
  };
  expect([0, 600, 880, 900, 2000].map(extrapolates)).toEqual([false, false, false, true, true]);
});

test('power at 2000 m of the standard atmosphere is 80.6 % of that at the reference, drag as it was', () => {
  const spec = { peakForce: 500, peakPower: 10_000, closedThrottleForce: 60, lag: 0 };
  const drive = forceDrive({ ...spec, ...engine });
  const factor = derateFactor(engine, 1.00649, 275.15);
  // 1 / 1.2404 = 0.8062.
  expectClose(wheelForce(drive, 0, 25, 1, factor) * 25, 8062, 1);
  expectClose(wheelForce(drive, 0, 25, 0, factor), -60, 1e-12);
});

test('a drive without derating keeps its force at any height', () => {
  expect(derateFactor({ derate: 'none' }, 0.7, 250)).toBe(1);
  expect(deratingExtrapolates({ derate: 'none' }, 0.7, 250)).toBe(false);
});
