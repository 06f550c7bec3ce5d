import { describe, expect, it } from 'vitest';
import { histogramsCsv } from '../../src/report/data/histogram-table.ts';
import { classText, timeShareText } from '../../src/report/model/histogram-words.ts';
import { spreadsOf } from '../../src/report/model/histograms.ts';
import { viewOf } from '../../src/report/model/view.ts';
import { spreadSection } from '../../src/report/sections/spread-section.ts';
import { runCase } from '../../src/run/run-case.ts';
import type { RunResult } from '../../src/run/run-result.ts';
import { expectClose } from '../compare.ts';

const CASE = `track: {profile: [{length_m: 700, grade_pct: 0}, {length_m: 500, grade_pct: 5}, {length_m: 800, grade_pct: -1}], vertical_curve_m: 40}
vehicle:
  name: Test
  mass: {kerb_kg: 140, rider_kg: 75}
  road_load: {cda_m2: 0.58, crr: 0.014}
  drive: {kind: force, peak_force_n: 260, closed_throttle_force_n: 40, lag_s: 0.1}
air: {density_kg_m3: 1.2}
hold: {set_speed_kmh: 60, changes: [{at_km: 1.6, set_speed_kmh: 55}]}
candidates:
  - {name: locked, kind: locked}
  - {name: firm, kind: pi, kp_pct_per_kmh: 6, ti_s: 8}
  - {name: soft, kind: pi, kp_pct_per_kmh: 1, ti_s: 12}
requirements:
  - {id: D-1, figure: p95_abs_error_kmh, at_most: 2, where: all}
  - {id: D-2, figure: p95_jerk_m_s3, at_most: 1}
  - {id: D-3, figure: headroom_p5_pct, at_least: 5, where: {from_km: 0.5, to_km: 1.3}}
  - {id: D-4, figure: iae_kmh_s, at_most: 50, where: holdable}
  - {id: D-5, figure: energy_rating_pct, at_most: 3, where: all}
  - {id: D-6, figure: steady_hill_error_kmh, at_most: 3, where: all}
matrix:
  set_speeds_kmh: [55, 60]
`;

const run = (text: string): RunResult =>
  runCase({ file: 'case.yaml', read: () => new TextEncoder().encode(text) });
const RESULT = run(CASE);

describe('a case that asks for figures of the distributions', () => {
  it('gets them, with their places, over each kind of where', () => {
    const of = (id: string) =>
      RESULT.requirements.find((one) => one.requirement.id === id && one.candidate === 'firm')!;
    for (const id of ['D-1', 'D-2', 'D-3', 'D-4', 'D-5', 'D-6'])
      expect(typeof of(id).measured, id).toBe('number');
    for (const id of ['D-1', 'D-2', 'D-3', 'D-4', 'D-6']) expect(of(id).worstAt, id).not.toBeNull();
    // The set speed drops at km 1.6: there the error is greatest on the whole road.
    expectClose(of('D-1').worstAt!, 1605, 15);
    // The hill ends at km 1.2; its last 30 % are steady but for the rounding of its crest.
    expectClose(of('D-6').worstAt!, 1125, 30);
  });

  it('has them in every combination of the matrix, the same in its own', () => {
    for (const cell of RESULT.matrix!.cells)
      for (const finding of cell.findings.filter(({ candidate }) => candidate === 'firm'))
        expect(typeof finding.measured, finding.requirement.id).toBe('number');
    const own = RESULT.matrix!.cells.find((cell) => cell.own)!;
    expect(own.findings.map(({ measured }) => measured)).toEqual(
      RESULT.requirements.map(({ measured }) => measured),
    );
  });
});

describe('histograms of a run', () => {
  const rows = histogramsCsv(RESULT.candidates)
    .trim()
    .split('\r\n')
    .map((line) => line.split(','));
  const head = rows[0]!;

  it('have their classes in order, and sum to the time and to 100 %', () => {
    expect(head).toEqual(['candidate', 'quantity', 'from', 'to', 'time_s', 'share_pct']);
    for (const { name, result } of RESULT.candidates)
      for (const [quantity, without] of [
        ['speed_error_kmh', 0],
        ['throttle_pct', 0],
        ['acceleration_m_s2', 0],
        ['jerk_m_s3', 0.4],
      ] as const) {
        const mine = rows.filter((row) => row[0] === name && row[1] === quantity);
        const sum = (column: number) => mine.reduce((total, row) => total + Number(row[column]), 0);
        expectClose(sum(4), result.endTime - without, 0.0006 * mine.length, `${name} ${quantity}`);
        expectClose(sum(5), 100, 6e-5 * mine.length);
        mine.forEach((row, i) => {
          if (i > 0) expect(row[2]).toBe(mine[i - 1]![3]);
        });
      }
  });

  it('are on the same classes for all candidates of a chart, each summing to 1, in either unit', () => {
    for (const units of ['kmh', 'mph'] as const)
      for (const spread of spreadsOf(viewOf(RESULT, units))) {
        expect(spread.to - spread.from).toBeLessThan(41);
        for (const { shares } of spread.rows) {
          expect(shares.length).toBe(spread.to - spread.from + 1);
          expectClose(
            shares.reduce((a, b) => a + b, 0),
            1,
            1e-6,
          );
        }
      }
    const [kmh, mph] = (['kmh', 'mph'] as const).map((units) => spreadsOf(viewOf(RESULT, units))[0]!);
    expect([kmh!.unit, mph!.unit]).toEqual(['km/h', 'mph']);
  });

  it('stand in the report as charts and as tables; without distributions there is no such part', () => {
    const page = spreadSection(viewOf(RESULT, 'kmh'))!.body.toString();
    expect(page.match(/role="img"/g)).toHaveLength(8);
    expect(page.match(/<table/g)).toHaveLength(4);
    expect(page).toContain('of the time at');
    const candidates = RESULT.candidates.map((one) => ({
      ...one,
      result: { ...one.result, bins: { ...one.result.bins, detail: null } },
    }));
    expect(spreadSection(viewOf({ ...RESULT, candidates }, 'kmh'))).toBeNull();
  });

  it('name their classes, and what the outermost gather', () => {
    const spread = { ...spreadsOf(viewOf(RESULT, 'kmh'))[0]!, width: 0.5, from: -2, to: 2 };
    const named = (cut: boolean) =>
      [0, 2, 4].map((k) => classText({ ...spread, cut: { low: cut, high: cut } }, k));
    expect(named(false)).toEqual(['−1.25 to −0.75', '−0.25 to 0.25', '0.75 to 1.25']);
    expect(named(true)).toEqual(['below −0.75', '−0.25 to 0.25', '0.75 and above']);
    expect([0, 0.0002, 0.5, 1].map(timeShareText)).toEqual([
      '–',
      '< 0.1\u00a0%',
      '50.0\u00a0%',
      '100.0\u00a0%',
    ]);
  });
});
