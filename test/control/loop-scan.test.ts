import { describe, expect, test } from 'vitest';
import { continuousLoop } from '../../src/control/continuous-loop.ts';
import { loopScan } from '../../src/control/loop-scan.ts';
import { type Gains, type SampledLoop, sampledLoop } from '../../src/control/sampled-loop.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { LinearVehicle } from '../../src/vehicle/linearise.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { vehicleOf } from '../study/vehicle-of.ts';

const modelOf = (a: number, b: number): LinearVehicle => ({
  speed: 20,
  throttle: 0.3,
  feasible: true,
  a,
  b,
  gradeGain: -9.8,
  headwindGain: -0.05,
  crosswindGain: 0,
  effectiveMass: 220,
});

interface Case {
  readonly loop: SampledLoop;
  readonly gains: Gains;
  readonly vehicle: Vehicle;
  readonly model: LinearVehicle;
  readonly computingDelay: number;
}

/** Loops with every lag, a few of vehicles that run away by themselves, gains from timid to far too high. */
function randomCases(seed: number, count: number): readonly Case[] {
  const random = seededStream(seed);
  const between = (low: number, high: number): number => low * (high / low) ** random.uniform();
  return Array.from({ length: count }, () => {
    const vehicle: Vehicle = {
      ...vehicleOf({ drive: { lag: between(0.02, 0.5) } }),
      actuator: {
        ...IDEAL_ACTUATOR,
        lag: between(0.01, 0.3),
        deadTime: random.uniform() < 0.5 ? 0 : between(0.01, 0.3),
      },
      sensor: { ...IDEAL_SENSOR, filter: between(0.01, 0.3), delay: between(0.005, 0.1) },
    };
    const model = modelOf(
      random.uniform() < 0.3 ? between(0.002, 0.02) : -between(0.005, 0.2),
      between(0.5, 5),
    );
    const computingDelay = between(0.001, 0.02);
    const timing = {
      sample: between(0.01, 0.1),
      computingDelay,
      integration: random.uniform() < 0.5 ? 'forward' : 'backward',
    } as const;
    const gains = {
      kp: between(0.01, 12),
      ki: random.uniform() < 0.2 ? 0 : between(0.002, 4),
      ...(random.uniform() < 0.3 ? { kd: between(0.001, 0.1), derivativeFilter: between(0.05, 0.5) } : {}),
    };
    return { loop: sampledLoop(vehicle, model, timing), gains, vehicle, model, computingDelay };
  });
}

/** Every pole of the closed loop decays, by the eigenvalues; the idle integral of a P controller apart. */
const decays = (loop: SampledLoop, gains: Gains): boolean =>
  loop
    .poles(gains)
    .filter(({ re, im }) => gains.ki !== 0 || Math.hypot(re, im) > 1e-9)
    .every(({ re }) => re < 0);
const scaled = (gains: Gains, factor: number): Gains => ({
  ...gains,
  kp: factor * gains.kp,
  ki: factor * gains.ki,
  ...(gains.kd === undefined ? {} : { kd: factor * gains.kd }),
});

describe('a loop that is looked at in two ways', () => {
  const cases = randomCases(17, 160);

  test('is stable by the turns of its curve where it is by its eigenvalues', () => {
    let stable = 0;
    for (const { loop, gains } of cases) {
      const expected = decays(loop, gains);
      expect(loopScan(loop).margins(gains).stable).toBe(expected);
      if (expected) stable++;
    }
    // Neither answer is a rare one.
    expect(stable).toBeGreaterThan(40);
    expect(stable).toBeLessThan(140);
  });

  test('oscillates at the gain margin and at the least gain, by its eigenvalues', () => {
    let [above, below] = [0, 0];
    for (const { loop, gains } of cases.slice(0, 60)) {
      const { figures } = loopScan(loop).margins(gains);
      if (figures === null) continue;
      if (Number.isFinite(figures.gainMargin)) {
        above++;
        expect(decays(loop, scaled(gains, figures.gainMargin * (1 - 1e-6)))).toBe(true);
        expect(decays(loop, scaled(gains, figures.gainMargin * (1 + 1e-6)))).toBe(false);
      }
      if (figures.gainReduction > 1e-3) {
        below++;
        expect(decays(loop, scaled(gains, figures.gainReduction * (1 + 1e-4)))).toBe(true);
        expect(decays(loop, scaled(gains, figures.gainReduction * (1 - 1e-4)))).toBe(false);
      }
    }
    expect(above).toBeGreaterThan(15);
    expect(below).toBeGreaterThan(2);
  });

  test('takes the dead time of its delay margin and no more', () => {
    let told = 0;
    for (const { loop, gains, vehicle, model } of cases.slice(0, 60)) {
      const { figures } = loopScan(loop).margins(gains);
      if (figures === null || !(figures.delayMargin < 1.5)) continue;
      // A part of a sample more is a pure lag only well below the Nyquist frequency.
      if (figures.gainCrossover * loop.timing.sample > 0.5) continue;
      told++;
      const delayed = (share: number): boolean => {
        const deadTime = vehicle.actuator.deadTime + share * figures.delayMargin;
        const later = { ...vehicle, actuator: { ...vehicle.actuator, deadTime } };
        return loopScan(sampledLoop(later, model, loop.timing)).margins(gains).stable;
      };
      expect(delayed(0.97)).toBe(true);
      expect(delayed(1.03)).toBe(false);
    }
    expect(told).toBeGreaterThan(5);
  });

  test('has the same sensitivity on the quick way, a hair lower', () => {
    for (const { loop, gains } of cases.slice(0, 60)) {
      const scan = loopScan(loop);
      const { figures } = scan.margins(gains);
      const quick = scan.sensitivity(gains);
      if (figures === null) {
        expect(quick).toBe(Number.POSITIVE_INFINITY);
        continue;
      }
      expect(quick).toBeLessThanOrEqual(figures.sensitivity * (1 + 1e-12));
      // The margins bound it from below: |S| at the crossovers (Astrom and Hagglund).
      const least = Math.max(
        Number.isFinite(figures.gainMargin) ? figures.gainMargin / (figures.gainMargin - 1) : 1,
        Number.isFinite(figures.phaseMargin) ? 1 / (2 * Math.sin(Math.abs(figures.phaseMargin) / 2)) : 0,
      );
      expect(figures.sensitivity).toBeGreaterThanOrEqual(least * (1 - 1e-9));
      if (figures.sensitivity < 5) expect(quick).toBeGreaterThan(figures.sensitivity * (1 - 5e-3));
    }
  });

  test('has the figures of the continuous loop when it is sampled fast', () => {
    for (const { gains, vehicle, model, computingDelay } of cases.slice(0, 25)) {
      const { figures: smooth } = loopScan(continuousLoop(vehicle, model, { computingDelay })).margins(gains);
      if (smooth === null || smooth.sensitivity > 4) continue;
      const timing = { sample: 5e-4, computingDelay, integration: 'forward' } as const;
      const { figures } = loopScan(sampledLoop(vehicle, model, timing)).margins(gains);
      expectClose(figures!.sensitivity / smooth.sensitivity, 1, 1e-2);
      expectClose(figures!.phaseMargin / smooth.phaseMargin, 1, 1e-2);
    }
  });
});

test('an integrating vehicle without lags has the margins of the closed form', () => {
  // L = kp b e^(-s T) / s: crossover kp b, phase margin pi / 2 - kp b T, gain margin pi / (2 kp b T).
  const vehicle: Vehicle = {
    ...vehicleOf({ drive: { lag: 0 } }),
    actuator: { ...IDEAL_ACTUATOR, lag: 0, deadTime: 0.3 },
    sensor: { ...IDEAL_SENSOR, filter: 0, delay: 0 },
  };
  const { figures } = loopScan(continuousLoop(vehicle, modelOf(-1e-12, 2), { computingDelay: 0 })).margins({
    kp: 0.4,
    ki: 0,
  });
  expectClose(figures!.gainCrossover, 0.8, 1e-9);
  expectClose(figures!.phaseMargin, Math.PI / 2 - 0.24, 1e-9);
  expectClose(figures!.gainMargin, Math.PI / 0.48, 1e-8);
  expectClose(figures!.delayMargin, (Math.PI / 2 - 0.24) / 0.8, 1e-9);
});
