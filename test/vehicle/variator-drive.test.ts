import { describe, expect, test } from 'vitest';
import { seededStream } from '../../src/numeric/random.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { beltRatio } from '../../src/vehicle/belt-law.ts';
import { throttleFor, wheelForce } from '../../src/vehicle/drive-law.ts';
import type { VariatorDriveSpec } from '../../src/vehicle/engine-spec.ts';
import { effectiveMass } from '../../src/vehicle/linearise.ts';
import { powerDrawn } from '../../src/vehicle/power-map.ts';
import { variatorDrive } from '../../src/vehicle/variator-drive.ts';
import { expectClose } from '../compare.ts';
import { vehicleOf } from '../study/vehicle-of.ts';

/**
 * Torque in proportion to the throttle, 20 N m up to 600 rad/s, falling to 14 N m at 900, with a drag of 2 N m; ratios
 * over a wheel of 0.25 m: 30 to 100 1/m.
 */
const scooter: VariatorDriveSpec = {
  torque: {
    kind: 'full_load',
    shaftSpeed: Float64Array.of(200, 600, 900),
    torque: Float64Array.of(20, 20, 14),
    shape: 0,
    shapeSpeed: null,
  },
  drag: { shaftSpeed: Float64Array.of(0), torque: Float64Array.of(2) },
  fuelCut: null,
  idle: 150,
  stall: 80,
  revLimit: null,
  limitBand: 1,
  inertia: 0.002,
  efficiency: 1,
  lag: 0.1,
  derate: 'none',
  fuel: { use: { kind: 'willans', friction: 3, slope: 0.4 }, heat: 43e6, density: 750, tank: null },
  leastRatio: 7.5,
  greatestRatio: 25,
  wheelRadius: 0.25,
  line: { throttle: Float64Array.of(0, 1), shaftSpeed: Float64Array.of(500, 800) },
  ratioLag: 0.4,
  clutch: { begins: 300, locked: 400 },
};

const drive = variatorDrive(scooter);
const force = (v: number, x: number, derate = 1): number => wheelForce(drive, 0, v, x, derate);

describe('between its ratio limits', () => {
  // By hand: line(0.5) = 650 rad/s, full torque there 20 - 6 x 50 / 300 = 19 N m, closed -2: at half throttle 8.5 N m.
  test('the fixed point is the shaft speed of the line', () => {
    for (const v of [7, 10, 15, 20]) {
      const ratio = beltRatio(drive.belt!, v, 0.5);
      expectClose(ratio * v, 650, 1e-9);
      expectClose(force(v, 0.5), (8.5 * 650) / v, 1e-9);
    }
  });

  test('force times speed is the power of the line at every speed', () => {
    // Full throttle: 800 rad/s, 20 - 6 x 200 / 300 = 16 N m, 12 800 W between 8 and 26.67 m/s.
    for (const v of [8, 12, 19, 26]) expectClose(force(v, 1) * v, 12_800, 1e-8);
    expectClose(drive.peakPower!, 12_800, 1e-8);
  });

  test('closed throttle holds back with the drag on the line', () => {
    // 500 rad/s, 2 N m: 1000 W; at the least ratio 30 x 2 = 60 N at 16.67 m/s.
    expectClose(force(10, 0), -100, 1e-9);
    expectClose(drive.closedThrottleForce, 60, 1e-9);
  });

  test('the throttle for a force is found through the belt', () => {
    const stream = seededStream(14);
    for (let k = 0; k < 100; k++) {
      const v = 2 + 30 * stream.uniform();
      const x = stream.uniform();
      const throttle = throttleFor(drive, 0, v, force(v, x), 1);
      expectClose(force(v, throttle!), force(v, x), 1e-8);
    }
  });
});

describe('at its ratio limits', () => {
  test('the greatest ratio holds below the speed at which the line asks for it', () => {
    // Full throttle at 6 m/s: 100 x 6 = 600 rad/s, 20 N m, 2000 N. The peak is that of 20 N m.
    expectClose(force(6, 1), 2000, 1e-9);
    expectClose(drive.peakForce, 2000, 1e-9);
    expectClose(drive.gears[0]!.ratio, 100, 1e-12);
    // 0.002 kg m2 x 100^2.
    expectClose(drive.gears[0]!.inertia, 20, 1e-12);
  });

  test('the least ratio holds above the speed at which the line asks for it', () => {
    // Full throttle at 28 m/s: 30 x 28 = 840 rad/s, 20 - 6 x 240 / 300 = 15.2 N m, 456 N.
    expectClose(force(28, 1), 456, 1e-9);
    // Closed throttle at 20 m/s: 600 rad/s, above the 500 of the line.
    expectClose(force(20, 0), -60, 1e-9);
  });
});

describe('below the locked speed of the clutch', () => {
  test('the torque of the locked speed is passed on down to standstill', () => {
    // 400 rad/s at 4 m/s: 20 N m, half throttle 9 N m.
    for (const v of [0, 1, 2.9, 3.5, 4]) {
      expectClose(force(v, 1), 2000, 1e-9);
    }
    expectClose(force(0, 0.5), 0.5 * 2000, 1e-9, 'open, without drag');
    expectClose(force(4, 0.5), 900, 1e-9, 'locked, with drag');
  });

  test('drag fades from the locked speed to where the clutch begins to close', () => {
    expectClose([force(4, 0), force(3.5, 0), force(3, 0), force(1, 0)], [-200, -100, 0, 0], 1e-9);
  });

  test('force has no step over speed', () => {
    for (const x of [0, 0.05, 0.3, 1])
      for (const v of [3, 4, 5, 8, 16.666666666666668, 26.666666666666668])
        expectClose(force(v - 1e-7, x), force(v + 1e-7, x), 1e-3);
  });

  test('it never stalls', () => expect(drive.stallSpeed).toBe(0));

  test('the engine burns what it burns at the locked speed', () => {
    // (20 + 3) 400 / 0.4 = 23 000 W slipping at 100 rad/s of the clutch as at 400; (20 + 3) 600 / 0.4 = 34 500 W locked.
    const { map } = drive.source!;
    expectClose([powerDrawn(map, 100, 20), powerDrawn(map, 400, 20)], [23_000, 23_000], 1e-8);
    expectClose([powerDrawn(map, 600, 20), powerDrawn(map, 1200, 20)], [34_500, 69_000], 1e-8);
    expect(powerDrawn(map, 600, -4)).toBe(0);
  });

  test('the engine idles where the clutch is open and passes on nothing', () => {
    // 3 N m of friction at 150 rad/s by a slope of 0.4: 1125 W; at the locked speed of 400 rad/s they were 3000 W.
    const { map } = drive.source!;
    expectClose(
      [powerDrawn(map, 0, 0), powerDrawn(map, 100, 0), powerDrawn(map, 300, 0)],
      [1125, 1125, 1125],
      1e-9,
    );
    // At the locked speed 2 N m of drag are in the torque: (3 - 2) 400 / 0.4, on a straight line from idling.
    expectClose([powerDrawn(map, 400, 0), powerDrawn(map, 400, -2)], [3000, 1000], 1e-9);
    expectClose(powerDrawn(map, 350, 0), (1125 + 3000) / 2, 1e-9);
  });

  test('nothing turns along with the vehicle', () => {
    // 0.002 kg m2 x 100^2 = 20 kg from the locked speed, 4 m/s at the greatest ratio.
    const vehicle = { ...vehicleOf({ mass: 200, rotatingMass: 8 }), drive };
    const masses = [0, 2, 3.99, 4.01, 5].map((v) => effectiveMass(vehicle, v, 1));
    expectClose(masses, [208, 208, 208, 228, 228], 1e-9);
  });
});

test('altitude takes its share of full throttle and nothing of closed throttle, slipping or not', () => {
  for (const v of [1, 3.4, 6, 12, 30]) {
    expectClose(force(v, 1, 0.8), 0.8 * force(v, 1), 1e-9);
    expectClose(force(v, 0, 0.8), force(v, 0), 1e-9);
  }
});

test('a parabola keeps its form through the clutch', () => {
  const parabola: VariatorDriveSpec = {
    ...scooter,
    torque: { kind: 'parabola', peak: 18, peakSpeed: 650, falloff: 0.6 },
    drag: null,
  };
  const curved = variatorDrive(parabola);
  const torque = (w: number): number => 18 * (1 - 0.6 * (w / 650 - 1) ** 2);
  for (const v of [0.5, 3, 4, 4.7, 6, 7.9]) {
    const expected = 100 * torque(Math.max(100 * v, 400));
    expectClose(wheelForce(curved, 0, v, 1, 1), expected, 1e-8);
    expectClose(wheelForce(curved, 0, v, 1, 0.85), 0.85 * expected, 1e-8);
  }
});

test('a fuel cut is a step at its throttle that the same drive without it does not have', () => {
  const cut = variatorDrive({
    ...scooter,
    fuelCut: { above: 420, blend: 40, throttle: 0.02, torque: 1.5 },
  });
  // On the line of closed throttle, 500 rad/s: 3.5 N m in the place of 2, 175 N at 10 m/s in the place of 100.
  expectClose(wheelForce(cut, 0, 10, 0, 1), -175, 1e-9);
  expectClose(wheelForce(cut.withoutFuelCut!, 0, 10, 0, 1), -100, 1e-9);
  expect(cut.fuelCutBelow).toBe(0.02);
  expectClose(wheelForce(cut, 0, 10, 0.02, 1), force(10, 0.02), 1e-9);
  // Open, the clutch passes on none of it.
  expectClose(wheelForce(cut, 0, 2, 0, 1), 0, 1e-12);
});

test('a torque map and a full-load curve with a drag that say the same make the same drive', () => {
  const speeds = [0, 200, 600, 900];
  const rows = [20, 20, 20, 14].flatMap((full) => [-2, 0.5 * (full - 2), full]);
  const mapped = variatorDrive({
    ...scooter,
    drag: null,
    torque: {
      kind: 'map',
      shaftSpeed: Float64Array.from(speeds),
      throttle: Float64Array.of(0, 0.5, 1),
      torque: Float64Array.from(rows),
    },
  });
  const stream = seededStream(77);
  for (let k = 0; k < 300; k++) {
    const v = 35 * stream.uniform();
    const x = stream.uniform();
    // Below the locked speed no torque at all is a corner between the nodes of the throttle.
    if (v < 4) continue;
    expectClose(wheelForce(mapped, 0, v, x, 0.9), force(v, x, 0.9), 1e-8);
  }
});

test('numbers that make no variator are refused with their key', () => {
  const keysOf = (change: Partial<VariatorDriveSpec>): string[] => {
    try {
      variatorDrive({ ...scooter, ...change });
    } catch (error) {
      if (error instanceof InputError) return error.problems.map(({ code, place }) => `${code} ${place.key}`);
    }
    return [];
  };
  expect(keysOf({ leastRatio: 26 })).toEqual(['out-of-range greatestRatio']);
  expect(keysOf({ clutch: { begins: 140, locked: 130 } })).toEqual([
    'out-of-range clutch.begins',
    'out-of-range clutch.locked',
  ]);
  const low = { throttle: Float64Array.of(0, 1), shaftSpeed: Float64Array.of(390, 800) };
  expect(keysOf({ line: low })).toEqual(['out-of-range line.shaftSpeed']);
  expect(keysOf({ revLimit: 700 })).toEqual(['out-of-range line.shaftSpeed']);
});
