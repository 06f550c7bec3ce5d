import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { BITE_DEAD_BAND, BITE_INTEGRAL_CAP, BITE_SIGN_TEST } from '../../src/control/bites.ts';
import type { GainSchedule, IntegralRule, PidSetup, PiSetup } from '../../src/control/setup.ts';
import { expectClose } from '../compare.ts';
import { referenceMotorcycle } from '../loop/scenes.ts';
import { plainPid, play, playInputs } from './players.ts';

const velocity = { kind: 'velocity' } as const;
const under = (antiWindup: IntegralRule): Pick<PidSetup, 'form'> => ({
  form: { kind: 'positional', antiWindup },
});
/** Speeds about 20 m/s on a grid of 1/64, so that all arithmetic with dyadic gains is exact. */
const dyadicSpeeds = (reach: number) =>
  fc.array(
    fc.integer({ min: -64 * reach, max: 64 * reach }).map((n) => 20 + n / 64),
    { minLength: 1, maxLength: 60 },
  );

describe('velocity and positional form', () => {
  test('are equal in exact arithmetic, for P, PI and PID, while no limit is reached', () => {
    fc.assert(
      fc.property(
        dyadicSpeeds(0.25),
        fc.constantFrom(0, 0.125),
        fc.constantFrom(0, 0.25),
        fc.constantFrom('forward', 'backward'),
        fc.constantFrom(0, 0.5, 1),
        (measured, ki, kd, integration, setpointWeight) => {
          // kd / (Tf + Ts) and Tf / (Tf + Ts) are 1/4 and 1/2: exact too, and so is the filter over few samples.
          const setup = {
            ...plainPid,
            ki,
            kd,
            derivativeFilter: 0.5,
            integration,
            setpointWeight,
          } as PidSetup;
          const short = measured.slice(0, 20);
          const limits = { low: -1000, high: 1000 };
          expect(play({ ...setup, form: velocity }, short, limits).command).toEqual(
            play(setup, short, limits).command,
          );
        },
      ),
      { seed: 4, numRuns: 200 },
    );
  });

  test('velocity form takes up from the limit without a lag', () => {
    // e = 8 for three samples holds u at 1; then e = 0: du = -kp 8 + ki Ts 8 = -2 + 0.5, u = 1 - 1.5 -> 0 at the limit.
    // From e = 0 to e = 1: du = 0.25 + 0, u = 0.25.
    const { command, limited } = play({ ...plainPid, form: velocity }, [12, 12, 12, 20, 19]);
    expect(command).toEqual([2.5, 1.5, 1.5, -0.5, 0.25]);
    expect(limited).toEqual([1, 1, 1, 0, 0.25]);
  });
});

test('without more it is the plain PI, bit for bit, under each of its anti-windups', () => {
  const rules: readonly PiSetup['antiWindup'][] = [
    { kind: 'none' },
    { kind: 'conditional' },
    { kind: 'back_calculation', trackingTime: 3 },
  ];
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: 5, max: 35, noNaN: true }), { minLength: 1, maxLength: 80 }),
      fc.constantFrom(...rules),
      fc.constantFrom('forward', 'backward'),
      fc.double({ min: 0, max: 1, noNaN: true }),
      (measured, antiWindup, integration, setpointWeight) => {
        const gains = { kp: 0.13, ki: 0.07, sample: 0.02, integration, setpointWeight } as const;
        const pi: PiSetup = {
          kind: 'pi',
          ...gains,
          computingDelay: 0,
          antiWindup,
          ramp: null,
          design: null,
        };
        const pid: PidSetup = { ...plainPid, ...gains, ...under(antiWindup) };
        expect(play(pid, measured).command).toEqual(play(pi, measured).command);
      },
    ),
    { seed: 5, numRuns: 200 },
  );
});

test('P alone works about the throttle that it took over', () => {
  expect(play({ ...plainPid, ki: 0 }, [20, 19, 21, 19.5]).command).toEqual([0.5, 0.75, 0.25, 0.625]);
});

describe('the derivative', () => {
  test('answers a step of the measurement by its closed form', () => {
    // kd s / (1 + Tf s) by backward differences: D(k) = -kd / (Tf + Ts) d a^k, a = Tf / (Tf + Ts), d the step.
    const [kd, tf, ts, d] = [0.4, 0.3, 0.1, 0.5];
    const setup = { ...plainPid, kp: 0, ki: 0, kd, derivativeFilter: tf, sample: ts };
    const { command } = play(setup, [20, ...Array.from({ length: 8 }, () => 20 + d)], { low: -9, high: 9 });
    const a = tf / (tf + ts);
    const expected = [0.5, ...Array.from({ length: 8 }, (_, k) => 0.5 - (kd / (tf + ts)) * d * a ** k)];
    expectClose(command, expected, 1e-13);
  });

  test('answers a ramp with kd times its slope in the end, and not a step of the reference', () => {
    const setup = { ...plainPid, kp: 0, ki: 0, kd: 0.4, derivativeFilter: 0.3, sample: 0.1 };
    const ramp = Array.from({ length: 200 }, (_, k) => 20 + 0.02 * k);
    expectClose(play(setup, ramp, { low: -9, high: 9 }).command.at(-1)!, 0.5 - 0.4 * 0.2, 1e-12);
    const step = playInputs(setup, [
      { measured: 20, reference: 20 },
      { measured: 20, reference: 23 },
    ]);
    expect(step.command).toEqual([0.5, 0.5]);
  });
});

describe('what holds the integral', () => {
  test('clamping leaves it what the range has beside P: the command comes off the limit as the error turns', () => {
    // e = 8: P = 2, I is clamped to 1 - 2 = -1. e = 0: u = -1; clamped to 0: I = 0.  e = 1: u = 0.25.
    const { command } = play({ ...plainPid, ...under({ kind: 'clamping' }) }, [12, 12, 20, 19]);
    expect(command).toEqual([2.5, 1, -1, 0.25]);
  });

  test('clamping and conditional integration meet in the limit of small samples', () => {
    // A long saturation, then the error falls in a line through 0: both leave the limit; clamping has followed P, so it
    // leaves at once, conditional later; both end in the same integral increment for the same error afterwards.
    const leave = (rule: IntegralRule, sample: number): number => {
      const count = Math.round(20 / sample);
      const measured = Array.from({ length: count }, (_, k) => 19.9 + (0.1 * k) / count);
      const setup = { ...plainPid, kp: 0.01, ki: 0.5, sample, ...under(rule) };
      const { command } = play(setup, measured, { from: 0.2 });
      return command.findIndex((u) => u >= 1) * sample;
    };
    for (const sample of [0.1, 0.01, 0.001])
      expectClose(leave({ kind: 'clamping' }, sample), leave({ kind: 'conditional' }, sample), 1.01 * sample);
    // Both stop the integral at the limit: neither ever asks for more than a sample's increment beyond it.
    const most = (rule: IntegralRule, sample: number): number =>
      Math.max(
        ...play(
          { ...plainPid, kp: 0, ki: 0.5, sample, ...under(rule) },
          Array.from({ length: Math.round(10 / sample) }, () => 19),
        ).command,
      );
    for (const sample of [0.1, 0.01, 0.001]) {
      expectClose(most({ kind: 'clamping' }, sample), 1, 1e-12);
      expectClose(most({ kind: 'conditional' }, sample), 1, 0.5 * sample + 1e-12);
    }
  });

  test('a cap in throttle holds at its size; against the sum of the error it holds at ki times it, and is counted', () => {
    const long = Array.from({ length: 40 }, () => 19);
    const right = play({ ...plainPid, ...under({ kind: 'cap', cap: 0.6, of: 'throttle' }) }, long);
    expectClose(right.integral.at(-1)!, 0.6, 1e-15);
    expect(right.bus[BITE_INTEGRAL_CAP]).toBe(0);
    // ki = 0.125: a figure of 0.6 m/s s caps at 0.075 of throttle.
    const wrong = play({ ...plainPid, ...under({ kind: 'cap', cap: 0.6, of: 'summed_error' }) }, long);
    expectClose(wrong.integral.at(-1)!, 0.075, 1e-15);
    expect(wrong.bus[BITE_INTEGRAL_CAP]).toBe(40);
  });

  test('a test of signs works between -1 and 1, and winds up at a lower limit above 0', () => {
    const long = Array.from({ length: 30 }, () => 28);
    const rule = under({ kind: 'sign_test' });
    const proper = under({ kind: 'conditional' });
    const both = { low: -1, high: 1 };
    expect(play({ ...plainPid, ...rule }, long, both).command).toEqual(
      play({ ...plainPid, ...proper }, long, both).command,
    );
    // kp e = -1 keeps u = -0.5 + 0.9 below the limit of 0.5 but above 0: u and e differ in sign, so it integrates.
    const oneSign = { low: 0.5, high: 0.95, from: 0.9 };
    const slow = Array.from({ length: 4 }, () => 22);
    const wrong = play({ ...plainPid, ...rule }, slow, oneSign);
    const right = play({ ...plainPid, ...proper }, slow, oneSign);
    expect(right.integral).toEqual([0.9, 0.9, 0.9, 0.9]);
    expectClose(wrong.integral, [0.9, 0.775, 0.65, 0.525], 1e-15);
    expect(wrong.bus[BITE_SIGN_TEST]).toBe(4);
  });
});

describe('the dead band', () => {
  const banded = { ...plainPid, deadBand: { halfWidth: 0.5, integratesInside: false } };
  test('lets nothing happen inside of it, and counts from its edge outside', () => {
    // e = 0.25, -0.5: nothing. e = 1.5: 1 counts. Then I has grown by ki Ts 1 = 1/16.
    expect(play(banded, [19.75, 20.5, 18.5, 20]).command).toEqual([0.5, 0.5, 0.75, 0.5625]);
  });
  test('whose integral runs on inside creeps on, and that is counted', () => {
    const slip = { ...banded, deadBand: { halfWidth: 0.5, integratesInside: true } };
    const { command, bus } = play(slip, [19.75, 19.75, 19.75, 20]);
    expect(command).toEqual([0.5, 0.5 + 1 / 64, 0.5 + 2 / 64, 0.5 + 3 / 64]);
    expect(bus[BITE_DEAD_BAND]).toBe(3);
  });
});

/** Gears 0 and 1 with rows of their own, dyadic factors. */
const schedule: GainSchedule = {
  speed: Float64Array.of(10, 20, 30),
  rows: [
    { gear: null, proportional: Float64Array.of(2, 1, 0.5), integral: Float64Array.of(4, 1, 0.5) },
    { gear: 1, proportional: Float64Array.of(1, 0.5, 0.25), integral: Float64Array.of(1, 0.5, 0.25) },
  ],
};
const twoGearVehicle = {
  ...referenceMotorcycle,
  drive: {
    ...referenceMotorcycle.drive,
    gears: [
      { ratio: 1.5, inertia: 0 },
      { ratio: 1, inertia: 0 },
    ],
  },
};

describe('scheduled gains', () => {
  test('lie on straight lines between corners and hold beyond them', () => {
    // P alone from rest at 20 m/s: u - 0.5 = kp(y) e with kp the gain at the measured speed, from one sample to the next.
    const at = (y: number): number => {
      const { command } = play({ ...plainPid, ki: 0, schedule }, [y], { low: -99, high: 99 });
      return (command[0]! - 0.5) / (20 - y);
    };
    expectClose([at(5), at(10), at(15), at(25), at(40)], [0.5, 0.5, 0.375, 0.1875, 0.125], 1e-14);
  });

  test('change without a bump, in both forms, whatever the set-point weight', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 12, max: 28, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.constantFrom('positional', 'velocity'),
        (y, setpointWeight, form) => {
          const setup: PidSetup = {
            ...plainPid,
            ki: 0,
            setpointWeight,
            schedule,
            form: form === 'velocity' ? velocity : plainPid.form,
          };
          // The gear changes while the measurement stands still.
          const geared = { low: -99, high: 99, vehicle: twoGearVehicle };
          const { command } = playInputs(
            setup,
            [0, 0, 1, 1, 0].map((gear) => ({ measured: y, gear })),
            geared,
          );
          for (const u of command.slice(1)) expectClose(u, command[0]!, 1e-12);
        },
      ),
      { seed: 6, numRuns: 100 },
    );
  });

  test('keep both forms equal, to rounding', () => {
    fc.assert(
      fc.property(dyadicSpeeds(8), (measured) => {
        const setup = { ...plainPid, kd: 0.1, derivativeFilter: 0.5, schedule };
        const limits = { low: -1e6, high: 1e6 };
        expectClose(
          play({ ...setup, form: velocity }, measured, limits).command,
          play(setup, measured, limits).command,
          1e-10,
        );
      }),
      { seed: 7, numRuns: 100 },
    );
  });
});

test('no command leaves its range or moves faster than its rate, whatever the form and the anti-windup', () => {
  const forms: readonly PidSetup['form'][] = [
    velocity,
    ...(
      [
        { kind: 'none' },
        { kind: 'conditional' },
        { kind: 'back_calculation', trackingTime: 1 },
        { kind: 'clamping' },
        { kind: 'cap', cap: 0.4, of: 'throttle' },
        { kind: 'cap', cap: 3, of: 'summed_error' },
        { kind: 'sign_test' },
      ] as const
    ).map((antiWindup) => under(antiWindup).form),
  ];
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: 0, max: 60, noNaN: true }), { minLength: 2, maxLength: 80 }),
      fc.constantFrom(...forms),
      fc.constantFrom(null, 0.2, 2),
      fc.constantFrom('forward', 'backward'),
      (measured, form, rateLimit, integration) => {
        const setup: PidSetup = {
          ...plainPid,
          kd: 0.05,
          derivativeFilter: 0.1,
          form,
          rateLimit,
          integration,
        };
        const { limited } = play(setup, measured, { low: -0.5, high: 0.9, from: 0.3 });
        let last = 0.3;
        for (const u of limited) {
          expect(u >= -0.5 && u <= 0.9).toBe(true);
          if (rateLimit !== null) expect(Math.abs(u - last)).toBeLessThanOrEqual(rateLimit * 0.5 + 1e-15);
          last = u;
        }
      },
    ),
    { seed: 8, numRuns: 300 },
  );
});
