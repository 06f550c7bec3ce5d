import { describe, expect, test } from 'vitest';
import { forceRange, wheelForce } from '../../src/vehicle/drive-law.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import { equilibriumSpeeds, settledSpeed } from '../../src/vehicle/equilibrium.ts';
import { linearise } from '../../src/vehicle/linearise.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';
import { textbookEngine } from './engines.ts';
import { still, textbookCar } from './vehicles.ts';

interface Point {
  readonly v_m_s: number;
  readonly gear: number;
  readonly slope_deg: number;
  readonly u_e: number;
  readonly feasible: boolean;
  readonly a_1_s: number;
  readonly b_m_s2: number;
  readonly bg_m_s2_rad: number;
}
const reference = readReference<{ operating_points: Point[] }>('vehicle/astrom_murray_linear.json');

const GRAVITY = 9.80665;

/** The car in a gear; rolling resistance such that m g cos(theta) c0 is the book's m 9.8 0.01, whatever the slope. */
function carIn(gear: number, theta: number): Vehicle {
  const car = textbookCar();
  return {
    ...car,
    roadLoad: { ...car.roadLoad, c0: (0.01 * 9.8) / (GRAVITY * Math.cos(theta)) },
    drive: engineDrive({ ...textbookEngine, gear: gear - 1 }),
  };
}

/** Slope on which our gravity pulls as the book's g = 9.8 does on its own. */
const slopeOf = (degrees: number): number => Math.asin((9.8 * Math.sin((degrees * Math.PI) / 180)) / GRAVITY);

describe('the textbook car with its engine and gears (Feedback Systems, section 4.1)', () => {
  test.each(reference.operating_points)(
    'has the linear model of the reference at $v_m_s m/s, gear $gear, $slope_deg degrees',
    (point) => {
      const theta = slopeOf(point.slope_deg);
      const surroundings = { ...still, airDensity: 1.3, grade: Math.tan(theta) };
      const model = linearise(carIn(point.gear, theta), { speed: point.v_m_s, surroundings })!;
      expectClose(model.throttle, point.u_e, 1e-13);
      expectClose(model.a, -point.a_1_s, 1e-14);
      expectClose(model.b, point.b_m_s2, 1e-13);
      // d/d theta of g sin(theta) in the book; ours is per tan(theta) and has the rolling part's own slope in it.
      const cosine = Math.cos(theta);
      const rolling = GRAVITY * carIn(point.gear, theta).roadLoad.c0 * Math.sin(theta);
      const perRadian = -model.gradeGain / cosine ** 2 + rolling;
      expectClose(
        (perRadian * (Math.cos((point.slope_deg * Math.PI) / 180) * 9.8)) / (GRAVITY * cosine),
        point.bg_m_s2_rad,
        1e-12,
      );
      expect(model.feasible).toBe(point.feasible);
    },
  );

  // Recomputed by an independent program, in degrees and per cent of the book's slope.
  test.each([
    [3, 9.599, 16.91],
    [4, 6.43, 11.27],
    [5, 4.884, 8.55],
  ])('climbs at 20 m/s in gear %i up to %d degrees', (gear, degrees, percent) => {
    const drive = engineDrive({ ...textbookEngine, gear: gear - 1 });
    const left =
      forceRange(drive, gear - 1, 20, 1).greatest - 0.5 * 1.3 * 0.32 * 2.4 * 400 - 1600 * 9.8 * 0.01;
    const theta = Math.asin(left / (1600 * 9.8));
    expectClose((theta * 180) / Math.PI, degrees, 6e-4);
    expectClose(100 * Math.tan(theta), percent, 6e-3);
  });

  test.each([
    [0, 20],
    [0.1, 18.183],
    [0.2, 16.006],
    [0.3, 13.09],
    [-0.2, 23.026],
    [-0.5, 26.71],
    [-1, 31.654],
  ])('with its throttle locked settles on %d degrees at %d m/s', (degrees, speed) => {
    const at = { ...still, airDensity: 1.3, grade: Math.tan(slopeOf(degrees)) };
    expectClose(settledSpeed(carIn(4, slopeOf(degrees)), at, 0.168749, 20), speed, 2e-3);
  });

  test('with its throttle locked has no balance beyond 0.384 degrees', () => {
    const balances = (degrees: number) => {
      const at = { ...still, airDensity: 1.3, grade: Math.tan(slopeOf(degrees)) };
      return equilibriumSpeeds(carIn(4, slopeOf(degrees)), at, 0.168749).map(({ stable }) => stable);
    };
    expect(balances(0.3835)).toEqual([false, true]);
    expect(balances(0.3845)).toEqual([]);
  });

  test('is the law of the book in every gear, and nothing beyond its zero', () => {
    const drive = engineDrive(textbookEngine);
    [40, 25, 16, 12, 10].forEach((alpha, gear) => {
      for (const [v, x] of [
        [3, 0.2],
        [11, 1],
        [20, 0.5],
        [26, 0.9],
      ] as const) {
        const torque = 190 * (1 - 0.4 * ((alpha * v) / 420 - 1) ** 2);
        expectClose(wheelForce(drive, gear, v, x, 1), alpha * x * Math.max(0, torque), 1e-9);
      }
    });
    // 420 (1 + 1 / sqrt(0.4)) = 1084.08 rad/s.
    expect(wheelForce(drive, 0, 1084.1 / 40, 1, 1)).toBe(0);
    expectClose(drive.peakForce, 12 * 190, 1e-9);
    // w (1 - 0.4 (w / 420 - 1)^2) is greatest where 0.6 + 1.6 z - 1.2 z^2 = 0 with z = w / 420: z = (1.6 + sqrt(5.44)) / 2.4.
    const z = (1.6 + Math.sqrt(5.44)) / 2.4;
    expectClose(drive.peakPower!, 420 * z * 190 * (1 - 0.4 * (z - 1) ** 2), 1e-6);
  });
});
