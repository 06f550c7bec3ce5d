import { describe, expect, it } from 'vitest';
import { replay } from '../../src/loop/replay.ts';
import { valueAt } from '../../src/road/lookup.ts';
import { cutRoad, windowPlan } from '../../src/study/road-window.ts';
import { expectClose } from '../compare.ts';
import { gearedVehicle } from './geared.ts';
import { roadOf } from './road-of.ts';
import { STIFF } from './scene.ts';
import { HOLD_60, planOf, vehicleOf } from './vehicle-of.ts';

const ROAD = roadOf([
  { length: 1000, grade: 0.01, headwind: 1 },
  { length: 600, grade: 0.05, headwind: 4 },
  { length: 1000, grade: -0.02 },
]);

describe('a road cut out of another', () => {
  it('has the same grade, wind and height everywhere, counted from its own start', () => {
    const from = 733;
    const part = cutRoad(ROAD, from, 1911);
    expect(part.distance[0]).toBe(0);
    expect(part.station[0]).toBe(0);
    expectClose(part.distance.at(-1)!, 1911 - from, 1e-9);
    for (const x of [0, 100.5, 266, 300, 866.5, 1000, 1177]) {
      expectClose(valueAt(part, 'grade', x), valueAt(ROAD, 'grade', from + x), 1e-12, `grade at ${x}`);
      expectClose(valueAt(part, 'headwind', x), valueAt(ROAD, 'headwind', from + x), 1e-12);
      expectClose(valueAt(part, 'elevation', x), valueAt(ROAD, 'elevation', from + x), 1e-9);
      expectClose(
        valueAt(part, 'station', x),
        valueAt(ROAD, 'station', from + x) - valueAt(ROAD, 'station', from),
        1e-9,
      );
    }
  });

  it('takes the side behind a step where it begins on one, and the side before where it ends on one', () => {
    const part = cutRoad(ROAD, 1000, 1600);
    expect(part.grade[0]).toBe(0.05);
    expect(part.grade.at(-1)).toBe(0.05);
    expectClose(part.distance.at(-1)!, 600, 1e-9);
  });

  it('is the whole road between its ends', () => {
    const whole = cutRoad(ROAD, 0, 2600);
    expect(Array.from(whole.grade)).toEqual(Array.from(ROAD.grade));
    expectClose(whole.station, ROAD.station, 1e-9);
  });
});

describe('a plan over a window', () => {
  it('rides the window as a settled start on the whole road does', () => {
    const plan = planOf(ROAD, vehicleOf(), STIFF);
    const whole = replay(plan, { settledAt: 600 }, 2000).series;
    const part = windowPlan(plan, 600, 2000);
    const cut = replay(part, { settledAt: 0 }, 1400).series;
    expectClose(
      Float64Array.from({ length: 200 }, (_, k) => cut.speed[20 * k]!),
      Float64Array.from({ length: 200 }, (_, k) => whole.speed[20 * k]!),
      1e-8,
    );
  });

  it('starts at the set speed that holds there and keeps the changes inside', () => {
    const hold = {
      ...HOLD_60,
      changes: [
        { at: { distance: 300 }, setSpeed: 14, ramp: 0.5 },
        { at: { distance: 900 }, setSpeed: 12, ramp: null },
        { at: { distance: 2400 }, setSpeed: 16, ramp: null },
      ],
    };
    const part = windowPlan(planOf(ROAD, vehicleOf(), STIFF, { hold }), 500, 2000);
    expect(part.hold.setSpeed).toBe(14);
    expect(part.hold.startSpeed).toBe(14);
    expect(part.hold.changes).toEqual([{ at: { distance: 400 }, setSpeed: 12, ramp: null }]);
  });
});

describe('a plan over a window with gears', () => {
  const shifts = [
    { distance: 300, gear: 2 },
    { distance: 900, gear: 1 },
    { distance: 2400, gear: 3 },
  ];
  const plan = planOf(ROAD, gearedVehicle({ gearbox: { kind: 'clutch', open: 0.5, resume: 1 } }), STIFF, {
    rider: { brakesAbove: null, shifts },
  });

  it('starts in the gear that the rider has there and keeps the shifts inside', () => {
    const part = windowPlan(plan, 500, 2000);
    expect(part.vehicle.drive.gear).toBe(2);
    expect(part.rider.shifts).toEqual([{ distance: 400, gear: 1 }]);
    // 300 N in the third gear, told of the gear that is engaged.
    expectClose(part.vehicle.drive.peakForce, 300, 1e-9);
  });

  it('rides them as the whole road does', () => {
    const whole = replay(plan, { settledAt: 600 }, 1900).series;
    const cut = replay(windowPlan(plan, 600, 2000), { settledAt: 0 }, 1300).series;
    expect(Math.max(...cut.gear.subarray(0, cut.size))).toBe(2);
    expect(Math.min(...cut.gear.subarray(0, cut.size))).toBe(1);
    expectClose(
      Float64Array.from({ length: 180 }, (_, k) => cut.speed[20 * k]!),
      Float64Array.from({ length: 180 }, (_, k) => whole.speed[20 * k]!),
      1e-8,
    );
  });
});
