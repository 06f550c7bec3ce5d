import { describe, expect, it, test } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { at, atTime, brakeTo, CANCEL, patientUnit, RESUME, rider } from './hold-scenes.ts';
import { forceOf, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const road = roadOver(stations(600, 50));
const automatic: Vehicle = {
  ...referenceMotorcycle,
  drive: {
    ...forceOf({ peakForce: 900 }),
    gearbox: {
      kind: 'automatic',
      throttle: Float64Array.of(0, 1),
      upSpeed: Float64Array.of(90, 90),
      downSpeed: Float64Array.of(1, 1),
      gap: 0,
      dwell: 1,
    },
  },
};
const clutch = at(10, { kind: 'clutch', for: 1 });
const nothing = { shows: 'nothing', for: 1 } as const;

describe('a plan of hold that cannot be run', () => {
  test.each<[string, string, Partial<LoopPlan>]>([
    ['supervisor.lowestSpeed', 'out-of-range', { supervisor: { ...patientUnit, lowestSpeed: -1 } }],
    ['supervisor.believable', 'out-of-range', { supervisor: { ...patientUnit, believable: 0 } }],
    ['supervisor.tooSlow.by', 'out-of-range', { supervisor: { ...patientUnit, tooSlow: { by: 0, for: 1 } } }],
    [
      'supervisor.tooFast.for',
      'out-of-range',
      { supervisor: { ...patientUnit, tooFast: { by: 1, for: -1 } } },
    ],
    ['supervisor.resumeRamp', 'out-of-range', { supervisor: { ...patientUnit, resumeRamp: Number.NaN } }],
    ['faults[0].for', 'out-of-range', { faults: [{ at: { time: 1 }, shows: 'nothing', for: 0 }] }],
    [
      'faults[1].at',
      'not-in-order',
      {
        faults: [
          { at: { time: 9 }, ...nothing },
          { at: { time: 8 }, ...nothing },
        ],
      },
    ],
    ['rider.acts[2].at', 'not-in-order', { rider: rider(at(20, CANCEL), atTime(1, RESUME), at(19, CANCEL)) }],
    ['rider.acts[0].at', 'out-of-range', { rider: rider(at(Number.NaN, CANCEL)) }],
    ['rider.acts[0].does.to', 'out-of-range', { rider: rider(at(20, brakeTo(0))) }],
    ['rider.acts[0].does.deceleration', 'out-of-range', { rider: rider(at(20, brakeTo(9, 0))) }],
    [
      'rider.acts[0].does.acceleration',
      'out-of-range',
      { rider: rider(at(20, { kind: 'ride', to: 9, acceleration: 0 })) },
    ],
    [
      'rider.acts[0].does.throttle',
      'out-of-range',
      { rider: rider(at(20, { kind: 'override', throttle: -1, for: 1 })) },
    ],
    [
      'rider.acts[0].does.taps',
      'out-of-range',
      { supervisor: patientUnit, rider: rider(at(20, { kind: 'tap', taps: 0.5 })) },
    ],
    ['rider.acts[0].does', 'needs-supervisor', { rider: rider(at(20, { kind: 'tap', taps: 1 })) }],
    ['rider.acts[0].does', 'no-clutch', { vehicle: automatic, rider: rider(clutch) }],
    ['rider.resumesAfter', 'out-of-range', { rider: { ...rider(), resumesAfter: -1 } }],
  ])('is refused at %s: %s', (key, code, more) => {
    let refused: unknown = null;
    try {
      runLoop(planOver(road, referenceMotorcycle, more));
    } catch (error) {
      refused = error;
    }
    expect(refused).toMatchObject({ problems: [{ code, place: { key } }] });
  });

  it('does not become one by places that are equal, or beyond the road', () => {
    const plan = planOver(road, referenceMotorcycle, {
      rider: rider(at(20, CANCEL), at(20, RESUME), at(9000, CANCEL)),
    });
    expect(runLoop(plan).holdEvents!.map(({ kind }) => kind)).toEqual(['ended', 'resumed']);
    expect(() => runLoop(planOver(road, referenceMotorcycle, { rider: rider(clutch) }))).not.toThrow();
  });
});

describe('events of hold', () => {
  it('are left out where nothing was asked of it', () => {
    expect(runLoop(planOver(road, referenceMotorcycle))).not.toHaveProperty('holdEvents');
    expect(runLoop(planOver(road, referenceMotorcycle, { supervisor: patientUnit })).holdEvents).toEqual([]);
  });

  it('tell of the rider’s shifts where there is no unit', () => {
    const drive: Vehicle['drive'] = {
      ...forceOf({ peakForce: 60 }),
      kind: 'engine',
      gears: [20, 14].map((ratio) => ({ ratio, inertia: 0 })),
      gearbox: { kind: 'clutch', open: 0.4, resume: 0.6 },
    };
    const result = runLoop(
      planOver(
        road,
        { ...referenceMotorcycle, drive },
        { rider: { brakesAbove: null, shifts: [{ distance: 200, gear: 1 }] } },
      ),
    );
    const [shift] = result.shifts;
    expect(result.holdEvents!.map(({ kind, cause, time }) => [kind, cause, time])).toEqual([
      ['ended', 'gear_change', shift!.time],
      ['resumed', 'gear_change', shift!.resumedAt],
    ]);
  });
});
