import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import {
  aeroForce,
  gradeForce,
  requiredForce,
  resistanceSlopes,
  rollingForce,
} from '../../src/vehicle/resistance.ts';
import { dragArea, roadLoadOfCoefficients, roadLoadOfRegulation } from '../../src/vehicle/road-load.ts';
import { expectClose } from '../compare.ts';
import { referenceMotorcycle, still } from './vehicles.ts';

// 40 CFR 86.529-98, figure F98-9: inertia [kg], A [N], C [N/(km/h)2], force at 65 km/h [N], 70 -> 60 km/h [s].
// The row of 160 kg prints 4.10 s, which does not follow from its own numbers, and is left out.
const CFR = [
  [100, 0, 0.0224, 94.8, 2.95],
  [110, 0.82, 0.0227, 96.8, 3.18],
  [130, 2.57, 0.0233, 100.9, 3.6],
  [150, 4.32, 0.0238, 104.9, 3.99],
  [200, 8.69, 0.0252, 115.1, 4.85],
  [240, 12.18, 0.0263, 123.2, 5.43],
  [260, 13.93, 0.0268, 127.3, 5.7],
  [300, 17.43, 0.0279, 135.4, 6.18],
  [340, 20.92, 0.029, 143.6, 6.6],
] as const;

const regulated = (mass: number, a: number, c: number) =>
  referenceMotorcycle({
    mass,
    roadLoad: roadLoadOfRegulation({ f0: a, f1: 0, f2: c * 3.6 * 3.6, testMass: mass, airDensity: 1.189 }),
  });
const regulationAir = { ...still, airDensity: 1.189 };

describe('road load of a regulation', () => {
  test.each(CFR)('gives the published force and coasting time at %i kg', (mass, a, c, force65, seconds) => {
    const vehicle = regulated(mass, a, c);
    expectClose(requiredForce(vehicle, 65 / 3.6, regulationAir), force65, 0.25);
    // Coasting time as the integral of m dv / F, Simpson's rule.
    const n = 200;
    const from = 60 / 3.6;
    const width = 10 / 3.6 / n;
    let time = 0;
    for (let i = 0; i <= n; i++) {
      const weight = i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2;
      time += (weight * width * mass) / requiredForce(vehicle, from + i * width, regulationAir) / 3;
    }
    expectClose(time, seconds, 0.015);
  });

  // Recomputed from the same table by hand: 200 kg.
  test('needs the power that the table means', () => {
    const vehicle = regulated(200, 8.69, 0.0252);
    expectClose(requiredForce(vehicle, 90 / 3.6, regulationAir), 212.8, 0.05);
    expectClose((requiredForce(vehicle, 110 / 3.6, regulationAir) * 110) / 3600, 9.58, 0.005);
    expectClose(
      (requiredForce(vehicle, 110 / 3.6, { ...regulationAir, grade: 0.05 }) * 110) / 3600,
      12.58,
      0.01,
    );
  });

  test('scales its rolling part with the load and its air part with the density', () => {
    const vehicle = regulated(200, 8.69, 0.0252);
    const speed = 70 / 3.6;
    expectClose(rollingForce({ ...vehicle, mass: 300 }, speed, 0), 8.69 * 1.5, 1e-12);
    expectClose(aeroForce(vehicle.roadLoad, 1.0065, speed, 0, 0), 0.0252 * 4900 * (1.0065 / 1.189), 1e-10);
    const linear = roadLoadOfRegulation({ f0: 0, f1: 0.36, f2: 0, testMass: 200, airDensity: 1.2 });
    expectClose(rollingForce({ mass: 100, roadLoad: linear }, 20, 0), 3.6, 1e-12);
  });

  test('refuses what cannot be', () => {
    const spec = { f0: 1, f1: 0, f2: 0.3, testMass: 200, airDensity: 1.2 };
    expect(() => roadLoadOfRegulation({ ...spec, testMass: 0 })).toThrow(InputError);
    expect(() => roadLoadOfRegulation({ ...spec, f2: Number.NaN })).toThrow(/f2.*NaN/s);
    expect(() => roadLoadOfCoefficients({ cda: -0.1, c0: -1 })).toThrow(/cda[\s\S]*c0/);
  });
});

describe('force of the air', () => {
  test('with wind from 30 degrees right of the nose matches the worked example', () => {
    // 25 m/s, wind 10 m/s from 60 degrees off the nose: F / F0 = 1.4988, yaw 16.10 degrees.
    const roadLoad = roadLoadOfCoefficients({ cda: 0.5, c0: 0 });
    const headwind = 10 * Math.cos(Math.PI / 3);
    const crosswind = 10 * Math.sin(Math.PI / 3);
    const ratio = aeroForce(roadLoad, 1.2, 25, headwind, crosswind) / aeroForce(roadLoad, 1.2, 25, 0, 0);
    expectClose(ratio, 1.4988, 5e-5);
    const growing = roadLoadOfCoefficients({ cda: 0.5, c0: 0, yawGain: 1.5 });
    const yaw = (16.1021 * Math.PI) / 180;
    const more =
      aeroForce(growing, 1.2, 25, headwind, crosswind) / aeroForce(roadLoad, 1.2, 25, headwind, crosswind);
    expectClose(more, 1 + 1.5 * yaw * yaw, 1e-6);
  });

  test('of a cyclist matches the worked example of Martin 1998', () => {
    // J. Appl. Biomech. 14 (1998) 276-291: 8.36228 m/s, wind 2.94 m/s 30 degrees off, grade 0.003, 90 kg. The powers were
    // recomputed from its formula, with g = 9.81 there.
    const roadLoad = roadLoadOfCoefficients({ cda: 0.2565 + 0.0044, c0: 0.0032 });
    const speed = 471.8 / 56.42;
    expectClose(aeroForce(roadLoad, 1.2234, speed, 2.94 * Math.cos(Math.PI / 6), 0) * speed, 158.803, 1e-3);
    expectClose(rollingForce({ mass: 90, roadLoad }, speed, 0.003) * speed * (9.81 / 9.80665), 23.626, 1e-3);
    expectClose(gradeForce(90, 0.003) * speed * (9.81 / 9.80665), 22.149, 1e-3);
  });

  test('pushes when the tail wind is faster than the vehicle, and is even in the crosswind', () => {
    const roadLoad = roadLoadOfCoefficients({ cda: 0.6, c0: 0, yawGain: 1 });
    expect(aeroForce(roadLoad, 1.2, 5, -12, 0)).toBeLessThan(0);
    expect(aeroForce(roadLoad, 1.2, 12, -12, 0)).toBe(0);
    expectClose(aeroForce(roadLoad, 1.2, 20, 2, -6), aeroForce(roadLoad, 1.2, 20, 2, 6), 0);
  });

  test('takes a table of drag areas in straight lines and holds its ends', () => {
    const yawTable = { yaw: Float64Array.of(0, 0.2, 0.5), cda: Float64Array.of(0.5, 0.56, 0.7) };
    const roadLoad = roadLoadOfCoefficients({ cda: 0.5, c0: 0, yawTable });
    expectClose(
      [0, 0.1, -0.1, 0.2, 0.35, 0.5, 3].map((yaw) => dragArea(roadLoad, yaw)),
      [0.5, 0.53, 0.53, 0.56, 0.63, 0.7, 0.7],
      1e-15,
    );
  });

  test('of the formula grows no further beyond 0.44 rad', () => {
    const roadLoad = roadLoadOfCoefficients({ cda: 0.5, c0: 0, yawGain: 1 });
    expectClose(dragArea(roadLoad, 0.44), 0.5 * 1.1936, 1e-15);
    expect(dragArea(roadLoad, 1)).toBe(dragArea(roadLoad, 0.44));
  });
});

describe('weight along the slope', () => {
  // 250 kg, m g sin(theta) for grades in percent, computed from the definition and printed to two decimals.
  test.each([
    [1, 24.515],
    [3, 73.517],
    [6, 146.84],
    [12, 292.1],
    [20, 480.81],
  ])('is that of the table at %i %%', (percent, force) => {
    expectClose(gradeForce(250, percent / 100), force, 0.006);
    expectClose(gradeForce(250, -percent / 100), -force, 0.006);
  });
});

test('slopes of the required force agree with central differences', () => {
  let seed = 12345;
  const random = (from: number, to: number) => {
    seed = (seed * 1103515245 + 12345) % 2147483648;
    return from + ((to - from) * seed) / 2147483648;
  };
  for (let i = 0; i < 200; i++) {
    const vehicle = referenceMotorcycle({
      roadLoad: { cda: 0.6, yawGain: random(0, 2), yawTable: null, c0: 0.012, c1: 1e-5, c2: 2e-6 },
    });
    const at = { ...still, grade: random(-0.15, 0.15), headwind: random(-8, 8), crosswind: random(-9, 9) };
    const speed = random(12, 35);
    const h = 1e-4;
    const slope = (key: 'grade' | 'headwind' | 'crosswind') =>
      (requiredForce(vehicle, speed, { ...at, [key]: at[key] + h }) -
        requiredForce(vehicle, speed, { ...at, [key]: at[key] - h })) /
      (2 * h);
    const slopes = resistanceSlopes(vehicle, speed, at);
    const bySpeed = (requiredForce(vehicle, speed + h, at) - requiredForce(vehicle, speed - h, at)) / (2 * h);
    // At the cap of the yaw formula the difference spans a corner.
    if (Math.abs(Math.abs(Math.atan2(at.crosswind, speed + at.headwind)) - 0.44) < 1e-4) continue;
    expectClose(slopes.bySpeed, bySpeed, 2e-6);
    expectClose(slopes.byHeadwind, slope('headwind'), 2e-6);
    expectClose(slopes.byCrosswind, slope('crosswind'), 2e-6);
    expectClose(slopes.byGrade, slope('grade'), 1e-4);
  }
});
