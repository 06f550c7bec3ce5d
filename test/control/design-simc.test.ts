import { describe, expect, test } from 'vitest';
import { designSimc, simcGains } from '../../src/control/design-simc.ts';
import { halfRule } from '../../src/control/half-rule.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { IDEAL_ACTUATOR } from '../../src/vehicle/ideal.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';
import { referenceMotorcycle, still, textbookCar } from '../vehicle/vehicles.ts';

interface Published {
  readonly simc: {
    readonly half_rule_example: {
      readonly published: { readonly tau_1: number; readonly theta: number; readonly Kc: number };
    };
    readonly cruise_style_example: { readonly Kc: number; readonly tau_I: number; readonly ki: number };
  };
  readonly lambda_tuning: {
    readonly example_motorcycle: {
      readonly K: number;
      readonly T_s: number;
      readonly L_s: number;
      readonly cases: readonly { readonly lambda_s: number; readonly Kc: number; readonly ki: number }[];
    };
  };
}
const { simc, lambda_tuning } = readReference<Published>('linear/published_examples.json');

describe('halfRule', () => {
  test('gives the published model of the published plant', () => {
    // (-0.3 s + 1)(0.08 s + 1) / ((2 s + 1)(s + 1)(0.4 s + 1)(0.2 s + 1)(0.05 s + 1)^3): the inverse response of 0.3 s
    // counts as dead time, and the lead of 0.08 s takes off as much.
    const { lag, delay } = halfRule([0.2, 1, 0.05, 0.05, 2, 0.05, 0.4], 0.3 - 0.08);
    const { published } = simc.half_rule_example;
    expectClose([lag, delay], [published.tau_1, published.theta], 1e-12);
    // The tight choice, tc = theta.
    expectClose(simcGains({ gain: 1 / lag, lag, delay }, delay, 'simc').kp, published.Kc, 0.005);
  });

  test('leaves an integrator one, with half of the longest lag and all others as dead time', () => {
    // Skogestad's example 1 / (s (s + 1)^2) has theta 1.5 s (from memory).
    const { lag, delay } = halfRule([Number.POSITIVE_INFINITY, 1, 1], 0);
    expect(lag).toBe(Number.POSITIVE_INFINITY);
    expectClose(delay, 1.5, 1e-12);
  });
});

describe('designSimc', () => {
  test('gives the published gains of a lag of 10 s with a dead time of 1 s', () => {
    const { kp, ki } = simcGains({ gain: 0.1, lag: 10, delay: 1 }, 1, 'simc');
    expectClose(
      [kp, kp / ki, ki],
      [simc.cruise_style_example.Kc, simc.cruise_style_example.tau_I, simc.cruise_style_example.ki],
      1e-12,
    );
  });

  test.each(lambda_tuning.example_motorcycle.cases)(
    'gives the gains of lambda tuning at $lambda_s s',
    ({ lambda_s, Kc, ki }) => {
      const { K, T_s, L_s } = lambda_tuning.example_motorcycle;
      const gains = simcGains({ gain: K / T_s, lag: T_s, delay: L_s }, lambda_s, 'lambda');
      expectClose([gains.kp, gains.ki], [Kc, ki], 1e-9);
    },
  );

  test('gives the worked gains of the textbook car', () => {
    // b 1.3203, a -0.010124 (Astrom and Murray, section 4.1, gear 4 at 20 m/s); a dead time of 0.49 s and half a sample of
    // 0.01 s; tc 2 s: Kc = 1 / (1.3203 x 2.5) = 0.3029, Ti = 4 x 2.5 = 10 s, by hand.
    const car = textbookCar();
    const designed = designSimc({
      vehicle: { ...car, actuator: { ...IDEAL_ACTUATOR, deadTime: 0.49 } },
      at: 20,
      surroundings: { ...still, airDensity: 1.3 },
      sample: 0.02,
      computingDelay: 0,
      integration: 'forward',
      setpointWeight: 0,
      closedLoop: 2,
      rule: 'simc',
    });
    expectClose([designed.kp, designed.ki], [0.302962, 0.0302962], 2e-5);
    expectClose(designed.record.promised.delay!, 0.5, 1e-12);
    expect(designed.record.words).toContain(
      'SIMC for a closed loop of 2 s beside an effective delay of 0.5 s',
    );
  });

  test('takes the delay for the closed loop under tight, and half of the longest lag beside it', () => {
    const designed = designSimc({
      ...point,
      vehicle: referenceMotorcycle({ actuator: { ...IDEAL_ACTUATOR, lag: 0.4, deadTime: 0.09 } }),
      closedLoop: 'tight',
      rule: 'simc',
    });
    // a = -rho CdA v / m = -0.0692308, b = 900 / 260; lags 14.4444 and 0.4 s: 14.6444 s, 0.09 + 0.01 + 0.2 s.
    const [lag, delay] = [14.644444444, 0.3];
    const slope = (3.461538462 * 14.444444444) / lag;
    expectClose(designed.kp, 1 / (slope * 2 * delay), 1e-6);
    expectClose(designed.kp / designed.ki, 4 * 2 * delay, 1e-6);
    expectClose(designed.record.asked.closedLoop!, delay, 1e-9);
  });

  test('refuses lambda tuning of a vehicle that runs away, and a closed loop of no time', () => {
    const refused = (work: () => unknown): string => {
      try {
        work();
      } catch (error) {
        if (error instanceof InputError) return error.problems[0]!.code;
      }
      return '';
    };
    // At 2 m/s the car's torque rises faster with the speed than its drag does.
    const slow = { ...point, vehicle: textbookCar(), at: 2, surroundings: { ...still, airDensity: 1.3 } };
    expect(refused(() => designSimc({ ...slow, closedLoop: 2, rule: 'lambda' }))).toBe('design-not-feasible');
    expect(refused(() => designSimc({ ...slow, closedLoop: 2, rule: 'simc' }))).toBe('');
    expect(refused(() => designSimc({ ...point, closedLoop: 0, rule: 'simc' }))).toBe('out-of-range');
  });
});

const point = {
  vehicle: referenceMotorcycle(),
  at: 25,
  surroundings: still,
  sample: 0.02,
  computingDelay: 0,
  integration: 'forward',
  setpointWeight: 0,
} as const;
