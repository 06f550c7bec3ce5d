import { parse } from 'csv-parse/sync';
import { expect, test } from 'vitest';
import { dataFiles } from '../../../src/report/data/data-files.ts';
import { fullSeriesCsv } from '../../../src/report/data/full-series.ts';
import { summaryJson } from '../../../src/report/data/summary.ts';
import { causeNameOf } from '../../../src/report/model/cause-words.ts';
import { expectClose } from '../../compare.ts';
import { fixtureResult } from '../fixture.ts';
import { cutSeries, fixtureRun } from '../fixture-run.ts';

type Row = Readonly<Record<string, string>>;
const rowsOf = (text: string): readonly Row[] => parse(text, { columns: true });

const run = fixtureResult({ engine: true });
const files = new Map(dataFiles(run).map(({ name, text }) => [name, text]));
const table = (name: string): readonly Row[] => rowsOf(files.get(name)!);
const summary = JSON.parse(summaryJson(run, []));

test('hills tell gears from 1, the speed that each sustains, and the braking', () => {
  const rows = table('hills.csv');
  const descent = rows.find((row) => row.kind === 'descent')!;
  const climb = rows.find((row) => row.kind === 'climb')!;
  expect(climb.gear_engaged).toBe('6');
  expect(climb.gear_needed).toBe('4');
  expect(climb.sustained_by_gear_kmh!.split(' ')).toHaveLength(6);
  expect(Number(climb.brake_power_kw)).toBe(0);
  expect(Number(descent.brake_power_kw)).toBeGreaterThan(1);
  const hill = run.hills.find(({ number }) => String(number) === descent.hill)!;
  expectClose(Number(descent.brake_energy_wh), hill.brakeEnergy / 3600, 1e-3, 'Wh');
});

test('a hill lost to a battery says so, and is not laid to thin air', () => {
  const hills = run.hills.map((hill, i) => ({
    ...hill,
    outcomes: hill.outcomes.map((outcome) => ({
      ...outcome,
      cause: i === 0 ? ('derating' as const) : ('gains' as const),
      derating: 'heat' as const,
    })),
  }));
  const [first, ...others] = rowsOf(
    new Map(dataFiles({ ...run, hills }).map((file) => [file.name, file.text])).get('hills.csv')!,
  );
  expect([first!.cause, first!.derating]).toEqual(['derating', 'heat']);
  expect(others.find(({ hill }) => hill !== first!.hill)!.derating).toBe('');
  expect(causeNameOf('derating', 'heat')).toBe('heat');
  // Results of earlier versions tell no more than the cause.
  expect(causeNameOf('derating', null)).toBe('thin air');
  expect(causeNameOf('of a later version', null)).toBe('of a later version');
});

test('a hill of a drive without gears leaves those fields empty', () => {
  const plain = new Map(dataFiles(fixtureResult({ lengthKm: 18 })).map(({ name, text }) => [name, text]));
  for (const row of rowsOf(plain.get('hills.csv')!))
    expect([row.gear_engaged, row.gear_needed, row.sustained_by_gear_kmh]).toEqual(['', '', '']);
  expect(rowsOf(plain.get('series-locked.csv')!)[0]!.drawn_energy_wh).toBe('');
});

test('limit cycles stand in cycles.csv and, the same, in the summary', () => {
  const rows = table('cycles.csv');
  expect(rows.map(({ cause }) => cause)).toEqual(['slack', 'fuel_cut']);
  expect(rows[0]).toMatchObject({ period_s: '2.840', turns: '41', speed_amplitude_kmh: '0.3960' });
  expect(rows[0]).toMatchObject({ throttle_amplitude_pct: '3.400' });
  expect(summary.cycles).toHaveLength(rows.length);
  for (const [key, text] of Object.entries(rows[1]!))
    expect(String(summary.cycles[1][key])).toBe(/^[\d.]+$/.test(text) ? String(Number(text)) : text);
});

test('a series by bin has the gear, the shift as its mode and the energy drawn', () => {
  const rows = table('series-pi-firm.csv');
  const at = run.rider.shifts[0]!.distance;
  const shifting = rows.filter(({ mode }) => mode === 'shift');
  expect(shifting.map(({ distance_m }) => Number(distance_m))).toEqual([at, at + 10, at + 20, at + 30]);
  expect(rows[0]!.gear).toBe('6');
  expect(rows.at(-1)!.gear).toBe('5');
  const { drawn } = run.candidates[0]!.result.ledger;
  expectClose(Number(rows.at(-1)!.drawn_energy_wh), drawn! / 3600, 1e-3, 'Wh');
});

test('a full series tells the engine in rpm, and nothing for a drive without an engine', () => {
  const driven = fixtureRun(run.road, 60 / 3.6, run.candidates[0]!.controller, 0.5, 400);
  const series = {
    ...cutSeries(driven.series, 0, 5, 50),
    shaftSpeed: new Float64Array(60).fill(100 * Math.PI),
  };
  const column = (result: typeof run): string =>
    rowsOf(fullSeriesCsv(result, result.candidates[0]!, series))[3]!.engine_rpm!;
  expect(column(run)).toBe('3000');
  expect(column(fixtureResult({ lengthKm: 18 }))).toBe('');
});

test('the summary tells fuel and shifts', () => {
  const [candidate] = summary.candidates;
  const { ledger } = run.candidates[0]!.result;
  expectClose(candidate.energy.fuel_l, ledger.drawn! / 32e6, 1e-4, 'l');
  expect(candidate.shifts).toEqual([
    expect.objectContaining({ from_gear: 6, to_gear: 5, at_km: run.rider.shifts[0]!.distance / 1000 }),
  ]);
});
