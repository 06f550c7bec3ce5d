import { describe, expect, test } from 'vitest';
import { sampledLoop } from '../../src/control/sampled-loop.ts';
import {
  addComplex,
  type Complex,
  complex,
  divideComplex,
  expComplex,
  multiplyComplex,
  powerOfComplex,
  sizeOfComplex,
  subtractComplex,
} from '../../src/numeric/complex.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { LinearVehicle } from '../../src/vehicle/linearise.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';
import { referenceMotorcycle } from '../vehicle/vehicles.ts';

interface Loop {
  readonly closed_loop_poles: [number, number][];
  readonly margins: {
    readonly gain_margin: number;
    readonly phase_margin_deg: number;
    readonly w_gain_crossover: number;
  };
  readonly unit_step_first_41_samples: number[];
}
interface Plant {
  readonly id: string;
  readonly loops: { readonly forward: Loop; readonly backward: Loop };
}
const reference = readReference<{
  plants: Plant[];
  fractional_delay_example: { a: number; b: number; phi: number; gamma0: number; gamma1: number };
}>('linear/linear_discrete.json');

// The motorcycle of the reference: dv/dt = -a v + b u with a lag of 0.25 s, a filter of 0.15 s or a dead time of 0.3 s.
const model: LinearVehicle = {
  speed: 25,
  throttle: 0.4,
  feasible: true,
  a: -0.08307692307692306,
  b: 3.4615384615384617,
  gradeGain: -9.80665,
  headwindGain: 0,
  crosswindGain: 0,
  effectiveMass: 260,
};
const withLags = (actuator: number, drive: number, filter: number, delay: number): Vehicle => {
  const plain = referenceMotorcycle();
  return {
    ...plain,
    actuator: { ...IDEAL_ACTUATOR, lag: actuator, rateLimit: null },
    drive: { ...plain.drive, lag: drive },
    sensor: { ...IDEAL_SENSOR, filter, delay, scaleError: 0 },
  };
};
const CASES: [string, Vehicle, number, { kp: number; ki: number }, number][] = [
  ['moto_first_order', withLags(0, 0, 0, 0), 0, { kp: 0.17, ki: 0.067 }, 0],
  ['moto_delay_exact', withLags(0, 0, 0, 0.2), 0.1, { kp: 0.17, ki: 0.067 }, 3],
  ['moto_actuator_lag', withLags(0, 0.25, 0, 0), 0, { kp: 0.17, ki: 0.067 }, 0],
  ['moto_third_order', withLags(0.25, 0.15, 0, 0), 0, { kp: 0.5, ki: 0.25 }, 0],
];

const byPlace = (p: readonly number[], q: readonly number[]): number => p[0]! - q[0]! || p[1]! - q[1]!;

describe.each(CASES)('the sampled loop %s', (id, vehicle, computingDelay, gains, delay) => {
  const plant = reference.plants.find((entry) => entry.id === id)!;
  test.each(['forward', 'backward'] as const)('agrees with the reference, %s rule', (integration) => {
    const expected = plant.loops[integration];
    const loop = sampledLoop(vehicle, model, { sample: 0.1, computingDelay, integration });
    const poles = loop.poles(gains).map((s) => {
      const z = expComplex(complex(0.1 * s.re, 0.1 * s.im));
      return [z.re, z.im];
    });
    expectClose(
      poles.sort(byPlace).flat(),
      expected.closed_loop_poles
        .map((p) => [...p])
        .sort(byPlace)
        .flat(),
      2e-9,
    );

    const { speed } = loop.respond(gains, { reference: 1, setpointWeight: 1, disturbance: 0 }, 4, 0.1);
    // The reference has its dead time before the output: the speed itself is that much earlier.
    const seen = Array.from({ length: 41 }, (_, k) => (k < delay ? 0 : speed[k - delay]!));
    expectClose(seen, expected.unit_step_first_41_samples, 2e-11);

    const at = expected.margins.w_gain_crossover;
    const value = loop.openLoop(gains, at);
    expectClose(sizeOfComplex(value), 1, 1e-9);
    expectClose((Math.atan2(-value.im, -value.re) * 180) / Math.PI, expected.margins.phase_margin_deg, 1e-7);
  });
});

test('a dead time that is no whole number of samples gives the poles of the fractional-delay plant', () => {
  const { phi, gamma0, gamma1 } = reference.fractional_delay_example;
  const gains = { kp: 0.17, ki: 0.067 };
  const loop = sampledLoop(withLags(0, 0, 0, 0.25), model, {
    sample: 0.1,
    computingDelay: 0,
    integration: 'forward',
  });
  const poles = loop.poles(gains);
  expect(poles).toHaveLength(5);
  for (const s of poles) {
    const z = expComplex(complex(0.1 * s.re, 0.1 * s.im));
    const delayed = addComplex(
      divideComplex(complex(gamma0), powerOfComplex(z, 2)),
      divideComplex(complex(gamma1), powerOfComplex(z, 3)),
    );
    const plant: Complex = divideComplex(delayed, subtractComplex(z, complex(phi)));
    const controller = addComplex(
      complex(gains.kp),
      divideComplex(complex(gains.ki * 0.1), subtractComplex(z, complex(1))),
    );
    expect(sizeOfComplex(addComplex(complex(1), multiplyComplex(controller, plant)))).toBeLessThan(1e-7);
  }
});

describe('what delays the loop', () => {
  const timing = { sample: 0.02, computingDelay: 0, integration: 'forward' as const };
  const gains = { kp: 0.17, ki: 0.067 };
  const plain = withLags(0.06, 0.15, 0.05, 0);
  const frequencies = [0.01, 0.3, 2, 9];
  const ratios = (vehicle: Vehicle, more: Partial<typeof timing> = {}): Complex[] => {
    const without = sampledLoop(plain, model, timing);
    const loop = sampledLoop(vehicle, model, { ...timing, ...more });
    return frequencies.map((w) => divideComplex(loop.openLoop(gains, w), without.openLoop(gains, w)));
  };
  const expectDelay = (found: readonly Complex[], delay: number, tolerance: number): void =>
    found.forEach(({ re, im }, i) => {
      expectClose(
        [re, im],
        [Math.cos(frequencies[i]! * delay), -Math.sin(frequencies[i]! * delay)],
        tolerance,
      );
    });
  const pulses = (reading: NonNullable<Vehicle['sensor']['pulses']>['reading'], delay: number): Vehicle => ({
    ...plain,
    sensor: { ...plain.sensor, delay, pulses: { spacing: 1.5, reading } },
  });

  test('is dead time, computing and transport delay, each by its phase', () => {
    expectDelay(ratios({ ...plain, actuator: { ...plain.actuator, deadTime: 0.08 } }), 0.08, 1e-9);
    expectDelay(ratios(plain, { computingDelay: 0.08 }), 0.08, 1e-9);
    const all = { ...plain, actuator: { ...plain.actuator, deadTime: 0.03 } };
    const sensed = { ...all, sensor: { ...plain.sensor, delay: 0.02 } };
    expectDelay(ratios(sensed, { computingDelay: 0.01 }), 0.06, 1e-9);
  });

  test('is half the window of a count, and one period of pulses that are timed', () => {
    expectDelay(ratios(pulses({ kind: 'counted', window: 0.12 }, 0.02)), 0.08, 1e-9);
    // 1.5 m at 25 m/s: 60 ms.
    expectDelay(ratios(pulses({ kind: 'timed', clock: 1e-6 }, 0.02)), 0.08, 1e-9);
  });
});

describe('placePair', () => {
  const timing = { sample: 0.02, computingDelay: 0.005, integration: 'forward' as const };
  const loop = sampledLoop(withLags(0.06, 0.15, 0.05, 0.02), model, timing);
  test.each([
    [0.5, 0.3],
    [0.5, 0.8],
    [0.3, 1],
    [0.2, 2],
    [1.2, 0.6],
  ])('puts two poles where it was told: frequency %d, damping %d', (frequency, damping) => {
    const poles = loop.poles(loop.placePair(frequency, damping));
    const root = Math.sqrt(Math.abs(1 - damping * damping));
    const wanted =
      damping < 1
        ? [complex(-damping * frequency, root * frequency)]
        : [complex(-(damping + root) * frequency), complex(-(damping - root) * frequency)];
    // A double pole is only good to the square root of the rounding error.
    const tolerance = damping === 1 ? 2e-3 * frequency : 1e-7;
    for (const s of wanted) {
      const miss = Math.min(...poles.map((pole) => Math.hypot(pole.re - s.re, pole.im - s.im)));
      expect(miss).toBeLessThan(tolerance);
    }
  });

  test('comes to the closed form where there are no lags and the sample is short', () => {
    const ideal = sampledLoop(withLags(0, 0, 0, 0), model, {
      sample: 1e-4,
      computingDelay: 0,
      integration: 'forward',
    });
    const { kp, ki } = ideal.placePair(0.483017073407, 0.69010673056);
    // published_examples.json, pi_pole_placement, 12 s and 5 %.
    expectClose(kp, 0.168592592593, 2e-5);
    expectClose(ki, 0.0673993647029, 1e-5);
  });
});

test('slow poles of a loop with a long delay, taken at a coarser sample, are roots of the loop itself', () => {
  const slow = withLags(0.06, 0.15, 0.05, 0.5);
  for (const integration of ['forward', 'backward'] as const) {
    const loop = sampledLoop(slow, model, { sample: 0.002, computingDelay: 0, integration });
    for (const damping of [0.5, 1.6]) {
      const frequency = 0.4;
      const poles = loop.poles(loop.placePair(frequency, damping));
      const root = Math.sqrt(Math.abs(1 - damping * damping));
      const wanted =
        damping < 1 ? complex(-damping * frequency, root * frequency) : complex((root - damping) * frequency);
      const miss = Math.min(...poles.map((pole) => Math.hypot(pole.re - wanted.re, pole.im - wanted.im)));
      expect(miss / frequency).toBeLessThan(2e-3);
    }
  }
});

test('the response between samples does not depend on how finely it is asked for', () => {
  const loop = sampledLoop(withLags(0.06, 0.15, 0.05, 0.033), model, {
    sample: 0.1,
    computingDelay: 0,
    integration: 'backward',
  });
  const push = { reference: 1, setpointWeight: 0.5, disturbance: -0.2 };
  const coarse = loop.respond({ kp: 0.2, ki: 0.1 }, push, 6, 0.1);
  const fine = loop.respond({ kp: 0.2, ki: 0.1 }, push, 6, 0.013);
  expect(fine.spacing).toBeCloseTo(0.1 / 8, 12);
  expectClose(
    coarse.speed,
    fine.speed.filter((_, i) => i % 8 === 0),
    1e-13,
  );
});
