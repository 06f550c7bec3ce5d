import { describe, expect, test } from 'vitest';
import { electricDrive } from '../../src/vehicle/electric-drive.ts';
import { linearise } from '../../src/vehicle/linearise.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';
import { referenceMotorcycle, still, textbookCar } from './vehicles.ts';

interface Point {
  readonly v_m_s: number;
  readonly grade: number;
  readonly u_e: number;
  readonly feasible: boolean;
  readonly a_1_s: number;
  readonly b_m_s2_per_throttle: number;
  readonly slope_gain_m_s2_per_rad: number;
  readonly headwind_gain_m_s2_per_m_s: number;
}
const reference = readReference<{ operating_points: Point[] }>('vehicle/motorcycle_linear.json');
const car = readReference<{ published_point: { recomputed: { u_e: number; a: number; b: number } } }>(
  'vehicle/astrom_murray_linear.json',
).published_point.recomputed;

describe('linearise', () => {
  test.each(reference.operating_points)('agrees with the reference at $v_m_s m/s, grade $grade', (point) => {
    const at = { ...still, grade: point.grade, headwind: 5 };
    const model = linearise(referenceMotorcycle(), { speed: point.v_m_s, surroundings: at })!;
    expectClose(model.throttle, point.u_e, 2e-14);
    expectClose(model.a, -point.a_1_s, 1e-15);
    expectClose(model.b, point.b_m_s2_per_throttle, 1e-14);
    // The reference is per radian: d tan(theta) = d theta / cos^2(theta).
    expectClose(-model.gradeGain * (1 + point.grade ** 2), point.slope_gain_m_s2_per_rad, 1e-13);
    expectClose(-model.headwindGain, point.headwind_gain_m_s2_per_m_s, 1e-15);
    expect(model.feasible).toBe(point.feasible);
  });

  test('gives the published model of the textbook car', () => {
    // Feedback Systems prints u_e = 0.1687, a = -0.0101, b = 1.32.
    const model = linearise(textbookCar(), { speed: 20, surroundings: { ...still, airDensity: 1.3 } })!;
    expectClose(model.throttle, car.u_e, 1e-14);
    expectClose(model.a, -car.a, 1e-15);
    expectClose(model.b, car.b, 1e-14);
  });

  test('knows turning masses, and a point that the drive cannot hold', () => {
    const light = linearise(referenceMotorcycle(), { speed: 25, surroundings: still })!;
    const heavy = linearise(referenceMotorcycle({ rotatingMass: 26 }), { speed: 25, surroundings: still })!;
    expectClose(heavy.b * 1.1, light.b, 1e-14);
    expectClose(heavy.effectiveMass, 286, 0);
    const steep = linearise(referenceMotorcycle(), { speed: 25, surroundings: { ...still, grade: 0.4 } })!;
    expect(steep.feasible).toBe(false);
    expect(steep.throttle).toBeGreaterThan(1);
  });

  test('has no model at standstill, nor where no throttle has an effect', () => {
    expect(linearise(referenceMotorcycle(), { speed: 0, surroundings: still })).toBeNull();
    const dead = { ...referenceMotorcycle().drive, cells: new Float64Array(6) };
    expect(linearise(referenceMotorcycle({ drive: dead }), { speed: 20, surroundings: still })).toBeNull();
  });

  test('takes the regenerating half of an electric drive downhill', () => {
    const drive = electricDrive({
      peakForce: 400,
      peakPower: null,
      closedThrottleForce: 0,
      regenerationForce: 250,
      regenerationPower: null,
      fadeSpeed: 0,
      throttleMin: -1,
      lag: 0,
      efficiency: null,
    });
    const model = linearise(referenceMotorcycle({ drive }), {
      speed: 20,
      surroundings: { ...still, grade: -0.12 },
    })!;
    expectClose(model.b, 250 / 260, 1e-14);
    expect(model.throttle).toBeLessThan(0);
    expect(model.feasible).toBe(true);
  });
});
