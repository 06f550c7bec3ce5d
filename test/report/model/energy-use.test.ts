import { expect, test } from 'vitest';
import type { Ledger } from '../../../src/loop/result.ts';
import {
  energyUse,
  toLitrePer100Km,
  useColumns,
  useDefinitions,
} from '../../../src/report/model/energy-use.ts';
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
const run = (drawn: number | null, endDistance: number, chargeAtEnd: number | null = null) => ({
  endDistance,
  ledger: { drawn, chargeAtEnd } as Ledger,
});

test('64 MJ of petrol over 50 km are 2 litres, 4 l/100 km, and 12 litres last 300 km', () => {
  const use = energyUse(tank, run(64e6, 50_000))!;
  expectClose(use.volume! * 1000, 2, 1e-12, 'litres');
  expectClose(toLitrePer100Km(use.volumePerDistance!), 4, 1e-12, 'l/100 km');
  expectClose(use.range! / 1000, 300, 1e-9, 'km');
  expect(useColumns(tank).map(({ head, text }) => `${head}: ${text(use)}`)).toEqual([
    'fuel / l: 2.00',
    'fuel / (l/100 km): 4.00',
    'range / km: 300',
  ]);
});

test('a battery of 4 kWh lasts from its charge to its reserve: 70 % of it at 40 Wh/km are 70 km', () => {
  const use = energyUse(battery, run(800 * 3600, 20_000, 0.6))!;
  expectClose(use.range! / 1000, 70, 1e-9, 'km');
  expect(use.charge).toEqual({ start: 0.8, end: 0.6 });
  expect(useColumns(battery).map(({ text }) => text(use))).toEqual(['800', '60.0', '70.0']);
  expect(useDefinitions(battery)).toMatch(/from 80.% at the start.*reserve of 10.%/);
});

test('what does not exist is not told: no source, no capacity, more put back than drawn, no way driven', () => {
  expect(energyUse(null, run(1, 1))).toBeNull();
  expect(energyUse(tank, run(null, 1))).toBeNull();
  expect(energyUse(tank, run(Number.NaN, 1))).toBeNull();
  expect(energyUse({ ...tank, capacity: null }, run(1e6, 1000))!.range).toBeNull();
  expect(energyUse(battery, run(-5, 1000, 0.81))!.range).toBeNull();
  expect(energyUse(tank, run(0, 0))).toMatchObject({ volume: 0, volumePerDistance: null, range: null });
  expect(useColumns({ ...tank, capacity: null }).map(({ head }) => head)).toEqual([
    'fuel / l',
    'fuel / (l/100 km)',
  ]);
  expect(useColumns({ ...battery, capacity: null })).toHaveLength(1);
});
