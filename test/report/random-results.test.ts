import { expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { chartFiles } from '../../src/report/chart-files.ts';
import { dataFiles } from '../../src/report/data/data-files.ts';
import { summaryJson } from '../../src/report/data/summary.ts';
import { renderReport } from '../../src/report/render-report.ts';
import { runCase } from '../../src/run/run-case.ts';
import { FIGURES } from '../../src/study/figure-table.ts';
import { type Draw, randomDrive, randomFittings } from './random-vehicle.ts';
import { seeded } from './seeded.ts';

/** Small random cases, all of whose keys are in range: whether the vehicle can hold the speed is left to chance. */
function randomCase(random: () => number): { readonly files: Readonly<Record<string, string>> } {
  const between = (least: number, most: number, digits = 2): number =>
    Number((least + (most - least) * random()).toFixed(digits));
  const oneOf = <T>(...values: readonly T[]): T => values[Math.floor(random() * values.length)]!;
  const maybe = <T extends object>(part: T, share = 0.5): T | Record<string, never> =>
    random() < share ? part : {};
  const several = <T>(least: number, most: number, item: (i: number) => T): T[] =>
    Array.from({ length: least + Math.floor(random() * (most - least + 1)) }, (_, i) => item(i));

  const draw: Draw = { between, oneOf, maybe };
  const way = oneOf('length', 'time', 'positions', 'distances');
  const wind = random() < 0.5;
  const piece = () => ({
    ...(way === 'time' ? { for_s: between(3, 30) } : { length_m: between(30, 400) }),
    grade_pct: oneOf(0, between(-9, 9), between(-25, 25)),
    ...(wind ? { heading_deg: between(0, 360) } : {}),
    ...maybe({ headwind_m_s: between(-8, 8) }, 0.2),
  });
  const written = way === 'length' || way === 'time';
  const direction = oneOf('there', 'there', 'back', 'both');
  const points = 40 + Math.floor(random() * 20);
  let [latitude, longitude, elevation, x] = [between(-60, 60), oneOf(8, 179.99, -180), between(0, 900), 0];
  const rows = Array.from({ length: points }, () => {
    latitude += between(-0.0001, 0.0003, 7);
    longitude += between(-0.0001, 0.0003, 7);
    elevation += between(-1.6, 1.6);
    x += between(10, 40);
    const place = way === 'positions' ? `${latitude.toFixed(7)},${longitude.toFixed(7)}` : x.toFixed(2);
    return `${place},${elevation.toFixed(2)}`;
  });
  const csv = `${way === 'positions' ? 'lat_deg,lon_deg' : 'distance_m'},elevation_m\n${rows.join('\n')}\n`;

  const setSpeed = between(25, 110, 1);
  const names = ['a', 'b', 'c'];
  const candidate = (i: number) => ({
    name: names[i],
    ...oneOf<object>(
      { kind: 'locked' },
      { kind: 'locked', throttle_pct: between(0, 100) },
      {
        kind: 'pi',
        kp_pct_per_kmh: between(0.2, 15),
        ti_s: between(0.5, 60),
        sample_s: oneOf(0.01, 0.02, 0.1, 0.5),
        computing_delay_s: oneOf(0, 0.013, 0.1),
        setpoint_weight: between(0, 1),
        integration: oneOf('forward', 'backward'),
        anti_windup: oneOf<object>(
          { kind: 'none' },
          { kind: 'conditional' },
          { kind: 'back_calculation', tracking_s: between(0.2, 20) },
        ),
        ...maybe({ setpoint_ramp_m_s2: between(0.1, 2) }),
      },
      { kind: 'pi', design: { settling_s: between(10, 90), overshoot_pct: between(0, 20) } },
      {
        kind: 'pi',
        design: { droop_kmh: between(0.5, 5), grade_step_pct: between(1, 8), damping: between(0.4, 1.2) },
      },
    ),
  });
  const candidates = several(1, 3, candidate);
  const requirement = (i: number) => {
    const { name, takesBand, better } = oneOf(...FIGURES);
    return {
      id: `R-${i}`,
      figure: name,
      ...(takesBand ? { band_kmh: oneOf(1, 2, 5) } : {}),
      ...oneOf<object>({ where: 'all' }, { where: 'holdable' }, { where: { from_km: 0, to_km: 0.1 } }),
      ...((better ?? oneOf('higher', 'lower')) === 'higher'
        ? { at_least: between(-20, name === 'worst_low_kmh' ? -0.1 : 80) }
        : { at_most: between(-5, 100) }),
    };
  };
  const drive = {
    peak_force_n: between(80, 900),
    ...maybe({ peak_power_kw: between(1, 20) }),
    ...maybe({ closed_throttle_force_n: between(0, 120) }),
    ...maybe({ lag_s: between(0.01, 0.6) }),
  };
  const load = oneOf<object>(
    {
      cda_m2: between(0.2, 0.9),
      crr: between(0.004, 0.03, 4),
      ...maybe({ cda_yaw_per_rad2: between(0, 2) }),
    },
    { f0_n: between(5, 60), f2_n_per_kmh2: between(0.01, 0.04, 4) },
  );
  const asCase = {
    ...maybe({ title: 'A <b>random</b> "case" & more' }),
    track: written
      ? {
          profile: several(1, 4, piece),
          ...maybe({ vertical_curve_m: between(1, 20) }, 0.3),
          ...maybe({ start_elevation_m: between(0, 2500) }),
          direction,
        }
      : { file: 'track.csv', direction },
    road: {
      grid_m: oneOf(5, 10, 25),
      ...maybe({ elevation_source: oneOf('exact', 'lidar', 'gnss', 'dem90') }),
    },
    ...(wind && way !== 'distances'
      ? { wind: { speed_m_s: between(0, 15), from_deg: between(0, 360), terrain: oneOf('open', 'rough') } }
      : {}),
    air: oneOf<object>({}, { temperature_c: between(-20, 40) }, { density_kg_m3: between(0.9, 1.3) }),
    vehicle: {
      ...maybe({ name: 'Test <i>vehicle</i>' }),
      mass: {
        kerb_kg: between(20, 300),
        rider_kg: between(40, 120),
        ...maybe({ payload_kg: between(0, 60) }),
      },
      road_load: load,
      drive: oneOf<() => object>(
        () => ({ kind: 'force', ...drive, ...maybe({ altitude_derate: 'naturally_aspirated' }) }),
        () => randomDrive(draw),
        () => randomDrive(draw),
      )(),
      ...randomFittings(draw),
    },
    hold: {
      set_speed_kmh: setSpeed,
      ...maybe({ set_speed_is: 'indicated' }, 0.3),
      ...maybe({ start_speed_kmh: between(10, 110) }, 0.3),
      changes: oneOf<object[]>(
        [],
        [
          {
            at_s: between(1, 300),
            set_speed_kmh: between(25, 110),
            ...maybe({ ramp_m_s2: between(0.1, 2) }),
          },
        ],
        [{ at_km: 0.02, set_speed_kmh: between(25, 110) }],
      ),
    },
    ...maybe({ rider: { brakes_above_kmh: between(1, 20) } }),
    scheme: oneOf('exact', 'fast'),
    candidates,
    segments: oneOf<object>({ by: 'terrain' }, { by: 'length', length_m: between(20, 1000) }),
    requirements: several(0, 3, requirement),
    output: { series: oneOf('bins', 'bins', 'full'), bin_m: oneOf(1, 10, 50) },
  };
  // A plan of shifts is for a clutch, and for a road that is as long.
  const drawn = asCase.vehicle.drive as { gearbox?: { kind: string } };
  const shifts = drawn.gearbox?.kind === 'clutch' ? [{ at_km: 0.025, gear: 4 }] : [];
  const planned = { ...asCase, hold: { ...asCase.hold, shifts } };
  return { files: { 'case.yaml': JSON.stringify(planned), 'track.csv': csv } };
}

test.each([1, 2, 3, 4])(
  'random valid cases give whole files of finite numbers and close their energy account (seed %i)',
  (seed) => {
    const random = seeded(seed);
    let whole = 0;
    for (let i = 0; i < 10; i++) {
      const { files } = randomCase(random);
      const told = `case ${i}: ${files['case.yaml']}`;
      let run: ReturnType<typeof runCase>;
      try {
        run = runCase({ file: 'case.yaml', read: (name) => new TextEncoder().encode(files[name] ?? '') });
      } catch (error) {
        if (!(error instanceof InputError)) throw new Error(told, { cause: error });
        expect(error.message, told).not.toMatch(/\b(?:NaN|Infinity|undefined)\b|\[object/);
        continue;
      }
      whole++;
      try {
        const written = [
          ...dataFiles(run),
          { name: 'report.html', text: renderReport(run, { units: i % 2 === 0 ? 'kmh' : 'mph' }) },
          ...chartFiles(run, { units: 'kmh' }).map(({ name, svg }) => ({ name, text: svg })),
          { name: 'summary.json', text: summaryJson(run, []) },
        ];
        for (const { name, text } of written) {
          const found = /.{0,80}(?:\b(?:NaN|Infinity|undefined)\b|\[object ).{0,40}/.exec(text)?.[0];
          expect(found, `${name} of ${told}`).toBeUndefined();
        }
        for (const { name, result } of run.candidates) {
          expect(result.status, `${name} of ${told}`).not.toBe('non_finite');
          expect(Math.abs(result.ledger.residual), `${name} of ${told}`).toBeLessThanOrEqual(1e-6);
        }
      } catch (error) {
        throw new Error(told, { cause: error });
      }
    }
    // Enough of them run: what is refused is what no vehicle of the draw can do.
    expect(whole).toBeGreaterThanOrEqual(3);
  },
  // Ten runs with their reports: half a minute where others share the machine.
  180_000,
);
