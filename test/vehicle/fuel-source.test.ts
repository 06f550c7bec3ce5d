import { expect, test } from 'vitest';
import { seededStream } from '../../src/numeric/random.ts';
import { InputError } from '../../src/problems/input-error.ts';
import type { FuelSpec } from '../../src/vehicle/engine-spec.ts';
import { fuelSource } from '../../src/vehicle/fuel-source.ts';
import { powerDrawn } from '../../src/vehicle/power-map.ts';
import { expectClose } from '../compare.ts';

const petrol = { heat: 43.2e6, density: 745, tank: 0.015 };
const willans: FuelSpec = { ...petrol, use: { kind: 'willans', friction: 6, slope: 0.4 } };

test('a Willans line draws brake power and friction over its slope', () => {
  const { map, heat, capacity } = fuelSource(willans, 0.9, 130);
  // By hand: cells 18 N m at 400 rad/s is 20 N m at the crankshaft: (20 + 6) 400 / 0.4 = 26 000 W.
  expectClose(powerDrawn(map, 400, 18), 26_000, 1e-9);
  // Driven with 4.5 N m at the cells, 4.05 N m reach the engine: (6 - 4.05) 400 / 0.4 = 1950 W.
  expectClose(powerDrawn(map, 400, -4.5), 1950, 1e-9);
  // Idling at 130 rad/s: 6 x 130 / 0.4 = 1950 W; 0.163 l/h at 32.184 MJ/l.
  expectClose(powerDrawn(map, 130, 0), 1950, 1e-9);
  // Driven by more than its friction it burns nothing.
  expect(powerDrawn(map, 400, -8)).toBe(0);
  // 745 kg/m3 of 43.2 MJ/kg: 32.184 MJ/l, 482.76 MJ in 15 l.
  expectClose([heat / 1e9, (capacity ?? 0) / 1e6], [32.184, 482.76], 1e-9);
});

test('a Willans line is exact everywhere, whatever the driveline loses', () => {
  const stream = seededStream(3);
  for (let k = 0; k < 300; k++) {
    const friction = 10 * stream.uniform();
    const slope = 0.2 + 0.3 * stream.uniform();
    const efficiency = 0.7 + 0.3 * stream.uniform();
    const brake = 80 * stream.uniform() - 20;
    const w = 900 * stream.uniform();
    const spec: FuelSpec = { ...petrol, use: { kind: 'willans', friction, slope } };
    const atCells = brake > 0 ? brake * efficiency : brake / efficiency;
    const power = powerDrawn(fuelSource(spec, efficiency, 0).map, w, atCells);
    expectClose(power, Math.max(0, ((brake + friction) * w) / slope), 1e-8);
  }
});

// 240, 300 and 360 g/kWh; the published efficiencies are 3600 / (b 43.2 MJ/kg) = 0.3472, 0.2778 and 0.2315.
const gPerKwh = (b: number): number => b / 1000 / 3.6e6;
const table: FuelSpec = {
  ...petrol,
  tank: null,
  use: {
    kind: 'bsfc',
    shaftSpeed: Float64Array.of(300, 600),
    torque: Float64Array.of(10, 40),
    consumption: Float64Array.of(360, 300, 300, 240).map(gPerKwh),
    idlePower: 2000,
  },
};

test('specific consumption holds at its nodes, and that of the ends beyond them', () => {
  const { map, capacity } = fuelSource(table, 0.95, 150);
  expect(capacity).toBeNull();
  const shareOfFuel = (w: number, brake: number) => (brake * w) / powerDrawn(map, w, 0.95 * brake);
  expectClose(shareOfFuel(600, 40), 0.3472, 5e-5, 'a node');
  expectClose(shareOfFuel(300, 40), 0.2778, 5e-5, 'a node');
  expectClose(shareOfFuel(300, 10), 0.2315, 5e-5, 'a node');
  expectClose(shareOfFuel(900, 40), 0.3472, 5e-5, 'above the last row');
  expectClose(shareOfFuel(120, 40), 0.2778, 5e-5, 'below the first row');
  expectClose(shareOfFuel(600, 130), 0.3472, 5e-5, 'beyond the last column');
  expectClose(shareOfFuel(2000, 130), 0.3472, 5e-5, 'beyond both');
});

test('without load an engine burns its idle consumption in proportion to its speed, and less when it is driven', () => {
  const { map } = fuelSource(table, 0.95, 150);
  expectClose([powerDrawn(map, 150, 0), powerDrawn(map, 600, 0)], [2000, 8000], 1e-9);
  // At 300 rad/s: 4000 W unloaded, 10 x 300 / 0.231481 = 12 960 W with 10 N m: 896 W for each N m at the crankshaft.
  expectClose(powerDrawn(map, 300, 0.95 * 5), 4000 + 5 * 896, 1e-6);
  expectClose(powerDrawn(map, 300, -2 / 0.95), 4000 - 2 * 896, 1e-6);
  expect(powerDrawn(map, 300, -10 / 0.95)).toBe(0);
  expectClose(powerDrawn(fuelSource(table, 0.95, 0).map, 900, 0), 2000, 1e-9);
});

test('numbers that make no fuel are refused with their key', () => {
  const keysOf = (make: () => unknown): (string | undefined)[] => {
    try {
      make();
    } catch (error) {
      if (error instanceof InputError) return error.problems.map(({ code, place }) => `${code} ${place.key}`);
    }
    return [];
  };
  expect(keysOf(() => fuelSource({ ...willans, density: 0 }, 1.1, 0))).toEqual([
    'out-of-range efficiency',
    'out-of-range fuel.density',
  ]);
  const slope = { ...petrol, use: { kind: 'willans', friction: 1, slope: 0 } } as const;
  expect(keysOf(() => fuelSource(slope, 1, 0))).toEqual(['out-of-range fuel.use.slope']);
  const bsfc = (change: object) => ({ ...petrol, use: { ...table.use, ...change } }) as FuelSpec;
  expect(keysOf(() => fuelSource(bsfc({ torque: Float64Array.of(10, 10) }), 1, 0))).toEqual([
    'not-increasing fuel.use.torque',
  ]);
  expect(keysOf(() => fuelSource(bsfc({ shaftSpeed: Float64Array.of(300) }), 1, 0))).toEqual([
    'wrong-length fuel.use.consumption',
  ]);
  expect(keysOf(() => fuelSource(bsfc({ torque: Float64Array.of(0, 40) }), 1, 0))).toEqual([
    'out-of-range fuel.use.torque',
  ]);
});
