import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { windMet, windRatio } from '../../src/road/wind.ts';
import { expectClose } from '../compare.ts';
import { windFrom } from './road-fixtures.ts';
import { randomness } from './synthetic-road.ts';

const deg = Math.PI / 180;
const places = (n: number): Float64Array => Float64Array.from({ length: n }, (_, i) => 10 * i);

describe('wind met along a road', () => {
  it('has the log-law factors from 10 m', () => {
    // Source: U(z) = U(10) ln(z / z0) / ln(10 / z0), evaluated outside of the project.
    const rows = [
      [1.2, 0.03, 0.635013],
      [1.0, 0.03, 0.603627],
      [1.5, 0.03, 0.673425],
      [1.5, 0.1, 0.588],
      [1.5, 0.3, 0.459],
      [1.2, 0.1, 0.539591],
      [1.2, 0.25, 0.425228],
      [1.2, 0.0002, 0.804038],
    ] as const;
    for (const [riderHeight, terrainRoughness, factor] of rows)
      expectClose(
        windRatio({ height: 10, riderHeight, terrainRoughness }),
        factor,
        factor === 0.588 || factor === 0.459 ? 5e-5 : 6e-7,
        `z ${riderHeight} z0 ${terrainRoughness}`,
      );
  });

  it('splits a wind from 60 degrees off the nose as the worked example does', () => {
    // Source: v = 25 m/s, W = 10 m/s from 60 deg: headwind 5, crosswind 8.66, air speed 31.225 m/s, yaw 16.10 deg.
    const met = windMet(places(1), Float64Array.of(30 * deg), null, windFrom(90 * deg, 10), []);
    expectClose(met.headwind, [5], 1e-12);
    expectClose(met.crosswind, [8.66], 5e-3);
    const ahead = 25 + met.headwind[0]!;
    expectClose(Math.hypot(ahead, met.crosswind[0]!), 31.225, 5e-4, 'air speed [m/s]');
    expectClose(Math.atan2(met.crosswind[0]!, ahead) / deg, 16.1, 5e-3, 'yaw [deg]');
  });

  it('has signs a rider knows: north wind driving north is ahead, west wind then comes from the left', () => {
    const north = windMet(places(1), Float64Array.of(0), null, windFrom(0), []);
    expectClose([north.headwind[0]!, north.crosswind[0]!], [5, 0], 1e-12);
    const west = windMet(places(1), Float64Array.of(0), null, windFrom(270 * deg), []);
    expectClose([west.headwind[0]!, west.crosswind[0]!], [0, -5], 1e-12);
  });

  it('is the same when wind and heading turn together', () => {
    for (let seed = 1; seed <= 50; seed++) {
      const random = randomness(seed);
      const heading = 7 * random.uniform();
      const from = 7 * random.uniform();
      const turn = 20 * random.normal();
      const one = windMet(places(1), Float64Array.of(heading), null, windFrom(from), []);
      const other = windMet(places(1), Float64Array.of(heading + turn), null, windFrom(from + turn), []);
      expectClose(other.headwind, one.headwind, 1e-12);
      expectClose(other.crosswind, one.crosswind, 1e-12);
    }
  });

  it('is weakened by shelter, the strongest where stretches overlap', () => {
    const shelter = [
      { from: 10, to: 30, factor: 0.7, reason: 'hedges' },
      { from: 20, to: 30, factor: 0.4, reason: 'wood' },
    ];
    const met = windMet(places(5), new Float64Array(5), null, windFrom(0), shelter);
    expectClose(met.headwind, [5, 3.5, 2, 2, 5], 1e-12);
  });

  it("lets the file's own headwind beat the steady wind", () => {
    const met = windMet(places(2), new Float64Array(2), Float64Array.of(-1, 2), windFrom(0), []);
    expect(Array.from(met.headwind)).toEqual([-1, 2]);
    expect(Array.from(met.crosswind)).toEqual([0, 0]);
  });

  it('refuses a wind on a road of unknown direction and says what to add', () => {
    const act = (): unknown => windMet(places(2), null, null, windFrom(0), []);
    expect(act).toThrow(InputError);
    expect(act).toThrow(/heading_deg.*headwind_m_s/);
    expect(windMet(places(2), null, null, null, []).headwind).toEqual(new Float64Array(2));
    expect(windMet(places(2), null, null, windFrom(0, 0), []).headwind).toEqual(new Float64Array(2));
  });
});
