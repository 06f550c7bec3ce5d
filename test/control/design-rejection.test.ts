import { describe, expect, test } from 'vitest';
import { designRejection } from '../../src/control/design-rejection.ts';
import { gainRegion } from '../../src/control/gain-region.ts';
import { sampledLoop } from '../../src/control/sampled-loop.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import { linearise } from '../../src/vehicle/linearise.ts';
import { expectClose } from '../compare.ts';
import { referenceMotorcycle, still } from '../vehicle/vehicles.ts';

/** Largest |1 / (1 + L)| of L = (kp + ki / s) b exp(-delay s) / ((s - a)(lag s + 1)), by plain scanning. */
function peakSensitivity(
  kp: number,
  ki: number,
  { a, b, lag, delay }: { a: number; b: number; lag: number; delay: number },
): number {
  let peak = 0;
  for (let i = 0; i <= 600; i++) {
    const w = 10 ** (-3 + (i * 4.2) / 600);
    // (kp + ki / jw) b (cos - j sin) / ((jw - a)(1 + j w lag))
    const numerator = [kp * b, (-ki * b) / w] as const;
    const turned = [
      numerator[0] * Math.cos(w * delay) + numerator[1] * Math.sin(w * delay),
      numerator[1] * Math.cos(w * delay) - numerator[0] * Math.sin(w * delay),
    ] as const;
    const below = [-a - w * w * lag, w - a * w * lag] as const;
    const size = below[0] ** 2 + below[1] ** 2;
    const re = (turned[0] * below[0] + turned[1] * below[1]) / size;
    const im = (turned[1] * below[0] - turned[0] * below[1]) / size;
    peak = Math.max(peak, 1 / Math.hypot(1 + re, im));
  }
  return peak;
}

const point = {
  at: 25,
  surroundings: still,
  sample: 0.01,
  computingDelay: 0,
  integration: 'forward',
  setpointWeight: 0,
} as const;

describe('designRejection', () => {
  test.each([
    { bound: 1.4, deadTime: 0.495, lag: 0 },
    { bound: 1.7, deadTime: 0.495, lag: 0 },
    { bound: 1.7, deadTime: 0.195, lag: 0.5 },
    { bound: 2, deadTime: 0.995, lag: 0.2 },
  ])(
    'finds no less than a brute grid of gains, bound $bound, dead time $deadTime s, lag $lag s',
    ({ bound, deadTime, lag }) => {
      const vehicle = referenceMotorcycle({ actuator: { ...IDEAL_ACTUATOR, deadTime, lag } });
      // rho CdA v / m and full force over mass; half a sample of hold beside the dead time.
      const plant = { a: -(1.2 * 0.6 * 25) / 260, b: 900 / 260, lag, delay: deadTime + 0.005 };
      let best = { kp: 0, ki: 0 };
      const whole = deadTime + lag;
      for (let i = 1; i <= 40; i++)
        for (let k = 1; k <= 60; k++) {
          const kp = (i / 40) * (1 / (plant.b * whole));
          const ki = (k / 60) * (0.4 / (plant.b * whole * whole));
          if (ki > best.ki && peakSensitivity(kp, ki, plant) <= bound) best = { kp, ki };
        }
      const { kp, ki, record } = designRejection({ ...point, vehicle, sensitivity: bound });
      expect(best.ki).toBeGreaterThan(0);
      // A step of the grid is 1/60 of its range.
      expect(ki).toBeGreaterThanOrEqual(best.ki * 0.995);
      expect(ki).toBeLessThan(best.ki + 0.4 / (plant.b * whole * whole) / 30);
      expectClose(peakSensitivity(kp, ki, plant), bound, 0.01);
      expect(record.promised.sensitivity).toBeLessThanOrEqual(bound);
      expect(record.words).toContain(`no more than ${bound}`);
    },
  );

  test('says which sensitivity cannot be kept', () => {
    const refused = (sensitivity: number): string => {
      try {
        designRejection({ ...point, vehicle: referenceMotorcycle(), sensitivity });
      } catch (error) {
        if (error instanceof InputError) return error.problems[0]!.code;
      }
      return '';
    };
    expect(refused(1)).toBe('out-of-range');
    expect(refused(1.4)).toBe('');
  });
});

describe('gainRegion', () => {
  const loopOf = (deadTime: number, mass: number) => {
    const vehicle = referenceMotorcycle({
      mass,
      actuator: { ...IDEAL_ACTUATOR, deadTime, lag: 0.1 },
      sensor: { ...IDEAL_SENSOR, filter: 0.05 },
    });
    const model = linearise(vehicle, { speed: 25, surroundings: still });
    return { loop: sampledLoop(vehicle, model!, point), sample: 0.01, mass };
  };

  test('of two loops is where both regions are', () => {
    const [light, heavy] = [loopOf(0.2, 180), loopOf(0.4, 400)];
    const [first, second, both] = [[light], [heavy], [light, heavy]].map((loops) => gainRegion(loops, 1.6));
    for (const kp of [0.02, 0.1, 0.3, 0.5])
      expectClose(
        both!.greatestIntegral(kp),
        Math.min(first!.greatestIntegral(kp), second!.greatestIntegral(kp)),
        1e-12,
      );
  });

  test('grows with the gains that a schedule takes away', () => {
    const plain = loopOf(0.3, 260);
    const halved = { ...plain, factors: { proportional: 0.5, integral: 0.5 } };
    const [one, other] = [gainRegion([plain], 1.7), gainRegion([halved], 1.7)];
    for (const kp of [0.05, 0.2])
      expectClose(other!.greatestIntegral(2 * kp), 2 * one!.greatestIntegral(kp), 1e-9);
  });

  test('has no gains above those that P alone bears', () => {
    const region = gainRegion([loopOf(0.3, 260)], 1.7);
    expect(region.ranges).toHaveLength(1);
    expect(region.greatestIntegral(100)).toBe(0);
    expect(region.greatestIntegral(region.ranges[0]!.high)).toBeGreaterThan(0);
  });
});
