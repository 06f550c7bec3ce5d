// The wheel sensor by itself: fed with a known motion, against what counting and timing pulses give by hand.

import { describe, expect, it } from 'vitest';
import { BUS_MEASURED } from '../../src/control/bus.ts';
import { buildMachine } from '../../src/loop/build-machine.ts';
import { SPEED, TRAVELLED } from '../../src/loop/layout.ts';
import type { Machine } from '../../src/loop/machine.ts';
import { senseSpeed, settleSensor } from '../../src/loop/sense-speed.ts';
import { IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Pulses, SpeedSensor } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const SAMPLE = 0.02;
// 48 pulses a turn of a wheel of 0.3 m: the worked example of the trade (357 Hz at 14 m/s, 713 Hz at 28 m/s).
const SPACING = (2 * Math.PI * 0.3) / 48;
const counted = (window: number, spacing = SPACING): Pulses => ({
  spacing,
  reading: { kind: 'counted', window },
});
const timed = (clock: number, spacing = SPACING): Pulses => ({ spacing, reading: { kind: 'timed', clock } });

function machineWith(sensor: Partial<SpeedSensor>, sample = SAMPLE): Machine {
  const vehicle = { ...referenceMotorcycle, sensor: { ...IDEAL_SENSOR, ...sensor } };
  const plan = planOver(roadOver(stations(1000, 100)), vehicle);
  const { controller } = plan;
  if (controller.kind !== 'pi') throw new Error('a PI');
  return buildMachine({ ...plan, controller: { ...controller, sample } });
}

/** Readings at every sample from time 0 of a vehicle that came from minus infinity at v(0). */
function readings(
  machine: Machine,
  samples: number,
  speed: (t: number) => number,
  travelled: (t: number) => number,
  sample = SAMPLE,
): number[] {
  const { s } = machine;
  s[SPEED] = speed(0);
  s[TRAVELLED] = travelled(0);
  settleSensor(machine);
  return Array.from({ length: samples }, (_, k) => {
    s[SPEED] = speed(k * sample);
    s[TRAVELLED] = travelled(k * sample);
    senseSpeed(machine);
    return s[BUS_MEASURED]!;
  });
}
const steady = (machine: Machine, v: number, samples: number, sample = SAMPLE): number[] =>
  readings(
    machine,
    samples,
    () => v,
    (t) => v * t,
    sample,
  );
const meanOf = (x: readonly number[]): number => x.reduce((sum, value) => sum + value, 0) / x.length;
const varianceOf = (x: readonly number[], mean = meanOf(x)): number =>
  meanOf(x.map((value) => (value - mean) ** 2));

describe('pulses counted in a window of 0.1 s', () => {
  const quantum = SPACING / 0.1;

  it('come in steps of 0.393 m/s', () => {
    // Published practice: 48 pulses, 0.3 m, 0.1 s.
    expectClose(quantum, 0.393, 0.0005);
    for (const value of steady(machineWith({ pulses: counted(0.1) }), 14.1, 500))
      expectClose(value / quantum, Math.round(value / quantum), 1e-9);
  });

  it.each([13.777, 14, 27.9, 3.1])(
    'show a steady %d m/s as the two steps beside it, right in the mean',
    (v) => {
      const shown = steady(machineWith({ pulses: counted(0.1) }), v, 20_000);
      const below = Math.floor(v / quantum);
      const share = v / quantum - below;
      for (const value of shown) expect([below, below + 1]).toContain(Math.round(value / quantum));
      // Over a whole cycle of phases the count is right in the mean; the rest is one pulse at either end.
      const phases = 20_000 * SAMPLE;
      expectClose(meanOf(shown), v, (2 * SPACING) / phases + 3e-3, 'mean');
      expectClose(varianceOf(shown), quantum * quantum * share * (1 - share), 2e-3, 'variance');
    },
  );

  it('are off by a sawtooth at either end of the window: together quantum / sqrt(6) over many speeds', () => {
    // One end alone is spread evenly over a step: quantum / sqrt(12). Both ends are independent over a sweep of speed.
    const a = 0.037;
    const machine = machineWith({ pulses: counted(0.1) });
    const speed = (t: number) => 10 + a * t;
    const shown = readings(machine, 20_000, speed, (t) => 10 * t + 0.5 * a * t * t);
    const errors = shown.slice(10).map((value, k) => value - speed((k + 10) * SAMPLE - 0.05));
    expectClose(meanOf(errors), 0, 0.003, 'mean');
    expectClose(Math.sqrt(varianceOf(errors, 0)), quantum / Math.sqrt(6), 0.02 * quantum, 's.d.');
  });
});

describe('the last period timed by a clock of a microsecond', () => {
  // Published practice: 0.005 to 0.02 m/s from 14 to 28 m/s; v^2 clock / spacing.
  it.each([
    [14, 0.005],
    [28, 0.02],
  ])('at %d m/s is good to %d m/s', (v, quantum) => {
    expectClose((v * v * 1e-6) / SPACING, quantum, 0.0005);
    const shown = steady(machineWith({ pulses: timed(1e-6) }), v, 5000).slice(10);
    for (const value of shown) expectClose(value, v, 1.01 * quantum);
    expect(new Set(shown.map((value) => value.toFixed(9))).size).toBe(2);
    expectClose(SPACING / meanOf(shown.map((value) => SPACING / value)), v, 0.02 * quantum, 'mean period');
  });

  it('shows the speed at the middle of the last whole period, while the vehicle gains speed', () => {
    const a = 2.5;
    const speed = (t: number) => 5 + a * t;
    const way = (t: number) => 5 * t + 0.5 * a * t * t;
    const time = (d: number) => (-5 + Math.sqrt(25 + 2 * a * d)) / a;
    const shown = readings(machineWith({ pulses: timed(1e-9), delay: 0.033 }), 400, speed, way);
    shown.forEach((value, k) => {
      if (k < 10) return;
      const last = Math.floor(way(k * SAMPLE - 0.033) / SPACING);
      const period = time(last * SPACING) - time((last - 1) * SPACING);
      expectClose(value, SPACING / period, 2e-5);
    });
  });

  it('falls as the time since the last pulse grows, once the vehicle stands', () => {
    // One pulse a turn; braked to a stand at t = 2 s after 10 m.
    const spacing = 2.5;
    const speed = (t: number) => (t < 2 ? 10 - 5 * t : 0);
    const way = (t: number) => (t < 2 ? 10 * t - 2.5 * t * t : 10);
    // The pulse at 10 m comes just at the stand and may or may not be seen: look from 9.99 m.
    const shown = readings(
      machineWith({ pulses: timed(1e-6, spacing) }),
      500,
      (t) => speed(t),
      (t) => way(t) - 0.01,
    );
    const last = 2 - Math.sqrt(4 - (7.5 + 0.01) / 2.5);
    for (let k = 150; k < 500; k += 10) expectClose(shown[k]!, spacing / (k * SAMPLE - last), 1e-4);
  });
});

describe('every sensor', () => {
  const speed = (t: number) => 12 + 1.5 * t;
  const way = (t: number) => 12 * t + 0.75 * t * t;

  it('shows what was there a fraction of samples ago, with its scale', () => {
    const none = { noise: { sd: 0, seed: 1 }, scaleError: 0.02 };
    const shown = readings(machineWith({ ...none, delay: 0.0333 }), 50, speed, way);
    for (let k = 5; k < 50; k++) expectClose(shown[k]!, 1.02 * speed(k * SAMPLE - 0.0333), 1e-9);
    const mean = readings(
      machineWith({ ...none, delay: 0.0333, pulses: counted(0.05, 1e-6) }),
      50,
      speed,
      way,
    );
    for (let k = 10; k < 50; k++) expectClose(mean[k]!, 1.02 * speed(k * SAMPLE - 0.0333 - 0.025), 5e-5);
  });

  it('lags a steady gain of speed by its filter time, whatever the sample', () => {
    for (const sample of [0.005, 0.02, 0.1]) {
      const machine = machineWith({ noise: { sd: 0, seed: 1 }, filter: 0.15 }, sample);
      const shown = readings(machine, 1000, speed, way, sample);
      expectClose(shown[999]!, speed(999 * sample - 0.15), 1e-9);
    }
  });

  it('goes on from a copy of its state', () => {
    const sensor = { pulses: counted(0.1), noise: { sd: 0.1, seed: 5 }, filter: 0.05, delay: 0.01 };
    const whole = machineWith(sensor);
    const first = steady(whole, 14, 100);
    const copy = machineWith(sensor);
    copy.s.set(whole.s);
    for (const machine of [whole, copy]) {
      machine.s[TRAVELLED] = 14 * 2;
      senseSpeed(machine);
    }
    expect(copy.s[BUS_MEASURED]).toBe(whole.s[BUS_MEASURED]);
    expect(first).toEqual(steady(machineWith(sensor), 14, 100));
  });
});

describe('noise', () => {
  const COUNT = 40_000;
  const noise = (seed: number, filter = 0): number[] =>
    steady(machineWith({ noise: { sd: 1, seed }, filter }), 14, COUNT).map((value) => value - 14);
  const correlation = (x: readonly number[], y: readonly number[]): number =>
    meanOf(x.map((value, i) => value * y[i]!)) / Math.sqrt(varianceOf(x, 0) * varianceOf(y, 0));
  // Standard errors of mean, variance, third and fourth moment of n normal numbers, and of a correlation; four of them.
  const within = (factor: number): number => 4 * Math.sqrt(factor / COUNT);

  it.each([0, 1, 77, 123_456_789_012])('is normal and white with seed %d', (seed) => {
    const x = noise(seed);
    expectClose(meanOf(x), 0, within(1), 'mean');
    expectClose(varianceOf(x, 0), 1, within(2), 'variance');
    expectClose(meanOf(x.map((value) => value ** 3)), 0, within(15), 'skewness');
    expectClose(meanOf(x.map((value) => value ** 4)), 3, within(96), 'kurtosis');
    for (const lag of [1, 2, 3, 50, 4096])
      expectClose(correlation(x.slice(lag), x.slice(0, COUNT - lag)), 0, within(1.2), `lag ${lag}`);
    // The share beyond 1, 2 and 3 s.d. of the normal law (table).
    for (const [limit, share] of [
      [1, 0.3173105],
      [2, 0.0455003],
      [3, 0.0026998],
    ] as const)
      expectClose(
        x.filter((value) => Math.abs(value) > limit).length / COUNT,
        share,
        within(share * (1 - share)),
        `beyond ${limit}`,
      );
  });

  it('of one seed tells nothing about that of another', () => {
    expectClose(correlation(noise(1), noise(2)), 0, within(1));
    expectClose(correlation(noise(1), noise(4_294_967_297)), 0, within(1));
  });

  it('comes out of the filter with the variance of its closed form', () => {
    // z = k z1 + w0 r1 + w1 r, k = e^(-h/T), w1 = 1 - (1 - k) T / h, w0 = (1 - k) T / h - k.
    const kept = Math.exp(-SAMPLE / 0.1);
    const mean = ((1 - kept) * 0.1) / SAMPLE;
    const now = 1 - mean;
    const before = mean - kept;
    const expected = now * now + (before + kept * now) ** 2 / (1 - kept * kept);
    expectClose(varianceOf(noise(3, 0.1).slice(100), 0), expected, 0.05 * expected);
  });
});
