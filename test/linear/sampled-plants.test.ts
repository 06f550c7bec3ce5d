import { Matrix } from 'ml-matrix';
import { describe, expect, test } from 'vitest';
import { continuousPoles, eigenvalues } from '../../src/linear/eigenvalues.ts';
import { holdInput } from '../../src/linear/hold-input.ts';
import { loopMargins } from '../../src/linear/margins.ts';
import { resolvent } from '../../src/linear/resolvent.ts';
import {
  addComplex,
  type Complex,
  complex,
  divideComplex,
  expComplex,
  multiplyComplex,
  powerOfComplex,
  subtractComplex,
} from '../../src/numeric/complex.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';

interface Margins {
  readonly gain_margin: number | 'inf';
  readonly w_phase_crossover: number | null;
  readonly phase_margin_deg: number | 'inf';
  readonly w_gain_crossover: number | null;
}
interface Plant {
  readonly id: string;
  readonly Ts_s: number;
  readonly delay_samples: number;
  readonly pulse_tf_without_delay: { readonly num_z: number[]; readonly den_z: number[] };
  readonly discrete_poles: [number, number][];
  readonly loops: Readonly<Record<string, { readonly margins: Margins }>>;
}
interface Continuous {
  readonly id: string;
  readonly num: number[];
  readonly den: number[];
  readonly kp: number;
  readonly ki: number;
}
const { plants } = readReference<{ plants: Plant[] }>('linear/linear_discrete.json');
const continuous = readReference<{ loops: Continuous[] }>('linear/linear_plants.json').loops;

/** Controllable form of a strictly proper transfer function. */
function stateSpace({ num, den }: Continuous): { a: Matrix; b: Matrix; c: number[] } {
  const n = den.length - 1;
  const a = Matrix.zeros(n, n);
  for (let i = 0; i + 1 < n; i++) a.set(i, i + 1, 1);
  for (let j = 0; j < n; j++) a.set(n - 1, j, -den[n - j]! / den[0]!);
  const b = Matrix.zeros(n, 1);
  b.set(n - 1, 0, 1);
  const padded = [...new Array<number>(n - num.length).fill(0), ...num];
  return { a, b, c: padded.map((value) => value / den[0]!).reverse() };
}
const polynomial = (coefficients: readonly number[], z: Complex): Complex =>
  coefficients.reduce((sum, c) => addComplex(multiplyComplex(sum, z), complex(c)), complex(0));
const output = (c: readonly number[], state: readonly Complex[]): Complex =>
  state.reduce((sum, x, j) => addComplex(sum, multiplyComplex(complex(c[j]!), x)), complex(0));

describe.each(plants)('the sampled plant $id', (plant) => {
  const source = continuous.find((loop) => loop.id === plant.id)!;
  const { a, b, c } = stateSpace(source);
  const { phi, gamma } = holdInput(a, b, plant.Ts_s);
  const input = gamma.getColumn(0);
  const pulse = (z: Complex): Complex => output(c, resolvent(phi, input, z)!);

  test('has the pulse transfer function of the reference', () => {
    const { num_z, den_z } = plant.pulse_tf_without_delay;
    for (let i = 1; i <= 20; i++) {
      const z = expComplex(complex(0.02 * i, 0.15 * i));
      const expected = divideComplex(polynomial(num_z, z), polynomial(den_z, z));
      const found = pulse(z);
      expectClose(
        [found.re, found.im],
        [expected.re, expected.im],
        1e-9 * (1 + Math.hypot(expected.re, expected.im)),
      );
    }
  });

  test('has the poles of the reference', () => {
    const byPlace = (p: readonly number[], q: readonly number[]) => p[0]! - q[0]! || p[1]! - q[1]!;
    const found = eigenvalues(phi)
      .map((z) => [z.re, z.im])
      .sort(byPlace);
    const expected = plant.discrete_poles.map((p) => [...p]).sort(byPlace);
    // A triple pole is only good to the cube root of the rounding error.
    const tolerance = plant.id.startsWith('triple') ? 1e-4 : 1e-10;
    expectClose(found.flat(), expected.flat(), tolerance);
  });

  test.each(Object.entries(plant.loops))(
    'has the margins of the reference, %s rule',
    (rule, { margins: expected }) => {
      const { kp, ki } = source;
      const integrator = (z: Complex): Complex => {
        const forward = divideComplex(complex(plant.Ts_s), subtractComplex(z, complex(1)));
        if (rule === 'forward') return forward;
        if (rule === 'backward') return multiplyComplex(forward, z);
        return multiplyComplex(forward, multiplyComplex(complex(0.5), addComplex(z, complex(1))));
      };
      const open = (w: number): Complex => {
        const z = expComplex(complex(0, w * plant.Ts_s));
        const controller = addComplex(complex(kp), multiplyComplex(complex(ki), integrator(z)));
        return divideComplex(multiplyComplex(controller, pulse(z)), powerOfComplex(z, plant.delay_samples));
      };
      const found = loopMargins(open, 1e-3, Math.PI / plant.Ts_s);
      if (typeof expected.gain_margin === 'number' && expected.gain_margin > 1)
        expectClose(found.gainMargin, expected.gain_margin, 1e-7 * expected.gain_margin);
      if (typeof expected.phase_margin_deg === 'number') {
        expectClose((found.phaseMargin * 180) / Math.PI, expected.phase_margin_deg, 1e-6);
        expectClose(found.gainCrossover, expected.w_gain_crossover!, 1e-6);
      }
    },
  );
});

test('1 / (s (s + 1)) sampled at 1 s is the textbook pulse transfer function', () => {
  // Astrom and Wittenmark; Ogata: (0.3679 z + 0.2642) / (z^2 - 1.3679 z + 0.3679)
  const { a, b, c } = stateSpace({ id: '', num: [1], den: [1, 1, 0], kp: 0, ki: 0 });
  const { phi, gamma } = holdInput(a, b, 1);
  const z = complex(0.3, 0.8);
  const found = output(c, resolvent(phi, gamma.getColumn(0), z)!);
  const expected = divideComplex(
    polynomial([0.3678794, 0.2642411], z),
    polynomial([1, -1.3678794, 0.3678794], z),
  );
  expectClose([found.re, found.im], [expected.re, expected.im], 3e-7);
});

test('a third-order loop has the margins that textbooks print', () => {
  // 3 / (s + 1)^3: gain margin 8 / 3, sensitivity 11 / 5, phase margin 41.7 degrees (exact values recomputed).
  const loop = (w: number): Complex => divideComplex(complex(3), powerOfComplex(complex(1, w), 3));
  const found = loopMargins(loop, 1e-3, 1e3);
  expectClose(found.gainMargin, 8 / 3, 1e-9);
  expectClose(found.phaseCrossover, Math.sqrt(3), 1e-9);
  expectClose((found.phaseMargin * 180) / Math.PI, 41.6903261304, 1e-8);
  expectClose(found.delayMargin, 0.700138450925, 1e-8);
  expectClose(found.sensitivity, 2.2, 5e-5);
});

test('poles of the z plane come back to the s plane, slowest first and without pure delays', () => {
  const h = 0.05;
  const back = continuousPoles(
    [
      complex(0),
      expComplex(complex(-3 * h, 4 * h)),
      expComplex(complex(-3 * h, -4 * h)),
      expComplex(complex(-h)),
    ],
    h,
  );
  expectClose(
    back.flatMap((s) => [s.re, s.im]),
    [-1, 0, -3, 4, -3, -4],
    1e-12,
  );
});

test('resolvent says where z is an eigenvalue', () => {
  expect(
    resolvent(
      new Matrix([
        [0.5, 0],
        [0, 0.25],
      ]),
      [1, 1],
      complex(0.5),
    ),
  ).toBeNull();
});
