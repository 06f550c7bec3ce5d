import { expect, test } from 'vitest';
import type { Warning } from '../../src/problems/warning.ts';
import { runCase } from '../../src/run/run-case.ts';
import { expectClose } from '../compare.ts';
import { ENGINE } from './small-engine.ts';

const ELECTRIC = { kind: 'electric', peak_force_n: 400, efficiency_pct: { drive: 80, regeneration: 50 } };

interface Wish {
  readonly drive: object;
  readonly traction?: object;
  readonly hold?: object;
  readonly grade?: number;
  readonly length?: number;
}

/** Warnings of a run on a straight slope at 60 km/h in still air of 1.2 kg/m3. */
function warningsOf({ drive, traction, hold, grade = 0, length = 3000 }: Wish): readonly Warning[] {
  const text = JSON.stringify({
    track: { profile: [{ length_m: length, grade_pct: grade }] },
    air: { density_kg_m3: 1.2 },
    vehicle: {
      mass: { kerb_kg: 125, rider_kg: 75, rotating_kg: 5 },
      road_load: { cda_m2: 0.58, crr: 0.014 },
      drive,
      ...(traction === undefined ? {} : { traction }),
    },
    hold: { set_speed_kmh: 60, ...hold },
    candidates: [{ name: 'pi', kind: 'pi', kp_pct_per_kmh: 4, ti_s: 8 }],
  });
  return runCase({ file: 'case.json', read: () => new TextEncoder().encode(text) }).warnings;
}
const codes = (warnings: readonly Warning[]): readonly string[] => warnings.map(({ code }) => code);

const V = 60 / 3.6;
/** What 60 km/h on the level asks [N]. */
const LEVEL = 0.5 * 1.2 * 0.58 * V * V + 200 * 9.80665 * 0.014;

test('a shift of the rider cancels hold at its place, for as long as clutch and rider take', () => {
  const [first, ...more] = warningsOf({ drive: ENGINE, hold: { shifts: [{ at_km: 1.25, gear: 3 }] } }).filter(
    ({ code }) => code === 'hold-cancelled',
  );
  expect(more).toEqual([]);
  expect(first!.message).toMatch(/^Hold is cancelled at km 1\.25: .* from gear 4 to 3, .* 2\.5 s later\.$/);
  expectClose(first!.from!, 1250, 1, 'place [m]');
});

test('a shift of the rider so late that hold does not resume says so', () => {
  // 2.5 s at 60 km/h are 42 m.
  const [late] = warningsOf({ drive: ENGINE, hold: { shifts: [{ at_km: 2.98, gear: 3 }] } }).filter(
    ({ code }) => code === 'hold-cancelled',
  );
  expect(late!.message).toMatch(
    /^Hold is cancelled at km 2\.98: .*, and the run ends before hold resumes\.$/,
  );
});

test('a set speed near to the rev limit or the stall of its gear is told with the speed of that end', () => {
  // 9000 rpm over 3 x 9 / 0.3 a metre is 37.7 km/h, over 18 / 0.3 it is 56.5 km/h, over 13.5 / 0.3 it is 75.4 km/h
  const near = warningsOf({ drive: { ...ENGINE, gear: 3 }, hold: { set_speed_kmh: 70 } });
  expect(codes(near)).toContain('near-rev-limit');
  expect(near.find(({ code }) => code === 'near-rev-limit')!.message).toContain('75.4 km/h');
  expect(codes(warningsOf({ drive: { ...ENGINE, gear: 3 }, hold: { set_speed_kmh: 65 } }))).not.toContain(
    'near-rev-limit',
  );
  // 900 rpm over 36 a metre is 9.42 km/h
  const slow = warningsOf({ drive: ENGINE, hold: { set_speed_kmh: 10 }, length: 100 });
  expect(slow.find(({ code }) => code === 'near-stall')!.message).toContain('9.4 km/h');
});

test('an automatic gearbox tells how often it shifts', () => {
  const gearbox = {
    kind: 'automatic',
    shift_lines: [
      { throttle_pct: 0, up_rpm: 5000, down_rpm: 2500 },
      { throttle_pct: 100, up_rpm: 8500, down_rpm: 5000 },
    ],
    gap_s: 0.3,
    dwell_s: 2,
  };
  // 60 km/h is 5730 rpm in the fourth gear, above the up line of the third; 25 km/h is 2387 rpm, below every down line.
  const hold = { changes: [{ at_km: 0.5, set_speed_kmh: 25, ramp_m_s2: 0.5 }] };
  const told = warningsOf({ drive: { ...ENGINE, gearbox }, hold, length: 1000 });
  expect(told.find(({ code }) => code === 'automatic-shifts')!.message).toMatch(/pi \d+ times?\.$/);
});

test('a climb that asks more than a wet tyre passes on reaches the grip, and the warning says where', () => {
  const traction = {
    friction_dry: 0.2,
    friction_wet: 0.1,
    wheelbase_m: 1.3,
    mass_centre_ahead_m: 0.65,
    mass_centre_height_m: 0.6,
  };
  const climb = { drive: ELECTRIC, traction, grade: 10, length: 600 };
  const told = warningsOf(climb).find(({ code }) => code === 'grip-reached')!;
  // mu m g cos (p - b) / (p - mu h)
  const limit = (0.2 * 200 * 9.80665 * 0.65) / (1.3 - 0.12) / Math.hypot(1, 0.1);
  expect(told.message).toContain(`where ${limit.toFixed(0)} N pass`);
  expect(told.message).toContain('The set speed itself asks for as much there');
  expect(told.message).toContain('no slip');
  expect(codes(warningsOf({ ...climb, grade: 0 }))).not.toContain('grip-reached');
});

test('a battery comes to its reserve and runs empty where its energy says', () => {
  const battery = { capacity_wh: 60, charge_pct: 100, reserve_pct: 20 };
  const told = warningsOf({ drive: { ...ELECTRIC, battery } });
  // Way on an energy E at 80 %: 0.8 E / F.
  const way = (share: number): number => (0.8 * share * 60 * 3600) / LEVEL;
  const place = (code: string) => told.find((one) => one.code === code)?.from ?? Number.NaN;
  expectClose(place('battery-reserve'), way(0.8), 25, 'reserve [m]');
  expectClose(place('battery-empty'), way(1), 25, 'empty [m]');
  expect(codes(warningsOf({ drive: { ...ELECTRIC, battery: { ...battery, capacity_wh: 600 } } }))).toEqual(
    [],
  );
});

test('a descent on which a full battery refuses the regeneration is warned of, with what it takes', () => {
  const drive = (charge_pct: number) => ({
    ...ELECTRIC,
    regeneration_force_n: 300,
    battery: {
      capacity_wh: 4000,
      charge_pct,
      full_fade: [
        { charge_pct: 90, accepts_pct: 100 },
        { charge_pct: 100, accepts_pct: 0 },
      ],
    },
  });
  // 10 % pushes with 195 N less 124 N.
  const told = warningsOf({ drive: drive(100), grade: -10 }).find(
    ({ code }) => code === 'regeneration-refused',
  )!;
  expect(told.message).toContain('as little as 0 % of it');
  expect(codes(warningsOf({ drive: drive(60), grade: -10 }))).not.toContain('regeneration-refused');
});

test('heat takes force away from where the first-order law says', () => {
  const power = LEVEL * V;
  const peak = 2 * power;
  const continuous = 0.9 * power;
  const seconds = 20;
  const told = warningsOf({
    drive: {
      ...ELECTRIC,
      peak_power_kw: peak / 1000,
      battery: { capacity_wh: 4000 },
      heating: { continuous_power_kw: continuous / 1000, peak_power_s: seconds, onset_pct: 80 },
    },
  }).find(({ code }) => code === 'derated-by-heat')!;
  // tau = -t / ln(1 - (Pc / Pp)^2); heat h = (P / Pc)^2 (1 - e^(-t / tau)); 1 % is gone at h = 0.8 + 0.2 x 0.01 / (1 - Pc / Pp)
  const tau = -seconds / Math.log(1 - (continuous / peak) ** 2);
  const heat = 0.8 + (0.2 * 0.01) / (1 - continuous / peak);
  const at = -tau * Math.log(1 - heat * (continuous / power) ** 2) * V;
  expectClose(told.from!, at, 30, 'place [m]');
});
