import { Matrix } from 'ml-matrix';
import { describe, expect, test } from 'vitest';
import { respondDelayed } from '../../src/linear/delayed-response.ts';
import { loopMargins } from '../../src/linear/margins.ts';
import { closedPolesOutside } from '../../src/linear/nyquist.ts';
import { logarithmicGrid, scanResponse } from '../../src/linear/response-scan.ts';
import { rootLocus } from '../../src/linear/root-locus.ts';
import { holdSystem, stateSpaceOf, transferFunctionOf } from '../../src/linear/state-space.ts';
import { stepFigures } from '../../src/linear/step-figures.ts';
import {
  closedPoles,
  inSeries,
  polesOf,
  type TransferFunction,
  transferAt,
  zerosOf,
} from '../../src/linear/transfer-function.ts';
import { type Complex, complex } from '../../src/numeric/complex.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';

type Pair = readonly [number, number];
type Figure = number | 'inf' | null;
interface Step {
  readonly rise_time_10_90_s: number;
  readonly settling_time_2pct_s: number;
  readonly overshoot_pct: number;
  readonly peak: number;
  readonly peak_time_s: number;
  readonly t_s: number[];
  readonly y: number[];
}
interface Loop {
  readonly id: string;
  readonly plant: { readonly num: number[]; readonly den: number[]; readonly delay_s: number };
  readonly controller: { readonly kp: number; readonly ki: number };
  readonly loop: { readonly poles: Pair[]; readonly zeros: Pair[] };
  readonly closed_loop_stable: boolean;
  readonly closed_loop_poles: Pair[];
  readonly closed_loop?: { readonly unstable_pole_count: number };
  readonly margins: {
    readonly phase_crossovers: { readonly w_rad_s: number; readonly gain_margin: number }[];
    readonly phase_margin_deg: number;
    readonly w_gain_crossover: number;
    readonly delay_margin_s: number | null;
  };
  readonly sensitivity: {
    readonly Ms: number;
    readonly w_Ms: number | null;
    readonly Mt: number;
    readonly w_Mt: number;
    readonly bandwidth_T_minus_3dB_rad_s: number;
  } | null;
  readonly step_response?: Step;
  readonly input_disturbance_step?: { readonly t_s: number[]; readonly y: number[] };
  readonly root_locus?: { readonly points: { readonly K: number; readonly poles: Pair[] }[] };
  readonly bode: { readonly w_rad_s: number[]; readonly magnitude: number[] };
}
const { loops } = readReference<{ loops: Loop[] }>('linear/linear_analysis.json');
const library = readReference<{
  loops: {
    id: string;
    stability_margins?: { gm: Figure; pm_deg: Figure };
    Ms_from_system_norm_inf?: number;
  }[];
}>('linear/linear_python_control.json').loops;
const octave = readReference<{
  loops: { id: string; margin?: { gm: Figure; pm_deg: Figure } }[];
}>('linear/linear_octave.json').loops;

const degrees = (angle: number): number => (angle * 180) / Math.PI;
const inOrder = (poles: readonly Pair[]): Pair[] =>
  [...poles].sort((p, q) => Math.hypot(...p) - Math.hypot(...q) || p[1] - q[1]);
const pairs = (poles: readonly Complex[]): Pair[] => poles.map(({ re, im }): Pair => [re, im]);
/** Roots good to so much of their size. */
const expectRoots = (found: readonly Complex[], expected: readonly Pair[], tolerance: number): void => {
  expect(found.length).toBe(expected.length);
  inOrder(pairs(found)).forEach((p, i) => {
    const q = inOrder(expected)[i]!;
    expectClose(p, q, tolerance * Math.max(1e-3, Math.hypot(...q)));
  });
};

describe.each(loops)('the reference loop $id', (loop) => {
  const { kp, ki } = loop.controller;
  const plant: TransferFunction = {
    numerator: loop.plant.num,
    denominator: loop.plant.den,
    delay: loop.plant.delay_s,
  };
  const controller: TransferFunction =
    ki === 0
      ? { numerator: [kp], denominator: [1], delay: 0 }
      : { numerator: [kp, ki], denominator: [1, 0], delay: 0 };
  const open = inSeries(controller, plant);
  const at = (w: number): Complex => transferAt(open, complex(0, w));
  const found = loopMargins(at, 1e-4, 1e3);

  test('has its poles and zeros, the repeated ones too', () => {
    expectRoots(polesOf(open), loop.loop.poles, 1e-9);
    expectRoots(zerosOf(open), loop.loop.zeros, 1e-9);
  });

  test('has its frequency response', () => {
    const frequencies = loop.bode.w_rad_s;
    const magnitude = loop.bode.magnitude;
    const values = scanResponse(at, Float64Array.from(frequencies));
    frequencies.forEach((_, i) => {
      const size = Math.hypot(values.re[i]!, values.im[i]!);
      expectClose(size / magnitude[i]!, 1, 1e-10);
    });
  });

  test('has its margins', () => {
    const above = loop.margins.phase_crossovers.map((c) => c.gain_margin).filter((g) => g > 1);
    const below = loop.margins.phase_crossovers.map((c) => c.gain_margin).filter((g) => g <= 1);
    const [up, down] = [Math.min(...above), Math.max(0, ...below)];
    if (above.length === 0) expect(found.gainMargin).toBe(Number.POSITIVE_INFINITY);
    else expectClose(found.gainMargin, up, 1e-9 * up);
    expectClose(found.gainReduction, down, 1e-10);
    expectClose(degrees(found.phaseMargin), loop.margins.phase_margin_deg, 1e-8);
    expectClose(found.gainCrossover, loop.margins.w_gain_crossover, 1e-9);
    if (loop.margins.delay_margin_s !== null)
      expectClose(found.delayMargin, loop.margins.delay_margin_s, 1e-9);
  });

  test('has the margins that two libraries return', () => {
    const python = library.find(({ id }) => id === loop.id)?.stability_margins;
    const margin = octave.find(({ id }) => id === loop.id)?.margin;
    for (const returned of [python, margin]) {
      if (returned === undefined) continue;
      const { gm, pm_deg } = returned;
      // A factor below 1 is told apart here, and an angle past a half turn is negative.
      if (typeof gm === 'number' && gm > 1) expectClose(found.gainMargin / gm, 1, 1e-6);
      if (typeof gm === 'number' && gm <= 1) expectClose(found.gainReduction, gm, 1e-6);
      if (typeof pm_deg === 'number')
        expectClose(degrees(found.phaseMargin), pm_deg > 180 ? pm_deg - 360 : pm_deg, 1e-6);
    }
    const norm = library.find(({ id }) => id === loop.id)?.Ms_from_system_norm_inf;
    if (norm !== undefined) expectClose(found.sensitivity, norm, 2e-8 * norm);
  });

  test('is stable or not, by the turns of its curve as by its poles', () => {
    const arc = Array.from({ length: 16 }, (_, i) => {
      const angle = (i * Math.PI) / 32;
      return transferAt(open, complex(1e-4 * Math.cos(angle), 1e-4 * Math.sin(angle)));
    });
    const scan = scanResponse(at, logarithmicGrid(1e-4, 1e3, 2000));
    const re = [...arc.map((value) => value.re), ...scan.re];
    const im = [...arc.map((value) => value.im), ...scan.im];
    const outside = closedPolesOutside(re, im, 0);
    expect(outside === 0).toBe(loop.closed_loop_stable);
    if (loop.closed_loop !== undefined) expect(outside).toBe(loop.closed_loop.unstable_pole_count);
  });

  test.runIf(loop.sensitivity !== null)('has its peaks of the sensitivities and its bandwidth', () => {
    const { Ms, w_Ms, Mt, w_Mt, bandwidth_T_minus_3dB_rad_s: bandwidth } = loop.sensitivity!;
    expectClose(found.sensitivity, Ms, 1e-9);
    if (w_Ms === null) expect(found.sensitivityAt).toBeNaN();
    else expectClose(found.sensitivityAt / w_Ms, 1, 1e-5);
    expectClose(found.complementary, Mt, 2e-7);
    if (w_Mt > 0) expectClose(found.complementaryAt / w_Mt, 1, 1e-5);
    expectClose(found.bandwidth / bandwidth, 1, 1e-6);
  });

  test.runIf(loop.plant.delay_s === 0)('has its closed poles, and its root locus', () => {
    expectRoots(closedPoles(open), loop.closed_loop_poles, 1e-9);
    const points = loop.root_locus!.points;
    const { branches } = rootLocus(
      (factor) => closedPoles(open, factor),
      points.map(({ K }) => K),
    );
    points.forEach(({ K, poles }, k) => {
      const there = branches.map((branch) => complex(branch.re[k]!, branch.im[k]!));
      // Two poles that meet are only good to the root of the rounding error.
      expectRoots(there, poles, K === 0 ? 1e-9 : 2e-7);
    });
  });

  test.runIf(loop.step_response !== undefined)('answers a step of its reference', () => {
    const expected = loop.step_response!;
    const space = stateSpaceOf(open);
    const n = space.a.rows;
    const a = Matrix.zeros(n + 1, n + 1);
    a.setSubMatrix(space.a, 0, 0);
    // dy/dt = c dx/dt, so that the output stands in the state.
    const rate = Matrix.rowVector(space.c).mmul(space.a).getRow(0);
    rate.forEach((value, j) => {
      a.set(n, j, value);
    });
    const gain = space.c.reduce((sum, value, i) => sum + value * space.b[i]!, 0);
    const { values, spacing } = respondDelayed(
      {
        a,
        b: [...space.b, gain],
        push: new Array<number>(n + 1).fill(0),
        feedback: [...new Array<number>(n).fill(0), -1],
        reference: 1,
        delay: space.delay,
      },
      n,
      60,
      0.002,
    );
    const read = (t: number): number => values[Math.round(t / spacing)]!;
    expected.t_s.forEach((t, i) => {
      expectClose(read(t), expected.y[i]!, 2e-9, `at ${t} s`);
    });
    const final = ki === 0 ? 0.75 : 1;
    const figures = stepFigures(values, spacing, final, 0.02);
    expectClose(figures.rise, expected.rise_time_10_90_s, 2e-5);
    expectClose(figures.settling, expected.settling_time_2pct_s, 2e-5);
    expectClose(100 * figures.overshoot, expected.overshoot_pct, 1e-5);
    if (expected.overshoot_pct > 0) expectClose(figures.peakTime, expected.peak_time_s, 1e-4);
  });

  test.runIf(loop.input_disturbance_step !== undefined)('answers a step of load before the plant', () => {
    const { t_s, y } = loop.input_disturbance_step!;
    const space = stateSpaceOf(plant);
    const n = space.a.rows;
    const a = Matrix.zeros(n + 2, n + 2);
    a.setSubMatrix(space.a, 0, 0);
    const rate = Matrix.rowVector(space.c).mmul(space.a).getRow(0);
    rate.forEach((value, j) => {
      a.set(n, j, value);
    });
    const gain = space.c.reduce((sum, value, i) => sum + value * space.b[i]!, 0);
    a.set(n + 1, n, -ki);
    const b = [...space.b, gain, 0];
    const { values, spacing } = respondDelayed(
      { a, b, push: b, feedback: [...new Array<number>(n).fill(0), -kp, 1], reference: 0, delay: 0 },
      n,
      20,
      0.01,
    );
    t_s.forEach((t, i) => {
      expectClose(values[Math.round(t / spacing)]!, y[i]!, 2e-9, `at ${t} s`);
    });
  });
});

interface Sampled {
  readonly id: string;
  readonly Ts_s: number;
  readonly pulse_tf_without_delay: { readonly num_z: number[]; readonly den_z: number[] };
  readonly discrete_zeros: Pair[];
  readonly loops: Readonly<
    Record<string, { readonly closed_loop_poles: Pair[]; readonly unit_step_first_41_samples?: number[] }>
  >;
}
const sampled = readReference<{ plants: Sampled[] }>('linear/linear_discrete.json').plants;

describe.each(sampled)('the sampled loop $id', (expected) => {
  const { plant, controller } = loops.find(({ id }) => id === expected.id)!;
  const held = holdSystem(
    stateSpaceOf({ numerator: plant.num, denominator: plant.den, delay: plant.delay_s }),
    expected.Ts_s,
  );

  test.runIf(plant.delay_s === 0)('has the pulse transfer function and the zeros of the reference', () => {
    const { numerator, denominator } = transferFunctionOf({
      a: held.phi,
      b: held.gamma,
      c: held.c,
      d: held.d,
      delay: 0,
    });
    const { num_z, den_z } = expected.pulse_tf_without_delay;
    expectClose(denominator, den_z, 1e-10);
    expectClose(numerator.slice(-num_z.length), num_z, 1e-10);
    const zeros = zerosOf({ numerator: numerator.slice(-num_z.length), denominator: [1], delay: 0 });
    expectRoots(zeros, expected.discrete_zeros, 1e-7);
  });

  // The trapezoidal rule is none of the controller's; an unstable loop has no samples there.
  const answered = Object.entries(expected.loops).flatMap(([rule, { unit_step_first_41_samples: steps }]) =>
    rule === 'tustin' || steps === undefined ? [] : [{ rule, steps }],
  );
  test.each(answered)(
    'answers a step of its reference as the reference does, $rule rule',
    ({ rule, steps }) => {
      const { kp, ki } = controller;
      let x = Matrix.zeros(held.phi.rows, 1);
      let integral = 0;
      const seen = steps.map(() => {
        const y = held.c.reduce((sum, value, i) => sum + value * x.get(i, 0), 0);
        const increment = ki * expected.Ts_s * (1 - y);
        if (rule === 'backward') integral += increment;
        const u = kp * (1 - y) + integral;
        if (rule === 'forward') integral += increment;
        x = held.phi.mmul(x).add(Matrix.columnVector(held.gamma).mul(u));
        return y;
      });
      expectClose(seen, steps, 1e-9);
    },
  );
});

test('the dead time of two and a half samples splits the input as the reference says', () => {
  const { fractional_delay_example: example } = readReference<{
    fractional_delay_example: { a: number; b: number; phi: number; gamma0: number; gamma1: number };
  }>('linear/linear_discrete.json');
  const system = holdSystem(
    { a: new Matrix([[-example.a]]), b: [example.b], c: [1], d: 0, delay: 0.25 },
    0.1,
  );
  // v, then the commands of three, two and one sample ago.
  expectClose(system.phi.getRow(0), [example.phi, example.gamma1, example.gamma0, 0], 1e-14);
  expectClose(system.phi.getRow(1), [0, 0, 1, 0], 0);
  expectClose(system.gamma, [0, 0, 0, 1], 0);
});
