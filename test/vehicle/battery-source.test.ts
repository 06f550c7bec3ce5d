import { describe, expect, test } from 'vitest';
import { seededStream } from '../../src/numeric/random.ts';
import { InputError } from '../../src/problems/input-error.ts';
import type { BatterySpec } from '../../src/vehicle/battery-spec.ts';
import { type ElectricDriveSpec, electricDrive } from '../../src/vehicle/electric-drive.ts';
import type { Battery } from '../../src/vehicle/energy-source.ts';
import { powerDrawn } from '../../src/vehicle/power-map.ts';
import { expectClose } from '../compare.ts';

const scooter: ElectricDriveSpec = {
  peakForce: 400,
  peakPower: 3840,
  closedThrottleForce: 10,
  regenerationForce: 120,
  regenerationPower: 1500,
  fadeSpeed: 2,
  throttleMin: -1,
  lag: 0.05,
  efficiency: { drive: 0.8, regeneration: 0.6 },
};

const battery: BatterySpec = {
  capacity: 7.2e6,
  charge: 1,
  reserve: 0.1,
  cells: {
    openVoltage: { charge: Float64Array.of(0, 0.2, 1), voltage: Float64Array.of(42, 46, 52) },
    resistance: 0.03,
    nominalVoltage: 48,
  },
  acceptance: { charge: Float64Array.of(0.9, 1), share: Float64Array.of(1, 0) },
};

const sourceOf = (change: Partial<ElectricDriveSpec>): Battery => {
  const { source } = electricDrive({ ...scooter, ...change });
  if (source?.kind !== 'battery') throw new Error('no battery');
  return source;
};

describe('a battery behind a resistance', () => {
  test('leaves the share of force that its terminal voltage gives at peak power', () => {
    // By hand: 3840 W at the wheel are 4800 W at the terminals, 100 A at 48 V, a drop of 3 V.
    // 20 % charge: 46 - 3 = 43 V, 43 / 48 = 0.895833; empty: 39 / 48 = 0.8125; full: 49 V, nothing is lost,
    // and the sag begins at 51 V open, 5/6 of the way from 20 % to full: 86.6667 %.
    const { sag } = sourceOf({ battery });
    expectClose(sag!.charge, [0, 0.2, 0.8666667, 1], 1e-7);
    expectClose(sag!.share, [0.8125, 0.8958333, 1, 1], 1e-7);
  });

  test('obeys V = Voc - I R and P = V I where it sags', () => {
    const stream = seededStream(8);
    for (let k = 0; k < 100; k++) {
      const open = 42 + 10 * stream.uniform();
      const resistance = 0.06 * stream.uniform();
      const cells = {
        openVoltage: { charge: Float64Array.of(0), voltage: Float64Array.of(open) },
        resistance,
        nominalVoltage: 48,
      };
      const share = sourceOf({ battery: { ...battery, cells } }).sag!.share[0]!;
      if (share === 1) continue;
      const voltage = share * 48;
      const current = (share * 4800) / voltage;
      expectClose(voltage, open - current * resistance, 1e-10);
    }
  });

  test('loses I2R on the way out of its cells and on the way in', () => {
    const { map } = sourceOf({ battery });
    // By hand: 192 N at 20 m/s are 4800 W at the terminals; 52 I - 0.03 I2 = 4800 gives 97.829 A and 5087.1 W.
    expectClose(powerDrawn(map, 20, 192), 5087.1, 3);
    // -60 N at 20 m/s, 10 N of them drag, send 600 W; 52 I - 0.03 I2 = -600 gives -11.4627 A: 596.06 W arrive.
    expectClose(powerDrawn(map, 20, -60), -596.06, 0.3);
    expectClose(powerDrawn(map, 20, 0), 0, 1e-9);
  });

  test('is tabulated to a thousandth of peak power within the envelope', () => {
    const { map } = sourceOf({ battery });
    const stream = seededStream(21);
    for (let k = 0; k < 2000; k++) {
      const v = 45 * stream.uniform();
      const most = Math.min(400, 3840 / v);
      const force = (most + 130) * stream.uniform() - 130;
      const terminals = force > 0 ? (force * v) / 0.8 : Math.min(0, force + 10) * v * 0.6;
      if (force * v < -1900) continue;
      // The smaller root of 52 I - 0.03 I^2 = P.
      const current = (52 - Math.sqrt(52 * 52 - 4 * 0.03 * terminals)) / (2 * 0.03);
      expectClose(powerDrawn(map, v, force), 52 * current, 3.84);
    }
  });

  test('without a resistance or voltages gives what its terminals give', () => {
    const plain = sourceOf({ battery: { ...battery, cells: null } });
    expect(plain.sag).toBeNull();
    expectClose(powerDrawn(plain.map, 20, 192), 4800, 1e-9);
    const ideal = { ...battery.cells!, resistance: 0 };
    const stiff = sourceOf({ battery: { ...battery, cells: ideal } });
    expectClose(powerDrawn(stiff.map, 20, 192), 4800, 1e-9);
    expectClose(stiff.sag!.share, [0.875, 0.9583333, 1, 1], 1e-7);
  });

  test('keeps its capacity, charge, reserve and what it takes near full', () => {
    const source = sourceOf({ battery: { ...battery, charge: 0.7 } });
    expect([source.capacity, source.charge, source.reserve]).toEqual([7.2e6, 0.7, 0.1]);
    expect(source.acceptance).toEqual(battery.acceptance);
    const none = sourceOf({});
    expect([none.capacity, none.sag, none.acceptance, none.heating]).toEqual([null, null, null, null]);
  });
});

test('the base speed is peak power over peak force', () => {
  // 3840 W / 400 N = 9.6 m/s.
  expect([...electricDrive(scooter).speedEdges]).toContain(9.6);
});

describe('drag at closed throttle', () => {
  // By hand: the work that a battery can get back is that of what holds back beyond the drag.
  test('charges no battery, and what holds back beyond it does by the efficiency', () => {
    const { map } = sourceOf({});
    expectClose(powerDrawn(map, 20, -10), 0, 1e-12, 'drag alone');
    expectClose(powerDrawn(map, 20, -4), 0, 1e-12, 'part of the drag');
    expectClose(powerDrawn(map, 20, -130), -120 * 20 * 0.6, 1e-9, 'full regeneration');
    expectClose(powerDrawn(map, 1, -5), 0, 1e-12, 'drag that fades');
  });

  test('charges none by a loss map that knows nothing of it either', () => {
    const speed = Float64Array.of(0, 30);
    for (const force of [Float64Array.of(0, 300), Float64Array.of(-300, 0, 300), Float64Array.of(20, 300)]) {
      const loss = new Float64Array(2 * force.length);
      const { map } = sourceOf({ efficiency: null, lossMap: { speed, force, loss } });
      expectClose(powerDrawn(map, 20, -10), 0, 1e-9, 'drag alone');
      expectClose(powerDrawn(map, 20, -4), 0, 1e-9, 'part of the drag');
      expectClose(powerDrawn(map, 20, -130), -120 * 20, 1e-9, 'beyond the drag');
      expectClose(powerDrawn(map, 20, 100), 2000, 1e-9, 'driving');
    }
  });
});

describe('heat', () => {
  const heating = { continuousPower: 2304, peakPowerTime: 60, onset: 0.7 };

  test('reaches 1 just at the stated time of peak power from cold', () => {
    // By hand: 2304 / 3840 = 0.6; -60 / ln(1 - 0.36) = 60 / 0.4462871 = 134.4426 s.
    const { time, least, continuousPower, onset } = sourceOf({ heating }).heating!;
    expectClose([time, least, continuousPower, onset], [134.4426, 0.6, 2304, 0.7], 1e-4);
    // The differential equation itself, by small midpoint steps.
    let h = 0;
    const rate = (x: number) => ((3840 / 2304) ** 2 - x) / time;
    for (let k = 0; k < 60_000; k++) h += 0.001 * rate(h + 0.0005 * rate(h));
    expectClose(h, 1, 1e-6);
  });

  test('leaves just continuous power where it stays at 1', () => {
    const { least } = sourceOf({ heating }).heating!;
    expectClose(least * 3840, 2304, 1e-9);
  });

  test('is none where peak power lasts for ever', () => {
    expect(sourceOf({ heating: { ...heating, continuousPower: 3840 } }).heating).toBeNull();
  });
});

describe('a loss map', () => {
  const losses = {
    speed: Float64Array.of(0, 10, 30),
    force: Float64Array.of(0, 100, 300),
    loss: Float64Array.of(20, 60, 400, 40, 90, 450, 120, 200, 700),
  };

  test('adds its loss to the wheel power, bilinear in its cells', () => {
    const { map } = sourceOf({ efficiency: null, lossMap: losses });
    expectClose(powerDrawn(map, 10, 300), 3000 + 450, 1e-9);
    // Half way over speed, a quarter over force: (90 + 0.25 x 360 + 200 + 0.25 x 500) / 2 = 252.5 W.
    expectClose(powerDrawn(map, 20, 150), 3000 + 252.5, 1e-9);
    expectClose(powerDrawn(map, 0, 100), 60, 1e-9, 'holding force at standstill');
  });

  test('that begins at no force is mirrored for regeneration', () => {
    const { map } = sourceOf({ efficiency: null, lossMap: losses, closedThrottleForce: 0 });
    expectClose(powerDrawn(map, 10, -100), -1000 + 90, 1e-9);
    expectClose(powerDrawn(map, 20, -150), -3000 + 252.5, 1e-9);
  });

  test('of its own for regeneration is taken as it is', () => {
    const own = { speed: losses.speed, force: Float64Array.of(-100, 0, 300), loss: losses.loss };
    const { map } = sourceOf({ efficiency: null, lossMap: own, closedThrottleForce: 0 });
    expectClose(powerDrawn(map, 10, -100), -1000 + 40, 1e-9);
  });

  test('of a constant share of the power agrees with the constant efficiency', () => {
    const speed = Float64Array.of(0, 15, 40);
    const force = Float64Array.of(-200, -10, 0, 500);
    const loss = Float64Array.from(
      [...speed].flatMap((v) =>
        [...force].map((f) => (f > 0 ? f * v * 0.25 : f < 0 ? (10 + (-f - 10) * 0.4) * v : 0)),
      ),
    );
    const table = sourceOf({ efficiency: null, lossMap: { speed, force, loss }, battery }).map;
    const formula = sourceOf({ battery }).map;
    const stream = seededStream(4);
    for (let k = 0; k < 300; k++) {
      const v = 30 * stream.uniform();
      const f = 500 * stream.uniform() - 130;
      if (f * v > 3840 || f * v < -1900) continue;
      expectClose(powerDrawn(table, v, f), powerDrawn(formula, v, f), 5);
    }
  });
});

test('numbers that make no battery are refused with their key', () => {
  const keysOf = (change: Partial<ElectricDriveSpec>): string[] => {
    try {
      electricDrive({ ...scooter, ...change });
    } catch (error) {
      if (error instanceof InputError) return error.problems.map(({ code, place }) => `${code} ${place.key}`);
    }
    return [];
  };
  expect(keysOf({ efficiency: null, battery })).toEqual(['missing-losses battery']);
  expect(keysOf({ battery: { ...battery, charge: 1.2, capacity: 0 } })).toEqual([
    'out-of-range battery.capacity',
    'out-of-range battery.charge',
  ]);
  const heating = { continuousPower: 2000, peakPowerTime: 60, onset: 0.7 };
  expect(keysOf({ peakPower: null, heating })).toEqual(['out-of-range peakPower']);
  expect(keysOf({ efficiency: null, heating })).toEqual(['missing-losses heating']);
  const one = { speed: Float64Array.of(0), force: Float64Array.of(0, 1), loss: Float64Array.of(1, 1) };
  expect(keysOf({ lossMap: one })).toEqual(['out-of-range lossMap.speed.length']);
  const cells = {
    ...battery.cells!,
    openVoltage: { charge: Float64Array.of(0, 0), voltage: Float64Array.of(40) },
  };
  expect(keysOf({ battery: { ...battery, cells } })).toEqual([
    'not-increasing battery.cells.openVoltage.charge',
    'wrong-length battery.cells.openVoltage.voltage',
  ]);
});
