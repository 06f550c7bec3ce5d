// The rider's grip over the controller, on a vehicle without air and rolling: m dv/dt = 900 N (x - 0.3), exactly linear.

import { describe, expect, it, test } from 'vitest';
import type { ControllerSetup, PidSetup } from '../../src/control/setup.ts';
import type { OverrideRule } from '../../src/control/supervisor-setup.ts';
import { LIMIT_OVERRIDE } from '../../src/loop/plan.ts';
import { IDEAL_ACTUATOR } from '../../src/vehicle/ideal.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { plainInteger, plainPid } from '../control/players.ts';
import { at, ENGAGE, patientUnit, ride, rider, SAMPLE } from './hold-scenes.ts';
import { forceOf, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const KI = 0.03;
/** Closed throttle slows by 270 N; 630 N more at full throttle: 900 N over the range, 0.3 of it holds. */
const linear: Vehicle = {
  ...referenceMotorcycle,
  roadLoad: { ...referenceMotorcycle.roadLoad, cda: 0, c0: 0 },
  drive: forceOf({ peakForce: 630, closedThrottleForce: 270 }),
};
const road = roadOver(stations(3000, 50));
const pi: ControllerSetup = {
  ...planOver(road, linear).controller,
  antiWindup: { kind: 'none' },
} as ControllerSetup;
const pid: PidSetup = { ...plainPid, kp: 0.15, ki: KI, sample: SAMPLE };
const kinds: readonly (readonly [string, ControllerSetup])[] = [
  ['PI', pi],
  ['PI, backward', { ...pi, integration: 'backward' } as ControllerSetup],
  ['PID', { ...pid, kd: 0.02, derivativeFilter: 0.2 }],
  ['velocity form', { ...pid, form: { kind: 'velocity' } }],
  [
    'whole numbers',
    {
      ...plainInteger,
      kp: 0.15,
      ki: KI,
      sample: SAMPLE,
      wordBits: 48,
      productBits: 50,
      speedScale: 65536,
      throttleScale: 65536,
      gainDivisor: 65536,
      integralOf: 'errors',
    },
  ],
];

const gripped = (
  rule: Partial<OverrideRule>,
  controller: ControllerSetup = pi,
  vehicle = linear,
  throttle = 0.6,
) =>
  ride(
    planOver(road, vehicle, {
      scheme: 'exact',
      controller,
      supervisor: { ...patientUnit, override: { integral: 'held', reentry: 0.4, ...rule } },
      rider: rider(at(200, { kind: 'override', throttle, for: 6 })),
    }),
  );
/** Time integral of the error from a sample on [m]. */
const area = (speed: Float64Array, from: number, to = speed.length): number =>
  speed.slice(from, to).reduce((sum, v) => sum + SAMPLE * (v - 17), 0);

describe('an override', () => {
  it('gives the grip’s throttle while it is held and asks for more, and then the controller’s', () => {
    const { series, only, sampleOf } = gripped({});
    const [began, let_go] = [only('override_began'), only('override_ended')].map(sampleOf);
    expect(let_go! - began!).toBe(300);
    for (let k = began!; k < let_go!; k++) {
      expect(series.actuator[k]).toBe(0.6);
      expect(series.limit[k]! & LIMIT_OVERRIDE).toBe(LIMIT_OVERRIDE);
      // 900 N (0.6 - 0.3) / 260 kg.
      expectClose(series.speed[k]!, 17 + (270 / 260) * SAMPLE * (k - began!), 1e-9);
    }
    expect(series.limit[let_go!]).toBe(series.limit[let_go!]! & ~LIMIT_OVERRIDE);
    expect(series.command[let_go!]!).toBeLessThan(0.3);
  });

  it('that asks for less than the controller changes nothing', () => {
    const { series, result } = gripped({}, pi, linear, 0.2);
    expectClose(series.speed, new Float64Array(series.size).fill(17), 1e-9);
    expect(result.holdEvents!.map(({ kind }) => kind)).toEqual([
      'override_began',
      'override_ended',
      'reentered',
    ]);
    expect(series.limit.some((limit) => (limit & LIMIT_OVERRIDE) !== 0)).toBe(false);
  });

  it('winds the integral down under `runs` by ki times the area of the error', () => {
    const { series, only, sampleOf } = gripped({ integral: 'runs' });
    const [began, let_go] = [only('override_began'), only('override_ended')].map(sampleOf);
    const lost = series.integral[began!]! - series.integral[let_go!]!;
    expectClose(lost, KI * area(series.speed, began!, let_go!), 1e-12);
    // v - 17 = 270/260 t: over 6 s an area of 18.7 m, sampled at the start of each sample.
    expectClose(lost, KI * ((270 / 260) * 18 - 0.5 * SAMPLE * (270 / 260) * 6), 1e-9);
  });

  it.each(kinds)('settles low afterwards under `runs`, and not under `held`: %s', (_, controller) => {
    const runs = gripped({ integral: 'runs', reentry: 0.1 }, controller, linear, 0.35);
    const held = gripped({ integral: 'held', reentry: 0.1 }, controller, linear, 0.35);
    const lowest = ({ series }: typeof runs) => series.speed.reduce((least, v) => Math.min(least, v), 99);
    // The same load in the end as before: without limits the integral has to come back to where it was, so that as
    // much time lies below the set speed as above it. Held, it sees none of the area up to where the speed is back.
    const total = area(runs.series.speed, runs.sampleOf(runs.only('override_began')));
    const back = held.sampleOf(held.only('reentered'));
    expectClose(total, 0, 0.02);
    expectClose(area(held.series.speed, back), 0, 0.02);
    expect(17 - lowest(runs)).toBeGreaterThan(0.2);
    expect(17 - lowest(held)).toBeLessThan(0.05);
  });

  it('holds the integral until the speed is back, to the sample', () => {
    const { series, only, sampleOf } = gripped({});
    const began = sampleOf(only('override_began'));
    const back = sampleOf(only('reentered'));
    for (let k = began; k < back; k++) expectClose(series.integral[k]!, 0.3, 1e-12);
    expect(series.integral[back + 1]).not.toBe(series.integral[back]);
    const let_go = sampleOf(only('override_ended'));
    const first = Array.from(series.measured.keys()).find((k) => k >= let_go && series.measured[k]! <= 17.4);
    expect(back).toBe(first! + 1);
    expect(series.measured[back - 2]).toBeGreaterThan(17.4);
  });

  it('is ended by a set-switch, which takes the speed of the moment without a bump', () => {
    const { series, events, sampleOf } = ride(
      planOver(road, linear, {
        supervisor: patientUnit,
        rider: rider(at(200, { kind: 'override', throttle: 0.6, for: 60 }), at(300, ENGAGE)),
      }),
    );
    expect(events.map(({ kind }) => kind)).toEqual(['override_began', 'override_ended', 'engaged']);
    const i = sampleOf(events[2]!);
    expect(events[2]!.setSpeed).toBe(series.measured[i]);
    expect(events[2]!.setSpeed).toBeGreaterThan(19);
    expectClose(series.command[i]!, 0.6, 1e-13);
  });

  test('a second one takes over from the first', () => {
    const { series, events, sampleOf } = ride(
      planOver(road, linear, {
        supervisor: patientUnit,
        rider: rider(
          at(200, { kind: 'override', throttle: 0.6, for: 60 }),
          at(260, { kind: 'override', throttle: 0.4, for: 3 }),
        ),
      }),
    );
    expect(events.map(({ kind }) => kind)).toEqual([
      'override_began',
      'override_ended',
      'override_began',
      'override_ended',
      'reentered',
    ]);
    const second = sampleOf(events[2]!);
    expect(series.actuator[second - 1]).toBe(0.6);
    expect(series.actuator[second]).toBe(0.4);
    expectClose(series.integral[sampleOf(events[4]!) - 1]!, 0.3, 1e-12);
  });
});

describe('a servo beside the grip', () => {
  const SLACK = 0.06;
  const RATE = 0.5;
  const servo = (engagesFrom: 'rider' | 'rest'): Vehicle => ({
    ...linear,
    actuator: { ...IDEAL_ACTUATOR, lag: 0, rateLimit: RATE, slack: SLACK, engagesFrom },
  });
  const engage = (engagesFrom: 'rider' | 'rest') =>
    ride(
      planOver(road, servo(engagesFrom), {
        hold: { setSpeed: 17, setSpeedIs: 'true_speed', startSpeed: 17, changes: [], starts: 'by_hand' },
        supervisor: patientUnit,
        rider: rider(at(170, ENGAGE)),
      }),
    );

  it('winds in its slack and then its travel, while the throttle is closed', () => {
    const { series, only, sampleOf } = engage('rest');
    const i = sampleOf(only('engaged'));
    expect(series.actuator[i - 1]).toBe(series.command[i - 1]);
    expectClose(series.command[i]!, series.command[i - 1]!, 1e-13);
    // Nothing moves for slack / rate; then it opens at the rate, so that after (slack + travel) / rate it is where the rider had it.
    for (let k = 0; k * SAMPLE < (SLACK + 0.29) / RATE; k++)
      expectClose(series.actuator[i + k]!, Math.max(0, RATE * SAMPLE * k - SLACK), 1e-9);
    const open = series.actuator.findIndex((x, k) => k > i && x >= 0.3);
    expectClose((open - i) * SAMPLE, (SLACK + 0.3) / RATE, SAMPLE);
    // Meanwhile 900 N (x - 0.3) brakes: 0.3 over the dead time, then half of it over the travel.
    const sag = (900 / 260) * 0.3 * (SLACK / RATE + (0.5 * 0.3) / RATE);
    expectClose(17 - series.speed[open]!, sag, 0.05);
  });

  it('sags where a throttle by wire does not', () => {
    const lowest = (engagesFrom: 'rider' | 'rest') =>
      engage(engagesFrom).series.speed.reduce((least, v) => Math.min(least, v), 99);
    expectClose(lowest('rider'), 17, 1e-6);
    expect(lowest('rest')).toBeLessThan(16.7);
  });

  it('is left behind by the grip at once, and drives on from its own command', () => {
    const { series, only, sampleOf } = gripped({}, pi, servo('rest'));
    const [began, let_go] = [only('override_began'), only('override_ended')].map(sampleOf);
    expect(series.actuator[began! - 1]).not.toBe(0.6);
    for (let k = began!; k < let_go!; k++) expect(series.actuator[k]).toBe(0.6);
    expect(series.actuator[let_go!]!).toBeLessThan(0.3);
  });
});
