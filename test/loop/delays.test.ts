import { describe, expect, test } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { FullSeries } from '../../src/loop/result.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { SpeedSensor, Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { forceOf, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const road = roadOver(stations(2000, 10), { grade: (s) => 0.04 * Math.sin(s / 150) });
const run = (sensor: Partial<SpeedSensor>, more: Partial<LoopPlan> = {}): FullSeries =>
  replay(
    planOver(
      road,
      { ...referenceMotorcycle, sensor: { ...IDEAL_SENSOR, filter: 0, delay: 0, scaleError: 0, ...sensor } },
      more,
    ),
    { settledAt: 0 },
    1e9,
  ).series;

describe.each(['exact', 'fast'] as const)('measured speed by the %s scheme', (scheme) => {
  const tolerance = scheme === 'exact' ? 1e-9 : 1e-5;

  test('a delay of whole samples reads the speed of those samples', () => {
    const { speed, measured, size } = run({ delay: 0.1 }, { scheme });
    for (let i = 5; i < size; i++) expectClose(measured[i]!, speed[i - 5]!, 1e-12);
    expect(measured[3]).toBe(17);
  });

  test('a delay between samples reads the speed between them', () => {
    const half = run({ delay: 0.03 }, { scheme });
    // Against the cubic through four samples around the instant.
    for (let i = 10; i < half.size; i++) {
      const at = (k: number): number => half.speed[i + k]!;
      const cubic = (-at(-3) + 9 * at(-2) + 9 * at(-1) - at(0)) / 16;
      if (i + 1 < half.size) expectClose(half.measured[i]!, cubic, scheme === 'exact' ? 2e-6 : 1e-5);
    }
  });

  test('computing delay and sensor delay are one and the same for a steady set speed', () => {
    const sensor = run({ delay: 0.05 }, { scheme });
    const plan = planOver(road, referenceMotorcycle, { scheme });
    const late = { ...plan, controller: { ...plan.controller, computingDelay: 0.05 } } as LoopPlan;
    expect(replay(late, { settledAt: 0 }, 1e9).series.speed).toEqual(sensor.speed);
  });

  test('a change of set speed moves the actuator the computing delay later, but not the delay of the sensor', () => {
    const level = roadOver(stations(1000, 10));
    const hold = { setSpeed: 17, setSpeedIs: 'true_speed', startSpeed: 17 } as const;
    const firstMove = (
      computingDelay: number,
      sensorDelay: number,
      at: { time: number } | { distance: number },
    ) => {
      const sensor = { ...IDEAL_SENSOR, filter: 0, delay: sensorDelay, scaleError: 0 };
      const plan = planOver(level, { ...referenceMotorcycle, sensor }, { scheme });
      const controller = { ...plan.controller, computingDelay, setpointWeight: 1 } as LoopPlan['controller'];
      const changed = { ...hold, changes: [{ at, setSpeed: 18, ramp: null }] };
      const { series } = replay({ ...plan, controller, hold: changed }, { settledAt: 0 }, 1000);
      const i = series.actuator.findIndex((u) => u > series.actuator[0]! + 0.01);
      return series.time[i]!;
    };
    expectClose(firstMove(0, 0.5, { time: 10 }), 10, 0.021);
    expectClose(firstMove(0.5, 0, { time: 10 }), 10.5, 0.021);
    expectClose(firstMove(0.5, 0, { distance: 170 }), 10.5, 0.021);
  });

  test('the filter follows its own differential equation', () => {
    const filter = 0.4;
    const { speed, measured, size } = run({ filter }, { scheme });
    // Exact for a parabola through three samples: z(k+1) from z(k) by the particular solution.
    const h = 0.02;
    const decay = Math.exp(-h / filter);
    for (let i = 1; i + 1 < size; i++) {
      const slope = (speed[i + 1]! - speed[i - 1]!) / (2 * h);
      const bend = (speed[i + 1]! - 2 * speed[i]! + speed[i - 1]!) / (h * h);
      const particular = (t: number): number =>
        speed[i]! + slope * t + 0.5 * bend * t * t - filter * (slope + bend * t) + filter * filter * bend;
      const next = particular(h) + (measured[i]! - particular(0)) * decay;
      expectClose(measured[i + 1]!, next, Math.max(tolerance, 3e-7));
    }
  });

  test('a very short filter is no filter', () => {
    const short = run({ filter: 1e-7 }, { scheme });
    expectClose(short.speed, run({}, { scheme }).speed, 1e-6);
  });
});

describe('lags of actuator and drive', () => {
  const locked = (
    ta: number,
    td: number,
    rateLimit: number | null,
    scheme: LoopPlan['scheme'],
  ): FullSeries => {
    const vehicle: Vehicle = {
      ...referenceMotorcycle,
      drive: forceOf({ peakForce: 900, lag: td }),
      actuator: { ...IDEAL_ACTUATOR, lag: ta, rateLimit },
    };
    // Locked level for 17 m/s, then for 25 m/s from the first second: a step of the command.
    return replay(
      planOver(roadOver(stations(500, 7)), vehicle, {
        scheme,
        controller: { kind: 'locked', throttle: 'level' },
        hold: {
          setSpeed: 17,
          setSpeedIs: 'true_speed',
          startSpeed: 17,
          changes: [{ at: { time: 1 }, setSpeed: 25, ramp: null }],
        },
      }),
      { settledAt: 0 },
      1e9,
    ).series;
  };
  const u0 = (260 * 9.80665 * 0.015 + 0.36 * 17 * 17) / 900;
  const u1 = (260 * 9.80665 * 0.015 + 0.36 * 25 * 25) / 900;

  test.each(['exact', 'fast'] as const)('follow the closed form of two lags after a step (%s)', (scheme) => {
    for (const [ta, td] of [
      [0.3, 0.1],
      [0, 0.25],
      [0.2, 0],
      [0.2, 0.2],
      [0.2, 0.2 * (1 + 1e-9)],
      [0.2, 0.2 * (1 + 1e-6)],
    ] as const) {
      const { time, actuator, driveForce } = locked(ta, td, null, scheme);
      for (let i = 60; i < time.length; i += 25) {
        const t = time[i]! - 1;
        const ea = ta > 0 ? Math.exp(-t / ta) : 0;
        const ed = td > 0 ? Math.exp(-t / td) : 0;
        const gone = Math.abs(ta - td) < 1e-5 ? ed * (1 + t / ta) : (ta * ea - td * ed) / (ta - td);
        expectClose(actuator[i]!, u1 + (u0 - u1) * ea, 1e-12);
        // By `fast` the force is that of the middle of the step.
        if (scheme === 'exact') expectClose(driveForce[i]! / 900, u1 + (u0 - u1) * gone, 1e-6);
      }
    }
  });

  test.each(['exact', 'fast'] as const)(
    'a rate limit ramps, then lets go where the lag is slower (%s)',
    (scheme) => {
      const rate = 0.2;
      const ta = 0.1;
      const { time, actuator } = locked(ta, 0, rate, scheme);
      // Ramp until the gap is rate ta, then e^(-t/ta).
      const crossover = (u1 - u0) / rate - ta;
      for (let i = 50; i < time.length; i += 3) {
        const t = time[i]! - 1;
        const expected = t < crossover ? u0 + rate * t : u1 - rate * ta * Math.exp(-(t - crossover) / ta);
        expectClose(actuator[i]!, expected, 1e-11);
      }
    },
  );

  test('a rate limit without a lag ramps to the command and stays', () => {
    const { time, actuator } = locked(0, 0, 0.3, 'exact');
    for (let i = 50; i < time.length; i += 3)
      expectClose(actuator[i]!, Math.min(u1, u0 + 0.3 * (time[i]! - 1)), 1e-11);
  });
});
