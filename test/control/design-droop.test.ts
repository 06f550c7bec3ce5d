import { describe, expect, test } from 'vitest';
import { designDroop } from '../../src/control/design-droop.ts';
import type { DesignPoint } from '../../src/control/design-point.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import { roadLoadOfRegulation } from '../../src/vehicle/road-load.ts';
import { expectClose } from '../compare.ts';
import { referenceMotorcycle, still } from '../vehicle/vehicles.ts';

const ideal: DesignPoint = {
  vehicle: referenceMotorcycle(),
  at: 25,
  surroundings: still,
  sample: 0.0005,
  computingDelay: 0,
  integration: 'forward',
  setpointWeight: 0,
};

describe('designDroop', () => {
  test('gives back the gains of the published motorcycle example', () => {
    // 40 CFR 86.529-98, row of 250 kg, 25 m/s: poles at 0.5 rad/s with damping 1 take 232.763 N/(m/s) and
    // 62.5 N/(m/s)/s; a step of 1 % (24.515 N) costs 0.072150 m/s at 2 s (recomputed by hand, linear).
    const vehicle = referenceMotorcycle({
      mass: 250,
      roadLoad: roadLoadOfRegulation({
        f0: 13.06,
        f1: 0,
        f2: 0.0266 * 12.96,
        testMass: 250,
        airDensity: 1.2,
      }),
      drive: forceDrive({ peakForce: 1000, peakPower: null, closedThrottleForce: 0, lag: 0, derate: 'none' }),
    });
    const { kp, ki, record } = designDroop({
      ...ideal,
      vehicle,
      droop: 0.07215,
      gradeStep: 0.01,
      damping: 1,
    });
    expectClose(1000 * kp, 232.763, 0.15);
    expectClose(1000 * ki, 62.5, 0.1);
    expectClose(record.promised.frequency!, 0.5, 5e-4);
  });

  test.each([0.3, 0.8, 1, 1.7])('meets the closed form of a loop without lags, damping %d', (damping) => {
    const gradeStep = 0.04;
    // The step takes m g (sin - c0 (1 - cos)) at once.
    const cosine = 1 / Math.sqrt(1 + gradeStep ** 2);
    const push = 9.80665 * (gradeStep * cosine - 0.015 * (1 - cosine));
    const root = Math.sqrt(Math.abs(1 - damping ** 2));
    const angle = damping < 1 ? Math.acos(damping) / root : damping > 1 ? Math.acosh(damping) / root : 1;
    const frequency = 0.4;
    const droop = (push / frequency) * Math.exp(-damping * angle);
    const { kp, ki } = designDroop({ ...ideal, droop, gradeStep, damping });
    const a = (1.2 * 0.6 * 25) / 260;
    const b = 900 / 260;
    expectClose(kp / ((2 * damping * frequency - a) / b), 1, 2e-3);
    expectClose(ki / (frequency ** 2 / b), 1, 2e-3);
  });

  const lagged: DesignPoint = {
    ...ideal,
    vehicle: referenceMotorcycle({
      drive: forceDrive({
        peakForce: 900,
        peakPower: null,
        closedThrottleForce: 40,
        lag: 0.15,
        derate: 'none',
      }),
      actuator: { ...IDEAL_ACTUATOR, lag: 0.06, rateLimit: null },
      sensor: { ...IDEAL_SENSOR, filter: 0.05, delay: 0.02, scaleError: 0.01 },
    }),
    sample: 0.02,
    computingDelay: 0.005,
    integration: 'backward',
  };
  test.each([
    [2, 0.06, 0.8],
    [2, 0.06, 3],
    [2, 0.06, 0.2],
    [7.2, 0.06, 1],
    [1.3, 0.06, 0.8],
    [2, -0.06, 0.8],
  ])(
    'with lags promises what was asked: %d km/h on a grade of %d, damping %d',
    (droopKmh, gradeStep, damping) => {
      const droop = droopKmh / 3.6;
      const { record } = designDroop({ ...lagged, droop, gradeStep, damping });
      expectClose(record.promised.droop! / droop, 1, 1e-5);
      expect(record.promised.damping).toBe(damping);
      expect(record.asked).toEqual({ droop, gradeStep, damping });
      expect(record.words).toContain(`${gradeStep > 0 ? 'lose' : 'gain'} ${droopKmh} km/h`);
    },
  );

  test('refuses what the lags do not allow and names a droop that then works', () => {
    let allowed = '';
    try {
      designDroop({ ...lagged, droop: 0.1, gradeStep: 0.06, damping: 0.8 });
    } catch (error) {
      if (error instanceof InputError && error.code === 'design-not-feasible')
        allowed = error.problems[0]!.allowed!;
    }
    const reachable = Number(/([\d.]+) km\/h with this damping/.exec(allowed)![1]) / 3.6;
    const { record } = designDroop({ ...lagged, droop: reachable, gradeStep: 0.06, damping: 0.8 });
    expectClose(record.promised.droop!, reachable, 1e-4);
    expect(() => designDroop({ ...lagged, droop: 0.97 * reachable, gradeStep: 0.06, damping: 0.8 })).toThrow(
      InputError,
    );
  });
});
