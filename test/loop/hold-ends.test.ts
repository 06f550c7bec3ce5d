// What the run does to hold: rules of the unit on the measured speed, faults of the sensor, the rider's own resume.

import { describe, expect, it, test } from 'vitest';
import type { LoopPlan, SensorFault } from '../../src/loop/plan.ts';
import { LIMIT_OFF } from '../../src/loop/plan.ts';
import { IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { at, patientUnit, RESUME, ride, rider, SAMPLE } from './hold-scenes.ts';
import { forceOf, laggedVehicle, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const level = (length: number) => roadOver(stations(length, 50));
/** Level, then a climb that comes too quickly for the controller: 0.13 m g is 330 N. */
const steep = roadOver(stations(1500, 10), { grade: (s) => (s > 500 && s < 900 ? 0.13 : 0) });
const both = describe.each(['exact', 'fast'] as const);
const pulses: Vehicle['sensor'] = {
  ...IDEAL_SENSOR,
  pulses: { spacing: 0.5, reading: { kind: 'timed', clock: 1e-5 } },
  noise: { sd: 0.02, seed: 3 },
};

both('rules of the unit (%s)', (scheme) => {
  const over = (more: Partial<LoopPlan>) => ride(planOver(steep, referenceMotorcycle, { scheme, ...more }));

  test.each([
    ['a sensor without error', referenceMotorcycle],
    ['a filter, a delay and an actuator that is late', laggedVehicle],
    ['pulses and noise', { ...referenceMotorcycle, sensor: pulses }],
  ])('end hold in the sample after the one that broke them: %s', (_, vehicle) => {
    const tooSlow = { by: 1, for: 0.5 };
    const { series, only, sampleOf } = over({ vehicle, supervisor: { ...patientUnit, tooSlow } });
    const ended = only('ended');
    expect(ended.cause).toBe('too_slow');
    const i = sampleOf(ended);
    const first = Array.from(series.measured.keys()).find(
      (k) => k >= 25 && series.measured.slice(k - 25, k + 1).every((y) => y < 17 - 1),
    );
    expect(i).toBe(first! + 1);
    // The sample that decides is the last with hold on, and gives the command of before.
    expect(series.limit[i - 1]! & LIMIT_OFF).toBe(0);
    expect(series.limit[i]! & LIMIT_OFF).toBe(LIMIT_OFF);
    expect(ended.measured).toBe(series.measured[i - 1]);
    expect(ended.setSpeed).toBe(17);
    // By hand from there, at the speed of the moment where the hill lets it.
    expect(series.reference[series.size - 1]).toBe(series.speed[i]);
    expectClose(series.speed[series.size - 1]!, series.speed[i]!, 0.05);
  });

  it('end hold below the lowest speed, at once', () => {
    const { series, only, sampleOf } = over({ supervisor: { ...patientUnit, lowestSpeed: 16 } });
    expect(only('ended').cause).toBe('below_lowest_speed');
    expect(sampleOf(only('ended'))).toBe(series.measured.findIndex((y) => y < 16) + 1);
  });

  it('do not end a resume from far below, which is on its way', () => {
    const { events } = ride(
      planOver(level(3000), laggedVehicle, {
        scheme,
        supervisor: { ...patientUnit, tooSlow: { by: 3, for: 1 }, resumeRamp: 0.3 },
        rider: rider(at(300, { kind: 'brake', to: 6, deceleration: 2 }), at(500, RESUME)),
      }),
    );
    expect(events.map(({ kind }) => kind)).toEqual(['ended', 'resumed']);
  });

  it('leave the rider to resume, so long after, as soon as no rule refuses it', () => {
    const { series, events, sampleOf } = over({
      supervisor: { ...patientUnit, lowestSpeed: 16 },
      rider: { ...rider(), resumesAfter: 1 },
    });
    expect(events.map(({ kind, cause }) => `${kind} ${cause}`)).toEqual([
      'ended below_lowest_speed',
      'resumed rider',
    ]);
    // By hand the rider holds a speed just below 16 m/s: it is behind the climb that lags take it above.
    const [ended, resumed] = events.map(sampleOf);
    const allowed = Array.from(series.measured.keys()).find(
      (k) => k >= ended! + 50 && series.measured[k - 1]! >= 16,
    );
    expect(resumed).toBe(allowed);
    expect(resumed! - ended!).toBeGreaterThan(200);
  });

  it('do not look at a shift of the rider, nor across it', () => {
    const drive: Vehicle['drive'] = {
      ...forceOf({ peakForce: 60, closedThrottleForce: 8 }),
      kind: 'engine',
      gears: [20, 14].map((ratio) => ({ ratio, inertia: 0 })),
      gearbox: { kind: 'clutch', open: 0.8, resume: 0.2 },
    };
    const { series, events } = ride(
      planOver(
        roadOver(stations(600, 50), { grade: () => 0.03 }),
        { ...referenceMotorcycle, drive },
        {
          scheme,
          // With the clutch open it slows by some 0.7 m/s2: 0.5 m/s in a shift, which in one sample would be 27 m/s2.
          supervisor: { ...patientUnit, believable: 5, tooSlow: { by: 0.45, for: 0.5 } },
          rider: { brakesAbove: null, shifts: [{ distance: 200, gear: 1 }] },
        },
      ),
    );
    expect(events.map(({ kind, cause }) => `${kind} ${cause}`)).toEqual([
      'ended gear_change',
      'resumed gear_change',
    ]);
    expect(series.speed.reduce((least, v) => Math.min(least, v), 17)).toBeLessThan(16.6);
  });

  it('leave the rider to resume at the very time where nothing refuses', () => {
    const { events, sampleOf } = over({
      supervisor: { ...patientUnit, tooSlow: { by: 1, for: 0 } },
      rider: { ...rider(), resumesAfter: 2.5 },
    });
    const [ended, resumed] = events;
    expect(ended!.cause).toBe('too_slow');
    expect(sampleOf(resumed!) - sampleOf(ended!)).toBe(125);
  });
});

both('faults of the sensor (%s)', (scheme) => {
  const faulty = (shows: SensorFault['shows'], more: Partial<LoopPlan> = {}) =>
    ride(
      planOver(level(1200), laggedVehicle, {
        scheme,
        faults: [{ at: { time: 20 }, shows, for: 2 }],
        supervisor: { ...patientUnit, believable: 12 },
        ...more,
      }),
    );

  it('no pulses, or twice the speed, are not believed within one sample', () => {
    for (const shows of ['nothing', 'double'] as const) {
      const { series, only, sampleOf } = faulty(shows);
      const ended = only('ended');
      expect(ended.cause).toBe('sensor_not_believed');
      expect(sampleOf(ended)).toBe(20 / SAMPLE + 1);
      expectClose(ended.measured, shows === 'nothing' ? 0 : 34, 0.01);
      // What the unit does not believe moves no throttle.
      expect(ended.command).toBe(series.command[20 / SAMPLE - 1]);
    }
  });

  it('are shown for their time, to whoever looks', () => {
    const { series } = faulty('nothing', { supervisor: patientUnit });
    const zeros = Array.from(series.measured.keys()).filter((k) => series.measured[k] === 0);
    expect(zeros).toEqual(Array.from({ length: 100 }, (_, k) => 1000 + k));
    // A controller that believes it opens the throttle.
    expect(series.command[1000]!).toBeGreaterThan(1);
    expect(series.speed[1099]!).toBeGreaterThan(series.speed[1000]! + 1);
  });

  it('a value that stands still is believed, and the integral runs on what it says', () => {
    const { series, events } = faulty('last_value', {
      supervisor: { ...patientUnit, believable: 50 },
      road: roadOver(stations(1200, 10), { grade: (s) => (s > 300 ? 0.02 : 0) }),
      faults: [{ at: { distance: 310 }, shows: 'last_value', for: 5 }],
    });
    expect(events).toEqual([]);
    const from = series.distance.findIndex((d) => d >= 310);
    const stuck = series.measured.slice(from, from + 250);
    expect([...new Set(stuck)]).toEqual([series.measured[from - 1]]);
    expect(series.measured[from + 250]).not.toBe(stuck[0]);
  });

  it('without pulses a rider who resumes by themselves waits for the sensor', () => {
    const { events, series } = faulty('nothing', {
      supervisor: { ...patientUnit, believable: 12, lowestSpeed: 5 },
      rider: { ...rider(), resumesAfter: 0.5 },
    });
    expect(events.map(({ kind }) => kind)).toEqual(['ended', 'resumed']);
    // The fault is over at 22 s; that sample is the first to measure again.
    expectClose(events[1]!.time, 22 + SAMPLE, 1e-9);
    expectClose(series.speed[series.size - 1]!, 17, 0.05);
  });
});
