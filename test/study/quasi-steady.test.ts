import { describe, expect, it } from 'vitest';
import { quasiSteadySpeeds } from '../../src/study/quasi-steady.ts';
import { expectClose } from '../compare.ts';
import { roadOf } from './road-of.ts';
import { vehicleOf } from './vehicle-of.ts';

const G = 9.80665; // m/s2, standard gravity (CGPM 1901)

const sin = (grade: number): number => grade / Math.sqrt(1 + grade * grade);
const cos = (grade: number): number => 1 / Math.sqrt(1 + grade * grade);

describe('the hand formula', () => {
  it('is v^2 = v0^2 - 2 D s / m_e for a constant deficit', () => {
    // No air: the deficit on a grade is m g (sin + c0 cos) - F_peak, the same at every speed.
    const vehicle = vehicleOf({ mass: 200, rotatingMass: 8, cda: 0, c0: 0.015, drive: { peakForce: 150 } });
    const grade = 0.09;
    const road = roadOf([{ length: 400, grade }]);
    const deficit = 200 * G * (sin(grade) + 0.015 * cos(grade)) - 150;
    const speeds = quasiSteadySpeeds(
      { road, vehicle, setSpeed: new Float64Array(road.size).fill(20), brakesAbove: null, throttle: null },
      0,
      road.size - 1,
      20,
    );
    const expected = Array.from(road.station, (s) => Math.sqrt(400 - (2 * deficit * s) / 208));
    expectClose(speeds, expected, 1e-12 * 400);
  });

  it('trades 110 km/h for 105 km/h in a height of 4.228 m without any force', () => {
    // (v1^2 - v2^2) / 2 g, computed outside of the project with g = 9.81 m/s2 (worth 0.0017 km/h here).
    // No rotating mass, no drag, no rolling.
    const vehicle = vehicleOf({
      mass: 250,
      rotatingMass: 0,
      cda: 0,
      c0: 0,
      drive: { peakForce: 1e-9, closedThrottleForce: 0 },
    });
    const grade = 0.05;
    const slope = 4.228 / grade;
    const road = roadOf([{ length: slope, grade }]);
    const speeds = quasiSteadySpeeds(
      {
        road,
        vehicle,
        setSpeed: new Float64Array(road.size).fill(110 / 3.6),
        brakesAbove: null,
        throttle: null,
      },
      0,
      road.size - 1,
      110 / 3.6,
    );
    expectClose(speeds.at(-1)! * 3.6, 105, 0.002);
  });

  it('ends at the sustained speed on a long climb', () => {
    // m g sin(theta) + 1/2 rho CdA v^2 = F_peak, no rolling: v = sqrt(2 (F - m g sin) / (rho CdA)).
    const vehicle = vehicleOf({ mass: 200, cda: 0.6, c0: 0, drive: { peakForce: 200 } });
    const grade = 0.07;
    const road = roadOf([{ length: 8000, grade }]);
    const speeds = quasiSteadySpeeds(
      { road, vehicle, setSpeed: new Float64Array(road.size).fill(25), brakesAbove: null, throttle: null },
      0,
      road.size - 1,
      25,
    );
    expectClose(speeds.at(-1)!, Math.sqrt((2 * (200 - 200 * G * sin(grade))) / (1.2 * 0.6)), 1e-6);
  });

  it('holds the set speed while the force is in range, and comes back to it after a climb', () => {
    const vehicle = vehicleOf({ cda: 0, c0: 0, mass: 200, rotatingMass: 0, drive: { peakForce: 100 } });
    const grade = 0.08;
    const road = roadOf([
      { length: 500, grade: 0.04 },
      { length: 100, grade },
      { length: 1000, grade: 0 },
    ]);
    const speeds = quasiSteadySpeeds(
      { road, vehicle, setSpeed: new Float64Array(road.size).fill(20), brakesAbove: null, throttle: null },
      0,
      road.size - 1,
      20,
    );
    const at = (x: number): number => speeds[road.distance.findIndex((d) => d >= x - 1e-9)]!;
    expect(at(500)).toBe(20);
    const lost = (2 * (200 * G * sin(grade) - 100) * 100 * Math.sqrt(1 + grade * grade)) / 200;
    expectClose(at(600), Math.sqrt(400 - lost), 1e-9);
    // On the level the full 100 N go into speed: back after lost / (2 * 100 / 200) metres.
    const back = 600 + lost;
    expectClose(at(650), Math.sqrt(400 - lost + (2 * 100 * 50) / 200), 1e-9);
    expect(at(back + 20)).toBe(20);
    expect(at(back - 20)).toBeLessThan(20);
  });

  it('runs away down a descent beyond closed throttle, and no further than the brake allows', () => {
    const vehicle = vehicleOf({
      cda: 0,
      c0: 0,
      mass: 200,
      rotatingMass: 0,
      drive: { closedThrottleForce: 40 },
    });
    const grade = -0.06;
    const road = roadOf([{ length: 300, grade }]);
    const setSpeed = new Float64Array(road.size).fill(15);
    const run = (brakesAbove: number | null): Float64Array =>
      quasiSteadySpeeds({ road, vehicle, setSpeed, brakesAbove, throttle: null }, 0, road.size - 1, 15);
    const push = -200 * G * sin(grade) - 40;
    expectClose(run(null).at(-1)!, Math.sqrt(225 + (2 * push * road.station.at(-1)!) / 200), 1e-9);
    expectClose(run(2).at(-1)!, 17, 1e-12);
  });

  it('stays at 0 once it has come to a stop', () => {
    const vehicle = vehicleOf({ cda: 0, c0: 0, mass: 200, rotatingMass: 0, drive: { peakForce: 10 } });
    const road = roadOf([{ length: 500, grade: 0.15 }]);
    const speeds = quasiSteadySpeeds(
      { road, vehicle, setSpeed: new Float64Array(road.size).fill(15), brakesAbove: null, throttle: null },
      0,
      road.size - 1,
      15,
    );
    expect(speeds.at(-1)).toBe(0);
  });

  it('follows a locked throttle by its own force', () => {
    const vehicle = vehicleOf({
      cda: 0,
      c0: 0,
      mass: 200,
      rotatingMass: 0,
      drive: { peakForce: 260, closedThrottleForce: 40 },
    });
    // At throttle u the force is -40 + 300 u: 80 N at 0.4, which is balance on sin(theta) = 80 / (m g).
    const grade = 0.05;
    const road = roadOf([{ length: 200, grade }]);
    const speeds = quasiSteadySpeeds(
      { road, vehicle, setSpeed: new Float64Array(road.size).fill(15), brakesAbove: null, throttle: 0.4 },
      0,
      road.size - 1,
      15,
    );
    const deficit = 200 * G * sin(grade) - 80;
    expectClose(speeds.at(-1)!, Math.sqrt(225 - (2 * deficit * road.station.at(-1)!) / 200), 1e-9);
  });
});
