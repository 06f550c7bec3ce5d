import { describe, expect, test } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { FullSeries } from '../../src/loop/result.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';
import { coasting, forceOf, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const G = 9.80665;
const RHO = 1.2;

interface Coast {
  readonly case: string;
  readonly m_kg: number;
  readonly f0_N?: number;
  readonly f1_N_per_m_s?: number;
  readonly f2_N_per_m2_s2?: number;
  readonly CdA_m2?: number;
  readonly Crr?: number;
  readonly headwind_m_s?: number;
  readonly F_N?: number;
  readonly v0_m_s: number;
  readonly stop_time_s?: number;
  readonly stop_distance_m?: number;
  readonly t_s: number[];
  readonly v_m_s: number[];
  readonly x_m: number[];
}
const { cases } = readReference<{ cases: Coast[] }>('loop/coastdown.json');

/** F = f0 + f1 v + f2 v^2 as the loop's rolling and air parts. */
function vehicleOf(c: Coast): Vehicle {
  const weight = c.m_kg * G;
  const cda = c.CdA_m2 ?? (2 * (c.f2_N_per_m2_s2 ?? 0)) / RHO;
  return {
    ...referenceMotorcycle,
    mass: c.m_kg,
    roadLoad: {
      ...referenceMotorcycle.roadLoad,
      cda,
      c0: c.Crr ?? (c.f0_N ?? 0) / weight,
      c1: (c.f1_N_per_m_s ?? 0) / weight,
    },
    drive: forceOf({ peakForce: 1000 }),
  };
}

function planOf(c: Coast, scheme: LoopPlan['scheme']): LoopPlan {
  const road = roadOver(stations(4000, 10), { headwind: () => c.headwind_m_s ?? 0 });
  return planOver(road, vehicleOf(c), {
    controller: { kind: 'locked', throttle: (c.F_N ?? 0) / 1000 },
    hold: { setSpeed: c.v0_m_s, setSpeedIs: 'true_speed', startSpeed: c.v0_m_s, changes: [] },
    scheme,
  });
}

const speedsAt = (series: FullSeries, c: Coast, column: Float64Array): number[] => {
  const count = c.t_s.filter((t) => t <= series.time[series.size - 1]!).length;
  return c.t_s.slice(0, count).map((t) => column[Math.round(t / 0.02)]!);
};

describe('coasting and constant force against closed forms', () => {
  // `exact` to rounding; `fast` to its second order at 0.02 s.
  for (const [scheme, tolerance] of [
    ['exact', 2e-11],
    ['fast', 2e-5],
  ] as const)
    for (const c of cases)
      test(`${c.case} by ${scheme}`, () => {
        const { series } = replay(planOf(c, scheme), { settledAt: 0 }, 4000);
        const speed = speedsAt(series, c, series.speed);
        expect(speed.length).toBeGreaterThan(5);
        expectClose(speed, c.v_m_s.slice(0, speed.length), tolerance, 'speed');
        const distance = speedsAt(series, c, series.distance);
        expectClose(distance, c.x_m.slice(0, distance.length), 50 * tolerance, 'distance');
      });

  for (const c of cases.filter((item) => item.stop_time_s !== undefined))
    test(`${c.case} stops when and where it must`, () => {
      const result = runLoop(planOf(c, 'exact'));
      expect(result.status).toBe('stopped');
      expectClose(result.endTime, c.stop_time_s!, 2e-9, 'time');
      expectClose(result.endDistance, c.stop_distance_m!, 2e-9, 'distance');
    });
});

interface TableRow {
  readonly inertia_kg: number;
  readonly f0_n: number;
  readonly f2_n_per_kmh2: number;
  readonly time_70_60_s: number;
  readonly longest_s: number;
  readonly shortest_s: number;
}

describe('40 CFR 86.529-98: time from 70 to 60 km/h', () => {
  const rows = readReference<TableRow[]>('coast-down-table/table.json');
  test('the table has its 25 rows', () => expect(rows.length).toBe(25));

  for (const row of rows)
    test(`${row.inertia_kg} kg`, () => {
      const plan = planOf(
        {
          case: '',
          m_kg: row.inertia_kg,
          f0_N: row.f0_n,
          f2_N_per_m2_s2: row.f2_n_per_kmh2 * 3.6 * 3.6,
          v0_m_s: 75 / 3.6,
          t_s: [],
          v_m_s: [],
          x_m: [],
        },
        'exact',
      );
      const { series } = replay({ ...plan, controller: coasting }, { settledAt: 0 }, 200);
      const crossing = (speed: number): number => {
        const i = series.speed.findIndex((v) => v < speed);
        const share = (series.speed[i - 1]! - speed) / (series.speed[i - 1]! - series.speed[i]!);
        return series.time[i - 1]! + share * (series.time[i]! - series.time[i - 1]!);
      };
      const time = crossing(60 / 3.6) - crossing(70 / 3.6);
      // The time printed for 160 kg does not follow from its own coefficients: only its tolerance holds.
      if (row.inertia_kg !== 160) expectClose(time, row.time_70_60_s, 0.015, 'time');
      expect(time).toBeGreaterThanOrEqual(row.shortest_s);
      expect(time).toBeLessThanOrEqual(row.longest_s);
    });
});
