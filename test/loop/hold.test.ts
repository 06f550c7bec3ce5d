// Hold changes hands: engage, resume, taps, the brake, the clutch, and who has the throttle in between.

import { describe, expect, it, test } from 'vitest';
import type { ControllerSetup, PidSetup } from '../../src/control/setup.ts';
import type { LoopPlan, RiderDeed } from '../../src/loop/plan.ts';
import { LIMIT_BRAKE, LIMIT_LOWER, LIMIT_OFF, LIMIT_SHIFT, LIMIT_UPPER } from '../../src/loop/plan.ts';
import { IDEAL_ACTUATOR } from '../../src/vehicle/ideal.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { plainInteger, plainPid } from '../control/players.ts';
import {
  at,
  atTime,
  brakeTo,
  CANCEL,
  COAST,
  ENGAGE,
  patientUnit,
  RESUME,
  ride,
  rider,
  SAMPLE,
} from './hold-scenes.ts';
import { forceOf, laggedVehicle, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const level = (length: number) => roadOver(stations(length, 50));
const hilly = (length: number, grade = 0.03) =>
  roadOver(stations(length, 10), { grade: (s) => grade * Math.sin(s / 150) });
const hold = (more: Partial<LoopPlan['hold']> = {}): LoopPlan['hold'] => ({
  setSpeed: 17,
  setSpeedIs: 'true_speed',
  startSpeed: 17,
  changes: [],
  ...more,
});
/** No air, no rolling, no lag: m dv/dt = 900 N x - brake. */
const free: Vehicle = {
  ...referenceMotorcycle,
  roadLoad: { ...referenceMotorcycle.roadLoad, cda: 0, c0: 0 },
  drive: forceOf({ peakForce: 900 }),
};
const both = describe.each(['exact', 'fast'] as const);
/**
 * What a scheme misses of speed braked away. RK4 has 1 - exp(-x), x = 0.02 s / 0.5 s, to x^5 / 120 a sample. The fast one
 * has its one evaluation at the middle that the acceleration before leads to: where that changes by da, 0.02^2 da / (2 0.5) once,
 * and x^2 / 6 of what is lost.
 */
const missed = (scheme: 'exact' | 'fast', change: number, lost: number): number =>
  scheme === 'fast' ? SAMPLE * SAMPLE * change + (0.04 ** 2 / 6) * lost + 1e-6 : 1e-6;

const AIR = { grade: 0, headwind: 0, crosswind: 0, airDensity: 1.2, airTemperature: 288.15 };
const pid: PidSetup = { ...plainPid, kp: 0.15, ki: 0.03, sample: SAMPLE };
const velocity: PidSetup = { ...pid, form: { kind: 'velocity' } };
const known: PidSetup = {
  ...pid,
  model: { mass: 260, surroundings: AIR },
  feedforward: { drag: true, grade: { kind: 'accelerometer', filter: 0.3, pitchError: 0.01 } },
};
const kinds: readonly (readonly [string, ControllerSetup])[] = [
  ['PI', planOver(level(100), referenceMotorcycle).controller],
  [
    'PI, backward',
    { ...planOver(level(100), referenceMotorcycle).controller, integration: 'backward' } as ControllerSetup,
  ],
  ['PID', { ...pid, kd: 0.05, derivativeFilter: 0.2, setpointWeight: 0.4 }],
  ['velocity form', { ...velocity, kd: 0.05, derivativeFilter: 0.2 }],
  ['velocity form, backward', { ...velocity, integration: 'backward' }],
  ['a limited rate', { ...pid, rateLimit: 0.2 }],
  ['a dead band', { ...pid, deadBand: { halfWidth: 0.1, integratesInside: false } }],
  [
    'a schedule',
    {
      ...pid,
      schedule: {
        speed: Float64Array.of(5, 25),
        rows: [{ gear: null, proportional: Float64Array.of(2, 0.5), integral: Float64Array.of(1, 1) }],
      },
    },
  ],
  ['feedforward', known],
  ['an observer', { ...known, observerFilter: 1 }],
];

both('taking over (%s)', (scheme) => {
  const acts = rider(
    at(150, ENGAGE),
    at(500, COAST),
    at(540, RESUME),
    at(900, brakeTo(12)),
    at(1000, RESUME),
  );
  const run = (controller: ControllerSetup) =>
    ride(
      planOver(hilly(1500), laggedVehicle, {
        scheme,
        controller,
        supervisor: patientUnit,
        hold: hold({ starts: 'by_hand', startSpeed: 15 }),
        rider: acts,
      }),
    );
  const taken = ['engaged', 'resumed', 'resumed'];

  test.each(kinds)('is without a bump: %s', (_, controller) => {
    const { series, events, sampleOf } = run(controller);
    const takeovers = events.filter(({ kind }) => taken.includes(kind));
    expect(takeovers.map(({ kind }) => kind)).toEqual(taken);
    for (const event of takeovers) {
      const i = sampleOf(event);
      expectClose(series.command[i]!, series.command[i - 1]!, 1e-13, `command at ${event.kind}`);
      expect(event.command).toBe(series.command[i - 1]);
      expect(event.measured).toBe(series.measured[i - 1]);
      // Nor does the next sample jump: gains times what speed and reference do in a sample.
      expectClose(series.command[i + 1]!, series.command[i]!, 0.04, `command after ${event.kind}`);
    }
  });

  it('is without a bump to the counts of a controller in whole numbers', () => {
    const controller = {
      ...plainInteger,
      kp: 0.15,
      ki: 0.03,
      sample: SAMPLE,
      wordBits: 32,
      productBits: 48,
      speedScale: 256,
      throttleScale: 1000,
    };
    const { series, events, sampleOf } = run(controller);
    for (const event of events.filter(({ kind }) => taken.includes(kind))) {
      const i = sampleOf(event);
      expectClose(series.command[i]!, series.command[i - 1]!, 0.002);
    }
  });

  it('engages at the speed measured then, and resumes at that of before', () => {
    const { series, events, sampleOf } = run(pid);
    const [engaged, coasting, resumed, braked, again] = events;
    const i = sampleOf(engaged!);
    expect(engaged!.setSpeed).toBe(series.measured[i]);
    expect(series.setSpeed[i - 1]).toBe(17);
    expect([...new Set(series.setSpeed.slice(i))]).toEqual([engaged!.setSpeed]);
    for (const event of [coasting, resumed, braked, again]) expect(event!.setSpeed).toBe(engaged!.setSpeed);
    expect([coasting!.cause, resumed!.cause, braked!.cause]).toEqual(['rider', 'rider', 'brake']);
  });

  it('resumes with the reference on a line from the measured speed to the set speed', () => {
    const { series, events, sampleOf } = run(pid);
    const again = events.at(-1)!;
    const i = sampleOf(again);
    const from = series.measured[i]!;
    for (let k = 0; i + k < series.size; k += 7)
      expectClose(series.reference[i + k]!, Math.min(from + 0.5 * SAMPLE * k, again.setSpeed), 1e-9);
    // It has arrived before the road ends.
    expect(series.reference[series.size - 1]).toBe(again.setSpeed);
  });

  it('steps with the reference where the unit has no ramp, and that without a bump', () => {
    const plan = planOver(level(700), referenceMotorcycle, {
      scheme,
      supervisor: { ...patientUnit, resumeRamp: null },
      hold: hold({ starts: 'by_hand', startSpeed: 15 }),
      rider: rider(at(100, RESUME)),
    });
    const { series, only, sampleOf } = ride(plan);
    const i = sampleOf(only('resumed'));
    expect(series.reference[i]).toBe(17);
    expect(series.reference[i - 1]).toBe(15);
    expectClose(series.command[i]!, series.command[i - 1]!, 1e-13);
  });
});

both('the rider by hand (%s)', (scheme) => {
  it('brakes over (v1^2 - v2^2) / 2b, and all that the vehicle loses is the brake’s work', () => {
    const { result, series, only, sampleOf } = ride(
      planOver(level(1000), free, {
        scheme,
        hold: hold({ setSpeed: 20, startSpeed: 20 }),
        rider: rider(at(200, brakeTo(12, 2))),
      }),
    );
    const i = sampleOf(only('ended'));
    const reached = series.speed.findIndex((v) => v < 12.01);
    // In whole samples.
    expectClose((reached - i) * SAMPLE, (20 - 12) / 2, 1.5 * SAMPLE);
    expectClose(series.distance[reached]! - series.distance[i]!, (20 * 20 - 12 * 12) / 4, 18 * SAMPLE);
    for (let k = i; k < reached - 1; k++) expectClose(series.speed[k]!, 20 - 2 * SAMPLE * (k - i), 2e-3);
    expectClose(result.ledger.brake, 0.5 * 260 * (20 * 20 - 12 * 12), 1e-2);
    // RK4 over a brake that decays with 0.5 s within each sample of 0.02 s: (0.04)^5 / 120 of it.
    expect(result.ledger.residual).toBeLessThan(1e-8);
    expectClose(series.speed[series.size - 1]!, 12, 1e-6);
    expect(series.reference[series.size - 1]).toBe(12);
  });

  it('brakes as hard as is asked, down a slope too', () => {
    const { series, only, sampleOf } = ride(
      planOver(roadOver(stations(600, 50), { grade: () => -0.1 }), free, {
        scheme,
        hold: hold({ setSpeed: 25, startSpeed: 25 }),
        rider: rider(at(200, brakeTo(5, 9))),
      }),
    );
    const i = sampleOf(only('ended'));
    const from = series.speed[i]!;
    const whole = Math.floor((from - 5) / (9 * SAMPLE));
    for (let k = 0; k <= whole; k++)
      expectClose(series.speed[i + k]!, from - 9 * SAMPLE * k, missed(scheme, 9 + 1, 9 * SAMPLE * k));
    expectClose(series.speed[series.size - 1]!, 5, 1e-6);
  });

  it('goes on slower by hand at no more than 3 m/s2', () => {
    const { series, only, sampleOf } = ride(
      planOver(level(600), free, {
        scheme,
        hold: hold({ setSpeed: 25, startSpeed: 25 }),
        rider: rider(at(200, { kind: 'ride', to: 10, acceleration: 1 })),
      }),
    );
    const i = sampleOf(only('ended'));
    // (v - 10) / 0.5 s is 3 m/s2 at 11.5 m/s: a line down to there.
    for (let k = 0; k <= 13 / (3 * SAMPLE); k++)
      expectClose(series.speed[i + k]!, 25 - 3 * SAMPLE * k, missed(scheme, 3, 3 * SAMPLE * k));
    expectClose(series.speed[series.size - 1]!, 10, 1e-6);
  });

  it('gains speed by hand as fast as the rider will, and comes to the new one with 2 s', () => {
    const { series, only, sampleOf } = ride(
      planOver(level(1500), free, {
        scheme,
        rider: rider(at(200, { kind: 'ride', to: 22, acceleration: 1.5 })),
      }),
    );
    expect(only('ended').cause).toBe('rider');
    const i = sampleOf(only('ended'));
    // (22 - v) / 2 s is 1.5 m/s2 at 19 m/s: a line up to there, then an exponential; the throttle is held over a sample.
    for (let k = 0; k < 66; k++) expectClose(series.speed[i + k]!, 17 + 1.5 * SAMPLE * k, 1e-3);
    for (let k = 70; i + k < series.size; k += 40)
      expectClose(series.speed[i + k]!, 22 - 3 * Math.exp(-(SAMPLE * k - 4 / 3) / 2), 0.02);
  });

  it('holds the speed of the moment up and down, with the brake where a closed throttle is not enough', () => {
    const { result, series, only, sampleOf } = ride(
      planOver(hilly(2500, 0.06), referenceMotorcycle, { scheme, rider: rider(at(300, CANCEL)) }),
    );
    const i = sampleOf(only('ended'));
    expect(series.speed[i]).not.toBe(17);
    // What the hand does not know is the drive's lag of 0.25 s: 0.06 g / 150 m 17 m/s 0.25 s (1/2 s + ..) about 0.01 m/s.
    expectClose(series.speed.slice(i), new Float64Array(series.size - i).fill(series.speed[i]!), 0.06);
    const off = Array.from(series.limit.keys()).filter((k) => k >= i);
    expect(off.every((k) => (series.limit[k]! & LIMIT_OFF) !== 0)).toBe(true);
    const braking = off.filter((k) => (series.limit[k]! & LIMIT_BRAKE) !== 0);
    expect(braking.length).toBeGreaterThan(100);
    // Throttle and brake are not used at once, but for what the drive's lag still gives.
    expect(braking.filter((k) => series.command[k] !== 0)).toEqual([]);
    expect(off.some((k) => (series.limit[k]! & (LIMIT_LOWER | LIMIT_UPPER)) !== 0)).toBe(false);
    expect(result.ledger.residual).toBeLessThan(1e-9);
  });

  it('coasts as the equation of a free vehicle on a grade says', () => {
    const grade = -0.02;
    const { series, only, sampleOf } = ride(
      planOver(roadOver(stations(1500, 50), { grade: () => grade }), free, {
        scheme,
        hold: hold({ setSpeed: 12, startSpeed: 12 }),
        rider: { ...rider(at(200, COAST)), brakesAbove: 0.5 },
      }),
    );
    const i = sampleOf(only('ended'));
    const pull = (9.80665 * -grade) / Math.sqrt(1 + grade * grade);
    for (let k = i; k < series.size; k += 50)
      expectClose(series.speed[k]!, series.speed[i]! + pull * SAMPLE * (k - i), 1e-6);
  });

  it('has no torque with the clutch pulled, and goes on by hand at the speed that is left', () => {
    const { result, series, only, sampleOf } = ride(
      planOver(level(900), laggedVehicle, { scheme, rider: rider(at(300, { kind: 'clutch', for: 1.5 })) }),
    );
    const ended = only('ended');
    expect(ended.cause).toBe('clutch');
    const i = sampleOf(ended);
    for (let k = i; k < i + 75; k++) expect(series.driveForce[k]).toBe(0);
    expect(series.driveForce[i + 150]).toBeGreaterThan(0);
    const left = series.speed[i + 75]!;
    expect(left).toBeLessThan(series.speed[i]! - 0.2);
    expect(series.reference[i + 75]).toBe(left);
    expectClose(series.speed[series.size - 1]!, left, 0.02);
    expect(result.ledger.residual).toBeLessThan(1e-9);
  });

  it('starts the run by hand, settled, with nothing of it in the errors', () => {
    const { result, series, events } = ride(
      planOver(level(800), laggedVehicle, {
        scheme,
        hold: hold({ starts: 'by_hand', startSpeed: 14 }),
        rider: rider(at(400, CANCEL)),
      }),
    );
    expect(events).toEqual([]);
    expectClose(series.speed, new Float64Array(series.size).fill(14), 1e-9);
    expectClose(result.bins.timeOff, result.bins.time, 0);
    for (const column of ['errorMean', 'errorSquare', 'errorMin', 'errorMax', 'throttleTravel'] as const)
      expectClose(result.bins[column], new Float64Array(result.bins.size), 0);
    expectClose(result.bins.setSpeed, new Float64Array(result.bins.size).fill(17), 0);
  });
});

both('what the rider asks of the unit (%s)', (scheme) => {
  const asked = (more: Partial<LoopPlan>, ...acts: Parameters<typeof rider>) =>
    ride(
      planOver(level(1500), laggedVehicle, {
        scheme,
        supervisor: patientUnit,
        rider: rider(...acts),
        ...more,
      }),
    );
  const told = (events: readonly { kind: string; cause: string }[]) =>
    events.map(({ kind, cause }) => `${kind} ${cause}`);

  it('taps the set speed up and down, the reference at the rate of a tap', () => {
    const supervisor = { ...patientUnit, tapRamp: 0.4 };
    const { series, events, sampleOf } = asked(
      { supervisor },
      at(300, { kind: 'tap', taps: 4 }),
      at(900, { kind: 'tap', taps: -2 }),
    );
    expect(told(events)).toEqual(['tapped rider', 'tapped rider']);
    expect(events.map(({ setSpeed }) => setSpeed)).toEqual([18, 17.5]);
    const i = sampleOf(events[0]!);
    for (let k = -1; k < 200; k++)
      expectClose(series.reference[i + k]!, Math.min(17 + 0.4 * SAMPLE * (k + 1), 18), 1e-12);
    expectClose(series.speed[series.size - 1]!, 17.5, 0.05);
  });

  it('resumes at a planned set speed that was passed meanwhile', () => {
    const changes = [{ at: { distance: 500 }, setSpeed: 15, ramp: null }];
    const { only, series } = asked({ hold: hold({ changes }) }, at(300, CANCEL), at(700, RESUME));
    expect(only('ended').setSpeed).toBe(17);
    expect(only('resumed').setSpeed).toBe(15);
    expectClose(series.speed[series.size - 1]!, 15, 0.05);
  });

  it('refuses what the state makes meaningless, and says so', () => {
    const { events } = asked(
      {},
      at(100, RESUME),
      at(200, CANCEL),
      at(300, CANCEL),
      at(400, { kind: 'tap', taps: 1 }),
      at(500, { kind: 'override', throttle: 1, for: 2 }),
      at(600, { kind: 'clutch', for: 4 }),
      at(610, RESUME),
      at(800, RESUME),
    );
    expect(told(events)).toEqual([
      'refused rider',
      'ended rider',
      'refused rider',
      'refused rider',
      'refused clutch',
      'resumed rider',
    ]);
    expect(events.at(-1)!.setSpeed).toBe(17);
  });

  it('refuses to take over below the lowest speed, and a tap that leads there', () => {
    const supervisor = { ...patientUnit, lowestSpeed: 13 };
    const { events } = asked(
      { supervisor },
      at(100, { kind: 'tap', taps: -17 }),
      at(200, brakeTo(12)),
      at(400, RESUME),
      at(500, ENGAGE),
    );
    expect(told(events)).toEqual([
      'refused below_lowest_speed',
      'ended brake',
      'refused below_lowest_speed',
      'refused below_lowest_speed',
    ]);
  });

  it('says which acts are those of a bend', () => {
    const bend = (distance: number, does: RiderDeed) => ({ ...at(distance, does), reason: 'bend' as const });
    const { events } = asked({}, bend(200, brakeTo(11)), bend(400, RESUME));
    expect(told(events)).toEqual(['ended bend', 'resumed bend']);
  });

  it('acts at times as at distances, at the first sample from there on', () => {
    const { events } = asked({}, atTime(10.01, CANCEL), atTime(20, RESUME), at(800, CANCEL));
    expectClose(events[0]!.time, 10.02, 1e-12);
    expectClose(events[1]!.time, 20, 1e-12);
    expect(events[2]!.distance).toBeGreaterThanOrEqual(800);
    expect(events[2]!.distance).toBeLessThan(800 + 17.1 * SAMPLE);
  });

  it('goes on from a cancelled brake: one act ends what the one before began', () => {
    const { series, events } = asked({}, at(200, brakeTo(5, 1)), at(260, RESUME), at(1200, ENGAGE));
    expect(told(events)).toEqual(['ended brake', 'resumed rider', 'engaged rider']);
    expect(series.speed.reduce((least, v) => Math.min(least, v), 20)).toBeGreaterThan(10);
    expectClose(events[2]!.setSpeed, 17, 0.05);
  });

  it('learns of the rider’s shifts, and stays off through them where it is off', () => {
    const drive = {
      ...forceOf({ peakForce: 60, closedThrottleForce: 8 }),
      kind: 'engine' as const,
      gears: [20, 14, 10].map((ratio) => ({ ratio, inertia: 0.1 * ratio * ratio })),
      gear: 2,
      gearbox: { kind: 'clutch' as const, open: 0.4, resume: 0.6 },
    };
    const { events, series, result } = ride(
      planOver(
        level(1600),
        { ...referenceMotorcycle, drive },
        {
          scheme,
          supervisor: patientUnit,
          rider: {
            ...rider(
              at(100, { kind: 'override', throttle: 1, for: 60 }),
              at(500, brakeTo(13)),
              at(1300, RESUME),
            ),
            shifts: [
              { distance: 200, gear: 1 },
              { distance: 505, gear: 0 },
              { distance: 900, gear: 1 },
            ],
          },
        },
      ),
    );
    expect(told(events)).toEqual([
      'override_began rider',
      'ended gear_change',
      'resumed gear_change',
      'ended brake',
      'resumed rider',
    ]);
    expect(result.shifts).toHaveLength(3);
    const by = (bits: number) => Array.from(series.limit).filter((limit) => (limit & bits) === bits).length;
    // Two of the three shifts, of a second each, fall into the time by hand.
    expect(by(LIMIT_SHIFT)).toBe(150);
    expect(by(LIMIT_SHIFT | LIMIT_OFF)).toBe(100);
    expectClose(
      result.bins.timeOff.reduce((sum, time) => sum + time, 0),
      by(LIMIT_OFF) * SAMPLE,
      1e-9,
    );
    expect(result.ledger.residual).toBeLessThan(1e-6);
  });
});

both('a locked throttle (%s)', (scheme) => {
  const locked = (throttle: number | 'level') =>
    ride(
      planOver(level(1500), laggedVehicle, {
        scheme,
        controller: { kind: 'locked', throttle },
        supervisor: { ...patientUnit, lowestSpeed: 16, tooSlow: { by: 0.1, for: 0.1 } },
        rider: rider(at(300, { kind: 'tap', taps: 1 }), at(400, brakeTo(12)), at(700, RESUME)),
      }),
    );

  it('is let go by the brake and locked again at a resume; rules of a unit are nothing to it', () => {
    for (const throttle of ['level', 0.5] as const) {
      const { series, events, sampleOf } = locked(throttle);
      expect(events.map(({ kind }) => kind)).toEqual(['refused', 'ended', 'resumed']);
      const [, ended, resumed] = events.map(sampleOf);
      const before = series.command[ended! - 1]!;
      if (throttle !== 'level') expect(before).toBe(throttle);
      expect(series.command[ended! + 50]).toBe(0);
      expect(series.command[resumed!]).toBe(before);
      expect(series.command[series.size - 1]).toBe(before);
    }
  });

  it('is locked for the present speed where it is engaged', () => {
    const { series, only, sampleOf } = ride(
      planOver(
        level(900),
        { ...laggedVehicle, actuator: IDEAL_ACTUATOR },
        {
          scheme,
          controller: { kind: 'locked', throttle: 'level' },
          hold: hold({ starts: 'by_hand', startSpeed: 14 }),
          rider: rider(at(200, ENGAGE)),
        },
      ),
    );
    const i = sampleOf(only('engaged'));
    expectClose(series.command[i]!, series.command[i - 1]!, 1e-9);
    expectClose(series.speed[series.size - 1]!, 14, 1e-6);
    expectClose(only('engaged').setSpeed, 14, 1e-9);
  });
});
