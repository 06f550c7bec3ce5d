import { describe, expect, it } from 'vitest';
import { demandOf } from '../../src/study/demand.ts';
import { demandShare } from '../../src/study/demand-share.ts';
import { nominalCourse, setSpeedAt } from '../../src/study/hold-course.ts';
import { IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import { expectClose } from '../compare.ts';
import { roadOf } from './road-of.ts';
import { HOLD_60, vehicleOf } from './vehicle-of.ts';

const G = 9.80665; // m/s2, standard gravity (CGPM 1901)

describe('demand along the road', () => {
  it('is 100 % at the published sustainable grades', () => {
    // 280 kg, CdA 0.6, Crr 0.015, rho 1.2, 15 kW times 0.92 at the wheel: 80 km/h 14.81 %, 100 km/h 6.49 %;
    // 8 kW: 80 km/h 4.09 %; 35 kW: 100 km/h 32.2 %. Computed outside of the project with g = 9.81 m/s2,
    // which is worth 0.006 % of grade, and printed to 0.01 % (0.1 %).
    const rows = [
      [15, 80, 14.81, 0.012],
      [15, 100, 6.49, 0.012],
      [8, 80, 4.09, 0.012],
      [35, 100, 32.2, 0.06],
    ] as const;
    for (const [kw, kmh, pct, tolerance] of rows) {
      const vehicle = vehicleOf({
        mass: 280,
        cda: 0.6,
        c0: 0.015,
        drive: { peakForce: 5000, peakPower: kw * 1000 * 0.92 },
      });
      const shareAt = (grade: number): number => {
        const road = roadOf([{ length: 100, grade }]);
        return demandOf(road, vehicle, { ...HOLD_60, setSpeed: kmh / 3.6, startSpeed: kmh / 3.6 }).share[0]!;
      };
      expect(shareAt((pct - tolerance) / 100), `${kw} kW at ${kmh} km/h`).toBeLessThan(1);
      expect(shareAt((pct + tolerance) / 100), `${kw} kW at ${kmh} km/h`).toBeGreaterThan(1);
    }
  });

  it('says the sustained speed where the force is short, and the runaway speed and brake power where it is too much', () => {
    const vehicle = vehicleOf({
      mass: 200,
      cda: 0.6,
      c0: 0,
      drive: { peakForce: 200, closedThrottleForce: 30 },
    });
    const road = roadOf([
      { length: 500, grade: 0 },
      { length: 500, grade: 0.09 },
      { length: 500, grade: -0.12 },
    ]);
    const demand = demandOf(road, vehicle, { ...HOLD_60, setSpeed: 20, startSpeed: 20 });
    const at = (x: number): number => road.distance.findIndex((d) => d >= x);
    const sinUp = 0.09 / Math.sqrt(1 + 0.09 * 0.09);
    const sinDown = 0.12 / Math.sqrt(1 + 0.12 * 0.12);
    const air = 0.5 * 1.2 * 0.6 * 400;
    expectClose(demand.share[at(200)]!, air / 200, 1e-12);
    expectClose(demand.sustained[at(200)]!, 20, 0);
    expectClose(demand.required[at(700)]!, air + 200 * G * sinUp, 1e-9);
    expectClose(demand.share[at(700)]!, (air + 200 * G * sinUp) / 200, 1e-12);
    expectClose(demand.sustained[at(700)]!, Math.sqrt((200 - 200 * G * sinUp) / (0.6 * 0.6)), 1e-6);
    const push = 200 * G * sinDown - air;
    expectClose(demand.share[at(1200)]!, -push / 30, 1e-12);
    expectClose(demand.brakePower[at(1200)]!, (push - 30) * 20, 1e-9);
    expectClose(demand.runaway[at(1200)]!, Math.sqrt((200 * G * sinDown - 30) / (0.6 * 0.6)), 1e-6);
    expectClose(demand.brakePower[at(200)]!, 0, 0);
  });

  it('counts as holdable what is in range, once an ideal hold has its speed back and has had 10 s', () => {
    const vehicle = vehicleOf({ cda: 0, c0: 0, mass: 200, rotatingMass: 0, drive: { peakForce: 100 } });
    const road = roadOf([
      { length: 1000, grade: 0 },
      { length: 100, grade: 0.08 },
      { length: 2000, grade: 0 },
    ]);
    const demand = demandOf(road, vehicle, { ...HOLD_60, setSpeed: 20, startSpeed: 20 });
    // By hand: v^2 falls by 2 (m g sin - 100) s / m on the climb, and grows by 2 * 100 / 200 a metre after it; within
    // half a km/h of 20 m/s when v^2 is back at (20 - 1 / 7.2)^2.
    const slope = Math.sqrt(1 + 0.08 * 0.08);
    const lost = (2 * ((200 * G * 0.08) / slope - 100) * 100 * slope) / 200;
    const near = (20 - 1 / 7.2) * (20 - 1 / 7.2);
    const free = 1100 + (near - (400 - lost)) + 10 * 20;
    road.distance.forEach((x, i) => {
      if (x < 999) expect(demand.holdable[i], `at ${x} m`).toBe(1);
      else if (x > 1001 && x < free - 10) expect(demand.holdable[i], `at ${x} m`).toBe(0);
      else if (x > free + 10) expect(demand.holdable[i], `at ${x} m`).toBe(1);
    });
    expectClose(demand.holdableShare, (1000 + 3100 - free) / 3100, 20 / 3100);
  });

  it('grants a change of set speed its ramp and 10 s', () => {
    const road = roadOf([{ length: 5000, grade: 0 }]);
    const course = nominalCourse(
      road,
      {
        setSpeed: 20,
        setSpeedIs: 'true_speed',
        startSpeed: 20,
        changes: [
          { at: { distance: 1000 }, setSpeed: 16, ramp: 0.8 },
          { at: { time: 50 + 2000 / 16 }, setSpeed: 18, ramp: null },
        ],
      },
      vehicleOf(),
    );
    // 20 m/s to 1000 m takes 50 s, then 16 m/s: the second change stands at 3000 m.
    expectClose(
      course.changes.map((change) => change.at),
      [1000, 3000],
      1e-9,
    );
    expectClose(course.settling[0]!.to, 1000 + (4 / 0.8 + 10) * 20, 1e-9);
    expectClose(course.settling[1]!.to, 3000 + (2 / 0.5 + 10) * 18, 1e-9);
    const speedAt = (x: number): number => setSpeedAt(road, course)[road.distance.findIndex((d) => d >= x)]!;
    expect([speedAt(990), speedAt(1000), speedAt(2990), speedAt(3000)]).toEqual([20, 16, 16, 18]);
  });

  it('turns an indicated set speed into the true one', () => {
    const road = roadOf([{ length: 100, grade: 0 }]);
    const vehicle = { sensor: { ...IDEAL_SENSOR, filter: 0, delay: 0, scaleError: 0.02 } };
    const course = nominalCourse(road, { ...HOLD_60, setSpeed: 20.4, setSpeedIs: 'indicated' }, vehicle);
    expectClose(setSpeedAt(road, course)[0]!, 20, 1e-12);
  });
});

describe('the share of the range', () => {
  it('is signed, 1 at the limits and bounded where there is no range', () => {
    expect(demandShare(50, -40, 200)).toBe(0.25);
    expect(demandShare(200, -40, 200)).toBe(1);
    expect(demandShare(-40, -40, 200)).toBe(-1);
    expect(demandShare(-80, -40, 200)).toBe(-2);
    expect(demandShare(-1, 0, 200)).toBe(-9.99);
    expect(demandShare(10, -40, 0)).toBe(9.99);
    expect(demandShare(1e9, -40, 200)).toBe(9.99);
    expect(demandShare(5, 20, 200)).toBe(-9.99);
    expect(demandShare(-30, -80, -50)).toBe(9.99);
    expect(demandShare(0, -40, 0)).toBe(0);
  });
});
