import { describe, expect, it } from 'vitest';
import { runLoop } from '../../src/loop/run-loop.ts';
import { figureRow } from '../../src/study/figure-table.ts';
import { courseOfRun, nominalCourse } from '../../src/study/hold-course.ts';
import { measureFigure } from '../../src/study/measure-figure.ts';
import { expectClose } from '../compare.ts';
import { gearedVehicle } from './geared.ts';
import { recordOf, resultOf } from './record-of.ts';
import { roadOf } from './road-of.ts';
import { STIFF, study } from './scene.ts';
import { HOLD_60, planOf, vehicleOf } from './vehicle-of.ts';

const ROAD = roadOf([{ length: 1000, grade: 0 }]);
/** Ten bins of 100 m at 10 m/s. */
const RESULT = resultOf(
  recordOf(
    100,
    Array.from({ length: 10 }, () => ({ time: 10, setSpeed: 20 })),
  ),
);

describe('the course of a run', () => {
  const changes = [{ at: { time: 45 }, setSpeed: 16, ramp: null }];
  const hold = { ...HOLD_60, setSpeed: 20, startSpeed: 20, changes };
  const courseUnder = (ramp: number | null, own: number | null = null) =>
    courseOfRun({
      plan: planOf(
        ROAD,
        vehicleOf(),
        { ...STIFF, ramp },
        {
          hold: { ...hold, changes: changes.map((change) => ({ ...change, ramp: own })) },
        },
      ),
      result: RESULT,
    });

  it('has a change at a time where the run was then, and grants from the beginning of that bin', () => {
    const { changes: made, settling } = courseUnder(null);
    expectClose(made[0]!.at, 450, 1e-9);
    // 4 m/s at 0.5 m/s2 and 10 s, at 20 m/s.
    expectClose(settling[0]!.from, 400, 1e-9);
    expectClose(settling[0]!.to, 450 + 18 * 20, 1e-9);
  });

  it("grants the change's own ramp, else the controller's", () => {
    expectClose(courseUnder(0.2).settling[0]!.to, 450 + 30 * 20, 1e-9);
    expectClose(courseUnder(0.2, 1).settling[0]!.to, 450 + 14 * 20, 1e-9);
  });

  it('has no place for a change that the run did not live to see', () => {
    const late = planOf(ROAD, vehicleOf(), STIFF, {
      hold: { ...hold, changes: [{ at: { time: 200 }, setSpeed: 16, ramp: null }] },
    });
    const { changes: made, settling } = courseOfRun({ plan: late, result: RESULT });
    expect(made[0]!.at).toBe(Number.POSITIVE_INFINITY);
    expect(settling.some(({ from }) => from <= 1000)).toBe(false);
  });
});

describe('the course around a shift of the rider', () => {
  const gearbox = { kind: 'clutch', open: 0.5, resume: 1.5 } as const;
  const rider = { brakesAbove: null, shifts: [{ distance: 400, gear: 2 }] };

  it('grants the time of the gearbox and 10 s, by the road and by the run', () => {
    const speed = HOLD_60.setSpeed;
    const vehicle = gearedVehicle({ gearbox });
    const nominal = nominalCourse(ROAD, HOLD_60, vehicle, rider.shifts);
    expectClose(nominal.settling[0]!.from, 400, 1e-9);
    expectClose(nominal.settling[0]!.to, 400 + 12 * speed, 1e-9);
    expect(nominal.following).toEqual([]);
    const plan = planOf(ROAD, vehicle, STIFF, { rider });
    const run = courseOfRun({ plan, result: runLoop(plan) });
    expectClose(run.settling[0]!.from, 400, 0.34);
    // The speed falls a little while the clutch is open.
    expectClose(run.settling[0]!.to, 400 + 12 * speed, 2);
    expect(run.following).toEqual([]);
  });

  it('is nothing where the gearbox shifts by itself or not at all', () => {
    expect(nominalCourse(ROAD, HOLD_60, gearedVehicle(), rider.shifts).settling).toEqual([]);
  });
});

describe('a change of set speed at a time, behind a climb that costs time', () => {
  const road = roadOf([
    { length: 500, grade: 0 },
    { length: 2000, grade: 0.09 },
    { length: 4000, grade: 0 },
  ]);
  // At the set speed 260 s are 4333 m; the climb keeps every candidate well behind that.
  const changes = [{ at: { time: 260 }, setSpeed: 45 / 3.6, ramp: null }];
  const plan = planOf(road, vehicleOf(), STIFF, { hold: { ...HOLD_60, changes } });
  const context = study({ pi: plan });

  it('is no hill and no error where the run makes it', () => {
    const [made] = courseOfRun(context.replayed[0]!).changes;
    expect(made!.at).toBeGreaterThan(2900);
    expect(made!.at).toBeLessThan(4100);
    expect(context.hills.map(({ kind }) => kind)).toEqual(['climb']);
    const high = measureFigure(
      figureRow('worst_high_kmh')!,
      context.replayed[0]!,
      { road, ...context },
      'holdable',
      null,
    );
    // The step of 15 km/h itself would be the worst.
    expect(high.value as number).toBeLessThan(2);
  });
});
