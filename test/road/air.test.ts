import { describe, it } from 'vitest';
import { airAlong } from '../../src/road/air.ts';
import { expectClose } from '../compare.ts';

describe('air along a road', () => {
  it('meets the rows of the standard atmosphere', () => {
    // Source: ISO 2533:1975 / ICAO Doc 7488, geopotential altitude, rows recomputed outside of the project from
    // T = 288.15 - 0.0065 H, p = 101325 (T / 288.15)^5.25588, rho = p / (287.05287 T).
    const rows: readonly (readonly [number, number, number])[] = [
      [0, 288.15, 1.225],
      [500, 284.9, 1.16727],
      [1000, 281.65, 1.11164],
      [1500, 278.4, 1.05807],
      [2000, 275.15, 1.00649],
      [2500, 271.9, 0.95686],
      [3000, 268.65, 0.90912],
    ];
    const air = airAlong(
      Float64Array.from(rows, ([altitude]) => altitude),
      { kind: 'standard', temperature: 288.15, pressure: 101325 },
    );
    expectClose(
      air.temperature,
      rows.map(([, temperature]) => temperature),
      1e-9,
    );
    expectClose(
      air.density,
      rows.map(([, , density]) => density),
      6e-6,
    );
  });

  it('follows the weather at sea level: warmer or thinner air by the gas law', () => {
    const air = airAlong(Float64Array.of(0), { kind: 'standard', temperature: 303.15, pressure: 99_000 });
    expectClose(air.density, [99_000 / (287.05287 * 303.15)], 1e-12);
  });

  it('keeps a given density everywhere', () => {
    const air = airAlong(Float64Array.of(0, 2000), { kind: 'density', density: 1.189 });
    expectClose(air.density, [1.189, 1.189], 0);
    expectClose(air.temperature, [288.15, 275.15], 1e-9);
  });
});
