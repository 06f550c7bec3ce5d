import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { linearController } from '../../src/control/linear-controller.ts';
import { loopStability, stabilityOf } from '../../src/control/loop-stability.ts';
import { sampledLoop } from '../../src/control/sampled-loop.ts';
import type { ControllerSetup, PidSetup } from '../../src/control/setup.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { LinearVehicle } from '../../src/vehicle/linearise.ts';
import { stillAndLevel } from '../../src/vehicle/surroundings.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';
import { referenceMotorcycle } from '../vehicle/vehicles.ts';
import { plainInteger, plainPid } from './players.ts';

interface Margins {
  readonly gain_margin: number;
  readonly phase_margin_deg: number;
}
const reference = readReference<{
  plants: { id: string; loops: Record<'forward' | 'backward', { margins: Margins }> }[];
}>('linear/linear_discrete.json');

// The motorcycle of the reference: dv/dt = -a v + b u.
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
const withLags = (actuator: number, drive: number, delay = 0): Vehicle => {
  const plain = referenceMotorcycle();
  return {
    ...plain,
    actuator: { ...IDEAL_ACTUATOR, lag: actuator, rateLimit: null },
    drive: { ...plain.drive, lag: drive },
    sensor: { ...IDEAL_SENSOR, filter: 0, delay, scaleError: 0 },
  };
};
const timing = { sample: 0.1, computingDelay: 0, integration: 'forward' } as const;

describe('the stability of a sampled loop', () => {
  it.each([
    ['moto_actuator_lag', withLags(0, 0.25), { kp: 0.17, ki: 0.067 }],
    ['moto_third_order', withLags(0.25, 0.15), { kp: 0.5, ki: 0.25 }],
  ] as const)('has the margins of the reference: %s', (id, vehicle, gains) => {
    for (const integration of ['forward', 'backward'] as const) {
      const { margins } = reference.plants.find((plant) => plant.id === id)!.loops[integration];
      const found = stabilityOf(sampledLoop(vehicle, model, { ...timing, integration }), gains, 0.1);
      expect(found.stable).toBe(true);
      expectClose(found.gainMargin!, margins.gain_margin, 1e-5 * margins.gain_margin);
      expectClose((found.phaseMargin! * 180) / Math.PI, margins.phase_margin_deg, 1e-5);
    }
  });

  it('says unstable just where a step of set speed grows, and the gain margin is that border', () => {
    const grows = (vehicle: Vehicle, gains: { kp: number; ki: number }): boolean => {
      const { speed } = sampledLoop(vehicle, model, timing).respond(
        gains,
        { reference: 1, setpointWeight: 1, disturbance: 0 },
        1000,
        0.1,
      );
      const off = (from: number, to: number): number =>
        speed.slice(from, to).reduce((most, v) => Math.max(most, Math.abs(v - 1)), 0);
      return !(off(7500, 10_000) <= off(0, 2500));
    };
    fc.assert(
      fc.property(
        fc.double({ min: -2, max: 2.6, noNaN: true }),
        fc.double({ min: 0.5, max: 30, noNaN: true }),
        fc.integer({ min: 0, max: 600 }).map((ms) => ms / 1000),
        (power, ti, lag) => {
          const kp = 10 ** power;
          const vehicle = withLags(lag, 0.1, lag / 3);
          const gains = { kp, ki: kp / ti };
          const found = stabilityOf(sampledLoop(vehicle, model, timing), gains, timing.sample);
          expect(grows(vehicle, gains)).toBe(!found.stable);
          if (!found.stable) return;
          const times = (factor: number) => ({ kp: factor * gains.kp, ki: factor * gains.ki });
          expect(grows(vehicle, times(0.97 * found.gainMargin!))).toBe(false);
          expect(grows(vehicle, times(1.03 * found.gainMargin!))).toBe(true);
        },
      ),
      { seed: 31, numRuns: 40 },
    );
  });

  it('is not spoilt by an integral that is not used', () => {
    const loop = sampledLoop(withLags(0.1, 0.1), model, timing);
    expect(stabilityOf(loop, { kp: 0.2, ki: 0 }, 0.1).stable).toBe(true);
    expect(stabilityOf(loop, { kp: 0, ki: 0 }, 0.1)).toEqual({
      stable: true,
      gainMargin: Number.POSITIVE_INFINITY,
      phaseMargin: Number.POSITIVE_INFINITY,
    });
  });
});

it('does not mind a lag that is all but none', () => {
  const gains = { kp: 0.4, ki: 0.2 };
  const of = (lag: number) => stabilityOf(sampledLoop(withLags(lag, 0.2), model, timing), gains, 0.1);
  for (const lag of [Number.MIN_VALUE, 1e-300, 1e-12]) expect(of(lag)).toEqual(of(0));
  expectClose(of(2e-6).gainMargin!, of(0).gainMargin!, 1e-3);
});

describe('the stability of a candidate', () => {
  const air = stillAndLevel(1.2, 288.15);

  it('is that of the set speed where it stands worst', () => {
    const vehicle = withLags(0.1, 0.2, 0.05);
    const gains = { ...timing, kp: 0.4, ki: 0.2 };
    const at = (...speeds: number[]) => loopStability(vehicle, gains, speeds, air)!;
    const each = [10, 20, 30].map((speed) => at(speed));
    const least = Math.min(...each.map(({ gainMargin }) => gainMargin!));
    expect(at(10, 20, 30).gainMargin).toBeCloseTo(least, 12);
  });

  it('is unknown where the drive cannot hold any of the speeds', () => {
    expect(loopStability(withLags(0.1, 0.2), { ...timing, kp: 0.4, ki: 0.2 }, [150], air)).toBeNull();
  });

  it('is that of the gear where it stands worst, among those that can be driven there', () => {
    // 60 N m less 8 N m of drag at the shaft, the same at every speed: a lower gear is a greater gain.
    const plain = withLags(0.1, 0.2, 0.05);
    const drive: Drive = {
      ...plain.drive,
      speedEdges: new Float64Array(0),
      cells: Float64Array.of(-8, 0, 68, 0, 0, 0),
      losses: Float64Array.of(0, 0, 60, 0, 0, 0),
      gears: [20, 14, 10].map((ratio) => ({ ratio, inertia: 0.05 * ratio * ratio })),
      gear: 2,
      stallSpeed: 150,
    };
    const vehicle = { ...plain, drive };
    const gains = { ...timing, kp: 0.4, ki: 0.2 };
    const at = (speed: number, gears?: number[]) => loopStability(vehicle, gains, [speed], air, gears);
    const each = [0, 1, 2].map((gear) => at(20, [gear])!);
    // Gain over mass: 68 r / (m + J r^2); the phase is all but the same, and so the margins go with it.
    const gain = (r: number): number => (68 * r) / (260 + 0.05 * r * r);
    expectClose(each[0]!.gainMargin! / each[2]!.gainMargin!, gain(10) / gain(20), 0.03);
    expect(at(20, [0, 1, 2])).toEqual(each[0]);
    expect(each[0]!.gear).toBe(0);
    expect(at(20)).toEqual(each[2]);
    // At 12 m/s the top gear would turn 120 rad/s: slower than it can.
    expect(at(12, [1, 2])!.gear).toBe(1);
    expect(at(12)).toBeNull();
  });

  it('is unknown where the end stop of the actuator is below the throttle that is needed', () => {
    const vehicle = withLags(0.1, 0.2);
    const stopped = (greatest: number): Vehicle => ({
      ...vehicle,
      actuator: { ...vehicle.actuator, travel: { least: 0, greatest } },
    });
    // At 25 m/s 225 N of air and 38 N of rolling of 900 N: 0.29.
    const gains = { ...timing, kp: 0.4, ki: 0.2 };
    expect(loopStability(stopped(0.31), gains, [25], air)).not.toBeNull();
    expect(loopStability(stopped(0.28), gains, [25], air)).toBeNull();
  });
});

describe('a PID loop', () => {
  const ideal = withLags(0, 0);
  const pid = { kp: 0.08, ki: 0, kd: 0.004, derivativeFilter: 0.1 };

  it('has the poles of its characteristic polynomial', () => {
    // dv/dt = b u with b = 5, h = 0.1, so G = b h / (z - 1) = 0.5 / (z - 1). Without a filter D = (kd / h) (z - 1) / z:
    // z (z - 1) + 0.5 kp z + 0.5 (kd / h) (z - 1) = 0. With kp = 0.4, kd = 0.02: z^2 - 0.7 z - 0.1 = 0,
    // z = (0.7 +- sqrt(0.89)) / 2 = 0.821699, -0.121699; s = ln(z) / h = -1.963812 for the first.
    const integrator = { ...model, a: 0, b: 5 };
    const loop = sampledLoop(ideal, integrator, { ...timing, sample: 0.1 });
    const poles = loop.poles({ kp: 0.4, ki: 0, kd: 0.02, derivativeFilter: 0 });
    expect(poles.some(({ re, im }) => Math.abs(re + 1.963812) < 1e-5 && Math.abs(im) < 1e-9)).toBe(true);
    expect(poles.some(({ re }) => Math.abs(re - Math.log(0.121699) / 0.1) < 1e-3)).toBe(true);
  });

  it('becomes unstable at its gain margin: poles, response and open loop say the same', () => {
    for (const delay of [0, 0.13]) {
      const lagged = withLags(0.1, 0.2, delay);
      const loop = sampledLoop(lagged, model, timing);
      const gains = { ...pid, ki: 0.02 };
      const { gainMargin } = stabilityOf(loop, gains, timing.sample);
      const times = (factor: number) => ({
        ...gains,
        kp: factor * gains.kp,
        ki: factor * gains.ki,
        kd: factor * gains.kd,
      });
      for (const [share, stable] of [
        [0.99, true],
        [1.01, false],
      ] as const) {
        const scaled = times(share * gainMargin!);
        expect(loop.poles(scaled).every(({ re }) => re < 0)).toBe(stable);
        const push = { reference: 1, setpointWeight: 1, disturbance: 0 };
        const { speed } = loop.respond(scaled, push, 400, timing.sample);
        const size = (from: number, to: number): number =>
          speed.slice(from, to).reduce((most, v) => Math.max(most, Math.abs(v - 1)), 0);
        const late = Math.floor(speed.length / 2);
        expect(size(late, speed.length) < size(100, late)).toBe(stable);
      }
    }
  });

  it('has more phase with a derivative than without, where lags take it', () => {
    const loop = sampledLoop(withLags(0.3, 0.5), model, timing);
    const phase = (kd: number) =>
      stabilityOf(loop, { kp: 0.4, ki: 0.1, kd, derivativeFilter: 0.02 }, timing.sample).phaseMargin!;
    expect(phase(0.1)).toBeGreaterThan(phase(0) + 0.1);
  });
});

describe('what is linear', () => {
  it('is a scheduled loop, by the gains of its place', () => {
    const vehicle = withLags(0.1, 0.2, 0.05);
    const air = stillAndLevel(1.2, 288.15);
    const scheduled: PidSetup = {
      ...plainPid,
      kp: 0.4,
      ki: 0.2,
      sample: 0.1,
      schedule: {
        speed: Float64Array.of(10, 30),
        rows: [{ gear: null, proportional: Float64Array.of(1, 0.5), integral: Float64Array.of(1, 0.5) }],
      },
    };
    const linear = linearController(scheduled);
    if ('none' in linear) throw new Error(linear.none);
    const { gainMargin } = loopStability(vehicle, linear, [20], air)!;
    const plain = loopStability(vehicle, { ...timing, kp: 0.3, ki: 0.15, sample: 0.1 }, [20], air)!;
    expectClose(gainMargin!, plain.gainMargin!, 1e-9);
  });

  it('is no loop whose rounding, dead band, observer or accelerometer counts, and it says so', () => {
    const model = { mass: 260, surroundings: stillAndLevel(1.2, 288.15) };
    const none = (setup: ControllerSetup): string => {
      const linear = linearController(setup);
      return 'none' in linear ? linear.none : '';
    };
    expect(none(plainInteger)).toContain('rounding');
    expect(none({ ...plainPid, deadBand: { halfWidth: 0.1, integratesInside: false } })).toContain(
      'dead band',
    );
    expect(none({ ...plainPid, model, observerFilter: 1 })).toContain('observer');
    const grade = { kind: 'accelerometer', filter: 0.3, pitchError: 0 } as const;
    expect(none({ ...plainPid, model, feedforward: { drag: true, grade } })).toContain('accelerometer');
    const known = { kind: 'known_road', preview: 1 } as const;
    expect(none({ ...plainPid, model, feedforward: { drag: true, grade: known } })).toBe('');
  });
});
