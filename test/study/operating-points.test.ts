import { describe, expect, test } from 'vitest';
import { runLoop } from '../../src/loop/run-loop.ts';
import { demandOf } from '../../src/study/demand.ts';
import { operatingPoints } from '../../src/study/operating-points.ts';
import { visitsOfDemand, visitsOfRecord } from '../../src/study/visited-points.ts';
import { expectClose } from '../compare.ts';
import { gearedVehicle } from './geared.ts';
import { roadOf } from './road-of.ts';
import { HOLD_60, piOf, planOf, vehicleOf } from './vehicle-of.ts';

const AIR = { grade: 0, headwind: 0, crosswind: 0, airDensity: 1.2, airTemperature: 288.15 };

describe('the operating points of a route', () => {
  // Level, a climb, a climb that is too much for 260 N at 60 km/h, a descent that needs a brake, level again.
  const road = roadOf([
    { length: 3000, grade: 0 },
    { length: 1000, grade: 0.03 },
    { length: 500, grade: 0.14 },
    { length: 500, grade: -0.12 },
    { length: 1000, grade: 0, headwind: 4 },
  ]);
  const vehicle = vehicleOf();
  const demand = demandOf(road, vehicle, HOLD_60);
  const visits = visitsOfDemand(road, demand);
  const { points, notHeld } = operatingPoints({ rides: [{ vehicle, load: null, visits }], grid: null });

  test('are few, lie at places that are really there, and their weights are shares of the time', () => {
    expect(points.length).toBe(3);
    for (const point of points) {
      expectClose(point.speed, 60 / 3.6, 1e-9);
      expect(point.from).toBe('route');
    }
    const at = (grade: number, headwind: number) =>
      points.find((p) => p.surroundings.grade === grade && p.surroundings.headwind === headwind);
    // By length, since the speed is one: 3000, 1000 and 1000 of 5000 m that can be held.
    expectClose(at(0, 0)!.weight, 0.6, 0.01);
    expectClose(at(0.03, 0)!.weight, 0.2, 0.01);
    expectClose(at(0, 4)!.weight, 0.2, 0.01);
    expectClose(
      points.reduce((sum, { weight }) => sum + weight, 0),
      1,
      1e-12,
    );
  });

  test('hold the throttle that the forces ask for', () => {
    // (m g crr + rho / 2 CdA v^2 + closed-throttle drag) over the range of the force, on the level.
    const force = 215 * 9.80665 * 0.014 + 0.5 * 1.2 * 0.58 * (60 / 3.6) ** 2;
    const level = points.find((p) => p.surroundings.grade === 0 && p.surroundings.headwind === 0)!;
    expectClose(level.throttle, (force + 40) / 300, 1e-3);
  });

  test('are not where no steady throttle holds the speed: that is told by its reason and share', () => {
    expect(notHeld.map(({ reason }) => reason).sort()).toEqual(['less_than_least', 'too_much_asked']);
    for (const { share, from } of notHeld) {
      expectClose(share, 500 / 6000, 0.01);
      expect(from).toBe('route');
    }
  });

  test('come from the record of a run too, at the speeds and in the gears that were driven', () => {
    const geared = gearedVehicle({ gearbox: { kind: 'clutch', open: 0.3, resume: 1 } });
    const plan = planOf(road, geared, piOf({ kp: 1, ki: 0.2 }), {
      rider: { brakesAbove: 1, shifts: [{ distance: 3000, gear: 1 }] },
    });
    const { bins } = runLoop(plan);
    const found = operatingPoints({
      rides: [{ vehicle: geared, load: 'two up', visits: visitsOfRecord(road, bins) }],
      grid: null,
    }).points;
    expect([...new Set(found.map(({ gear }) => gear))]).toEqual([1, 3]);
    expect(found.every(({ load }) => load === 'two up')).toBe(true);
    const inThird = found.filter(({ gear }) => gear === 3).reduce((sum, { weight }) => sum + weight, 0);
    expect(inThird).toBeGreaterThan(0.45);
    expect(inThird).toBeLessThan(0.65);
  });
});

test('a rare place far from all others is a point of its own, however little time it takes', () => {
  const road = roadOf([
    { length: 20_000, grade: 0 },
    { length: 60, grade: 0.06 },
    { length: 20_000, grade: 0.002 },
  ]);
  const vehicle = vehicleOf();
  const visits = visitsOfDemand(road, demandOf(road, vehicle, HOLD_60));
  const { points } = operatingPoints({ rides: [{ vehicle, load: null, visits }], grid: null });
  const steep = points.find(({ surroundings }) => surroundings.grade === 0.06)!;
  expect(steep.weight).toBeLessThan(0.003);
  expect(points.length).toBeLessThanOrEqual(4);
});

test('a grid has every combination, held or not with its reason', () => {
  const vehicle = gearedVehicle();
  const heavy = gearedVehicle({}, { mass: 330 });
  const { points, notHeld } = operatingPoints({
    rides: [],
    grid: {
      speeds: [10 / 3.6, 40 / 3.6, 60 / 3.6],
      grades: [0, 0.12],
      headwinds: [-3, 0],
      gears: [0, 3],
      loads: [
        { load: null, vehicle },
        { load: 'two up', vehicle: heavy },
      ],
      air: AIR,
    },
  });
  expect(points.length + notHeld.length).toBe(3 * 2 * 2 * 2 * 2);
  expect(points.every(({ weight, from }) => weight === 0 && from === 'grid')).toBe(true);
  // Stall at 60 rad/s: 8 1/m turn at 22 rad/s at 10 km/h, 20 1/m at 56 rad/s.
  expect(notHeld.filter(({ reason }) => reason === 'gear_cannot_turn').length).toBe(2 * 2 * 2 * 2);
  // 12 % of 330 kg ask for 386 N and more; fourth gear has 240 N.
  expect(
    notHeld.some(
      ({ load, gear, surroundings, reason }) =>
        load === 'two up' && gear === 3 && surroundings.grade === 0.12 && reason === 'too_much_asked',
    ),
  ).toBe(true);
});

test('no ride and no grid give no points', () => {
  expect(operatingPoints({ rides: [], grid: null })).toEqual({ points: [], notHeld: [] });
});
