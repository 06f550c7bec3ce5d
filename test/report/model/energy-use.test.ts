import { expect, test } from 'vitest';
import type { Ledger } from '../../../src/loop/result.ts';
import { energyUse, useDefinitions, useFigures, useText } from '../../../src/report/model/energy-use.ts';
import type { Battery, FuelTank } from '../../../src/vehicle/energy-source.ts';
import { expectClose } from '../../compare.ts';

const map = {
  shaftSpeed: Float64Array.of(0, 1),
  torque: Float64Array.of(0, 1),
  power: new Float64Array(4),
  least: 0,
};
/** 32 MJ a litre, 12 litres. */
const tank: FuelTank = { kind: 'fuel', map, heat: 32e9, capacity: 12 * 32e6 };
/** 4 kWh, 80 % full, reserve 10 %. */
const battery: Battery = {
  kind: 'battery',
  map,
  capacity: 14.4e6,
  charge: 0.8,
  reserve: 0.1,
  sag: null,
  acceptance: null,
  heating: null,
};
const run = (drawn: number | null, chargeAtEnd: number | null = null) => ({
  ledger: { drawn, chargeAtEnd } as Ledger,
});
const plain = (text: string): string => text.replaceAll('\u00a0', ' ');

test('64 MJ of petrol are 2 litres', () => {
  const use = energyUse(tank, run(64e6))!;
  expectClose(use.volume! * 1000, 2, 1e-12, 'litres');
  expect(plain(useText(use))).toBe('2.00 l');
  expect(useFigures(tank)).toEqual(['fuel_l_per_100km', 'range_km']);
});

test('of a battery what was drawn and what is left is told', () => {
  expect(plain(useText(energyUse(battery, run(800 * 3600, 0.6))!))).toBe('800 Wh, 60.0 % left');
  expect(plain(useText(energyUse(battery, run(-5 * 3600))!))).toBe('\u22125 Wh');
  expect(plain(useDefinitions(battery))).toMatch(/80 % of it at the start; the reserve is 10 %.*Range: /);
});

test('what does not exist is not told: no source, a run that failed, no capacity', () => {
  expect(energyUse(null, run(1))).toBeNull();
  expect(energyUse(tank, run(null))).toBeNull();
  expect(energyUse(tank, run(Number.NaN))).toBeNull();
  expect(useFigures({ ...battery, capacity: null })).toEqual(['drawn_wh_per_km']);
  expect(useDefinitions({ ...battery, capacity: null })).not.toContain('Range');
});
