import { describe, expect, it } from 'vitest';
import type { FigureRecord } from '../../src/study/figure-measures.ts';
import { FIGURES, figureRow } from '../../src/study/figure-table.ts';
import type { EnergySource } from '../../src/vehicle/energy-source.ts';
import { expectClose } from '../compare.ts';
import { figureRecord, recordOf } from './record-of.ts';

/**
 * Four bins of 100 m at a set speed of 20 m/s, worked out by hand. Errors are constant within a bin:
 * e = 0, -2, -4, +1 m/s, so the speeds are 20, 18, 16, 21 m/s and the times 5, 100/18, 6.25, 100/21 s.
 */
const SPEEDS = [20, 18, 16, 21];
const BINS = recordOf(
  100,
  SPEEDS.map((speed, i) => {
    const time = 100 / speed;
    const e = speed - 20;
    return {
      time,
      setSpeed: 20,
      speedMean: speed,
      errorMean: e * time,
      errorSquare: e * e * time,
      errorMin: e - 0.1,
      errorMax: e + 0.1,
      throttleMean: [0.3, 0.5, 1, 0.2][i]!,
      throttleTravel: [0, 0.2, 0.5, 0.8][i]!,
      timeUpper: i === 2 ? time : 0,
      timeLower: i === 3 ? 1 : 0,
      timeRate: i === 1 ? 0.5 : 0,
      timeBrake: i === 3 ? time / 2 : 0,
      timeInBand: [i === 0 || i === 3 ? time : 0, i === 2 ? 0 : time],
      driveWork: [3600, 7200, 18000, 0][i]!,
      regenerationWork: i === 3 ? -1800 : 0,
      brakeWork: i === 3 ? 900 : 0,
      drawn: [4500, 9000, 22500, -1080][i]!,
    };
  }),
  2,
);

const record = (chosen: number[], more: Partial<FigureRecord> = {}): FigureRecord =>
  figureRecord(more.bins ?? BINS, {
    chosen: Uint8Array.from(chosen),
    bands: [1.5, 2.5],
    band: 1.5,
    brakeNeeded: Float64Array.of(0, 0, 500, 2400),
    ledgerResidual: -3e-9,
    ...more,
  });
const MAP = {
  shaftSpeed: Float64Array.of(0, 1),
  torque: Float64Array.of(0, 1),
  power: Float64Array.of(0, 0, 0, 1),
  least: 0,
};
/** 12.96 MJ from full to empty, of which 90 % at the start and 10 % kept: 10.368 MJ. */
const BATTERY: EnergySource = {
  kind: 'battery',
  map: MAP,
  capacity: 12.96e6,
  charge: 0.9,
  reserve: 0.1,
  sag: null,
  acceptance: null,
  heating: null,
};
/** 32 MJ a litre, 10 litres. */
const TANK: EnergySource = { kind: 'fuel', map: MAP, heat: 32e9, capacity: 320e6 };
const measure = (name: string, of: FigureRecord) => figureRow(name)!.measure(of);
const value = (name: string, of = record([1, 1, 1, 1])): number => {
  const { value: found } = measure(name, of);
  if (typeof found !== 'number') throw new Error(`${name}: ${found.none}`);
  return found;
};

// By hand: total time 5 + 5.5555... + 6.25 + 4.7619... s.
const TIME = 5 + 50 / 9 + 6.25 + 100 / 21;

describe('figures of a record worked out by hand', () => {
  it('weigh errors with time', () => {
    expectClose(value('mean_error_kmh'), (3.6 * ((-2 * 50) / 9 - 4 * 6.25 + 100 / 21)) / TIME, 1e-12);
    expectClose(value('rms_error_kmh'), 3.6 * Math.sqrt(((4 * 50) / 9 + 16 * 6.25 + 100 / 21) / TIME), 1e-12);
    expectClose(value('within_band_pct'), (100 * (5 + 100 / 21)) / TIME, 1e-12);
    expectClose(
      value('within_band_pct', record([1, 1, 1, 1], { band: 2.5 })),
      (100 * (TIME - 6.25)) / TIME,
      1e-12,
    );
  });

  it('give extremes their sign and their place', () => {
    const low = measure('worst_low_kmh', record([1, 1, 1, 1]));
    expectClose(low.value as number, -4.1 * 3.6, 1e-12);
    expect(low.at).toBe(250);
    const high = measure('worst_high_kmh', record([1, 1, 1, 1]));
    expectClose(high.value as number, 1.1 * 3.6, 1e-12);
    expect(high.at).toBe(350);
    expect(measure('within_band_pct', record([1, 1, 1, 1])).at).toBe(250);
    expect(measure('worst_high_kmh', record([0, 1, 1, 0]))).toEqual({ value: 0, at: null });
  });

  it('count the time lost against the set speed over the same way', () => {
    // 400 m at 20 m/s take 20 s.
    expectClose(value('time_lost_s'), TIME - 20, 1e-12);
    expectClose(value('time_s'), TIME, 1e-12);
    expectClose(value('time_lost_s', record([0, 0, 1, 0])), 6.25 - 5, 1e-12);
  });

  it('count limits, travel, energy and brake', () => {
    expectClose(value('at_upper_limit_s'), 6.25, 1e-12);
    expectClose(value('at_lower_limit_s'), 1, 1e-12);
    expectClose(value('at_rate_limit_s'), 0.5, 1e-12);
    expectClose(value('at_limit_pct'), (100 * 7.25) / TIME, 1e-12);
    expectClose(value('throttle_travel_pct_per_km'), 150 / 0.4, 1e-9);
    expectClose(
      value('throttle_mean_pct'),
      (100 * (0.3 * 5 + (0.5 * 50) / 9 + 6.25 + (0.2 * 100) / 21)) / TIME,
      1e-12,
    );
    expectClose(value('wheel_energy_wh'), 8, 1e-12);
    expectClose(value('wheel_energy_wh_per_km'), 20, 1e-12);
    expectClose(value('regeneration_wh'), 0.5, 1e-12);
    expectClose(value('brake_energy_wh'), 0.25, 1e-12);
    expectClose(value('brake_distance_m'), 50, 1e-12);
    expectClose(value('ledger_residual'), 3e-9, 1e-24);
    expectClose(
      value('battery_energy_wh', record([1, 1, 1, 1], { source: BATTERY })),
      (4500 + 9000 + 22500 - 1080) / 3600,
      1e-12,
    );
  });

  it('tell what was drawn from tank or battery, and how far what is there lasts', () => {
    // 34 920 J over 400 m.
    const drawn = 4500 + 9000 + 22500 - 1080;
    const of = (source: EnergySource) => record([1, 1, 1, 1], { source });
    expectClose(value('drawn_wh_per_km', of(TANK)), drawn / 3600 / 0.4, 1e-12);
    expectClose(value('fuel_l_per_100km', of(TANK)), (drawn / 32e6 / 0.4) * 100, 1e-12);
    expectClose(value('range_km', of(TANK)), 320e6 / (drawn / 0.4), 1e-9);
    expectClose(value('range_km', of(BATTERY)), 10.368e6 / (drawn / 0.4), 1e-9);
  });

  it('count shifts, the time they cancel hold, the time beyond grip and the brake that would be needed', () => {
    const shifted = recordOf(
      100,
      SPEEDS.map((speed, i) => ({ time: 100 / speed, timeShift: [0, 1.5, 0, 0.5][i]! })),
    );
    const of = (chosen: number[]) =>
      record(chosen, {
        bins: shifted,
        shifts: [120, 399.9, 400],
        shiftsCancel: true,
        beyondGrip: Uint8Array.of(0, 0, 1, 1),
      });
    expect(value('shifts', of([1, 1, 1, 1]))).toBe(3);
    expect(value('shifts', of([1, 1, 1, 0]))).toBe(1);
    expect(value('hold_cancelled_s', of([1, 1, 1, 1]))).toBe(2);
    expect(value('hold_cancelled_s', { ...of([1, 1, 1, 1]), shiftsCancel: false })).toBe(0);
    expectClose(value('beyond_grip_s', of([1, 1, 1, 1])), 6.25 + 100 / 21, 1e-12);
    expect(measure('brake_power_needed_kw', of([1, 1, 1, 1]))).toEqual({ value: 2.4, at: 350 });
    expect(measure('brake_power_needed_kw', of([1, 1, 0, 0]))).toEqual({ value: 0, at: null });
  });

  it('count the last bin only as far as the run went', () => {
    expectClose(value('wheel_energy_wh_per_km', record([1, 1, 1, 1], { end: 320 })), 8 / 0.32, 1e-9);
  });

  it('take lengths from the speed on a road along time, whose distances are nominal', () => {
    // 5 s at 20, 50 / 9 s at 18, 6.25 s at 16, 100 / 21 s at 21 m/s are 100 m each; run at half the speed, 50 m each.
    const slow = { ...BINS, speedMean: BINS.speedMean.map((v) => v / 2) };
    const along = record([1, 1, 1, 1], { bins: slow, along: 'time' });
    expectClose(value('wheel_energy_wh_per_km', along), 8 / 0.2, 1e-9);
    expectClose(value('throttle_travel_pct_per_km', along), 150 / 0.2, 1e-9);
    expectClose(value('brake_distance_m', along), 25, 1e-9);
  });

  it('take the longest recovery that is known, and one that never came before any other', () => {
    const of = (...times: (number | { none: string })[]) =>
      measure('recovery_s', record([1], { recoveries: times.map((time, k) => ({ at: 100 * k, time })) }));
    expect(of(2, 7, 3)).toEqual({ value: 7, at: 100 });
    expect(of()).toEqual({ value: 0, at: null });
    expect(of(2, { none: 'the road ended' }, 9)).toEqual({ value: 9, at: 200, open: 'the road ended' });
    expect(of(0, { none: 'the road ended' })).toEqual({ value: { none: 'the road ended' }, at: 100 });
    const never = { none: 'it was not back within 1 km/h for 3 s in two minutes' };
    expect(of(2, { none: 'the road ended' }, never, 9)).toEqual({ value: never, at: 200 });
  });

  it('do not exist where nothing was driven, and are never NaN', () => {
    const nowhere = record([0, 0, 0, 0], { source: BATTERY, beyondGrip: new Uint8Array(4) });
    for (const row of FIGURES) {
      const { value: found } = row.measure(
        row.name.startsWith('fuel') ? { ...nowhere, source: TANK } : nowhere,
      );
      if (row.weight !== 'event' || row.name.startsWith('worst'))
        expect(found, row.name).toEqual({ none: 'no such stretch was driven' });
    }
    expect(measure('within_band_pct', record([1, 1, 1, 1], { band: 0.7 })).value).toEqual({
      none: 'the run did not count the time within this band',
    });
    expect(measure('battery_energy_wh', record([1, 1, 1, 1])).value).toEqual({
      none: 'the drive has no battery with losses',
    });
    expect(measure('fuel_l_per_100km', record([1, 1, 1, 1], { source: BATTERY })).value).toHaveProperty(
      'none',
    );
    expect(measure('range_km', record([1, 1, 1, 1])).value).toHaveProperty('none');
    expect(measure('range_km', record([0, 0, 0, 1], { source: BATTERY })).value).toEqual({
      none: 'nothing was drawn on the whole',
    });
    const endless = { ...TANK, capacity: null };
    expect(measure('range_km', record([1, 1, 1, 1], { source: endless })).value).toEqual({
      none: 'the tank has no known size',
    });
    expect(measure('beyond_grip_s', record([1, 1, 1, 1])).value).toHaveProperty('none');
  });
});

describe('the table of figures', () => {
  it('has one row a name, each with its unit as its ending', () => {
    const endings: Record<string, string> = {
      '%': '_pct',
      'km/h': '_kmh',
      s: '_s',
      Wh: '_wh',
      'Wh/km': '_wh_per_km',
      '%/km': '_pct_per_km',
      m: '_m',
      km: '_km',
      kW: '_kw',
      'l/100 km': '_l_per_100km',
      shifts: 'shifts',
      events: '_events',
      '1': 'residual',
      'km/h·s': '_kmh_s',
      '(km/h)²·s': '_kmh2_s',
      'km/h·s²': '_kmh_s2',
      'per km': '_per_km',
      '%/s': '_pct_per_s',
      'm/s²': '_m_s2',
      'm/s³': '_m_s3',
      '(m/s)/km': '_m_s_per_km',
    };
    expect(new Set(FIGURES.map((row) => row.name)).size).toBe(FIGURES.length);
    for (const row of FIGURES) {
      expect(row.name.endsWith(endings[row.unit]!), row.name).toBe(true);
      expect(row.definition.length).toBeGreaterThan(10);
      expect(row.definition.endsWith('.'), row.name).toBe(true);
    }
  });
});
