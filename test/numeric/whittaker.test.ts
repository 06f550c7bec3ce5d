import { describe, it } from 'vitest';
import { lambdaOfWavelength, smoothWhittaker, whittakerCovariance } from '../../src/numeric/whittaker.ts';
import { expectClose } from '../compare.ts';
import { randomness } from '../road/synthetic-road.ts';

const ramp = (n: number): Float64Array => Float64Array.from({ length: n }, (_, i) => i);
const ones = (n: number): Float64Array => new Float64Array(n).fill(1);

describe('Whittaker smoothing of third order', () => {
  it('has the published penalty for half gain at 200 m on a 10 m grid', () => {
    // Source: lambda = (2 sin(pi ds / Lc))^-6 evaluated independently: 1066.167.
    expectClose(lambdaOfWavelength(20), 1066.167, 5e-4);
  });

  it('passes a wave with gain 1 / (1 + lambda (2 sin(pi / m))^6), one half at its wavelength', () => {
    const n = 2001;
    for (const m of [10, 16, 20, 40, 100]) {
      const wave = ramp(n).map((i) => Math.cos((2 * Math.PI * (i - 1000)) / m));
      const fit = smoothWhittaker({
        places: ramp(n),
        values: [wave],
        weights: ones(n),
        knots: n,
        lambda: 1066.1673480114,
      });
      const expected = 1 / (1 + 1066.1673480114 * (2 * Math.sin(Math.PI / m)) ** 6);
      expectClose(fit.smooth[0]![1000]!, expected, 1e-9, `gain at ${m} spacings`);
      if (m === 20) expectClose(fit.smooth[0]![1000]!, 0.5, 1e-9, 'gain at the wavelength');
    }
  });

  it('has the independently computed posterior grade s.d. amid and at the end of 401 knots', () => {
    // Source: dense inverse of W + lambda D3'D3 (n = 401, 10 m grid, wavelength 300 m, noise 1 m), computed outside of
    // the project: central difference amid 0.3881 %, forward difference at the end 1.441 %.
    const n = 401;
    const fit = smoothWhittaker({
      places: ramp(n),
      values: [ramp(n)],
      weights: ones(n),
      knots: n,
      lambda: lambdaOfWavelength(30),
    });
    const z = whittakerCovariance(fit);
    const amid = z[4 * 201]! - 2 * z[4 * 199 + 2]! + z[4 * 199]!;
    const end = z[0]! - 2 * z[1]! + z[4]!;
    expectClose((100 * Math.sqrt(amid)) / 20, 0.3881, 5e-5, 'amid [%]');
    expectClose((100 * Math.sqrt(end)) / 10, 1.441, 5e-4, 'end [%]');
  });

  it.each([1, 5, 10])('gives a quadratic back exactly on a %d m grid at 800 m wavelength', (grid) => {
    const n = 40_000 / grid + 1;
    const hill = ramp(n).map((i) => 300 + 0.06 * (i * grid) - 1.5e-6 * (i * grid) ** 2);
    const fit = smoothWhittaker({
      places: ramp(n),
      values: [hill],
      weights: ones(n),
      knots: n,
      lambda: lambdaOfWavelength(800 / grid),
    });
    expectClose(fit.smooth[0]!, hill, 3e-6, 'elevation [m]');
  });

  it('gives a line back exactly from random places between knots, random weights and a hole without points', () => {
    for (let seed = 1; seed <= 20; seed++) {
      const random = randomness(seed);
      const n = 120;
      const places = Float64Array.from({ length: 300 }, () => 119 * random.uniform()).sort();
      const line = places.map((x) => 4 - 0.3 * x);
      const weights = places.map((x) => (x > 40 && x < 70 ? 0 : 0.1 + random.uniform()));
      const fit = smoothWhittaker({ places, values: [line], weights, knots: n, lambda: 500 });
      expectClose(
        fit.smooth[0]!,
        ramp(n).map((i) => 4 - 0.3 * i),
        1e-8,
        `line of seed ${seed}`,
      );
    }
  });

  it('minimises what it says: no nearby curve costs less', () => {
    const random = randomness(5);
    const n = 60;
    const y = Float64Array.from({ length: n }, () => random.normal());
    const weights = Float64Array.from({ length: n }, () => random.uniform());
    const cost = (z: Float64Array): number => {
      let sum = 0;
      for (let i = 0; i < n; i++) sum += weights[i]! * (y[i]! - z[i]!) ** 2;
      for (let i = 3; i < n; i++) sum += 30 * (z[i]! - 3 * z[i - 1]! + 3 * z[i - 2]! - z[i - 3]!) ** 2;
      return sum;
    };
    const best = smoothWhittaker({ places: ramp(n), values: [y], weights, knots: n, lambda: 30 }).smooth[0]!;
    // The gradient of a quadratic vanishes at its least: central differences of the cost itself.
    for (let i = 0; i < n; i++) {
      const up = best.slice();
      const down = best.slice();
      up[i]! += 1e-3;
      down[i]! -= 1e-3;
      expectClose((cost(up) - cost(down)) / 2e-3, 0, 1e-8, `slope of the cost at ${i}`);
    }
  });
});
