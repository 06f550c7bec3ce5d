import { expect, test } from 'vitest';
import { summaryJson } from '../../src/report/data/summary.ts';
import { renderReport } from '../../src/report/render-report.ts';
import { runCase } from '../../src/run/run-case.ts';
import type { RunResult } from '../../src/run/run-result.ts';

const runWith = (candidate: string, hold = 'set_speed_kmh: 60', payload = 0): RunResult =>
  runCase({
    file: 'case.yaml',
    read: () =>
      new TextEncoder().encode(`track: {profile: [{length_m: 600, grade_pct: 0}]}
vehicle:
  mass: {kerb_kg: 125, rider_kg: 75, payload_kg: ${payload}}
  road_load: {cda_m2: 0.58, crr: 0.014}
  drive: {kind: force, peak_force_n: 320, closed_throttle_force_n: 40, lag_s: 0.15}
  actuator: {lag_s: 0.06, rate_limit_pct_per_s: 400}
hold: {${hold}}
candidates: [{name: locked, kind: locked}, {name: mine, kind: pi, ${candidate}}]
`),
  });
const told = (run: RunResult): string[] =>
  run.warnings.map(({ code }) => code).filter((code) => code.startsWith('loop-'));
const written = (run: RunResult): Record<string, unknown>[] =>
  (JSON.parse(summaryJson(run, [])) as { candidates: Record<string, unknown>[] }).candidates;

test('gains that cannot work are told as such, in the warnings, the summary and the report', () => {
  const run = runWith('kp_pct_per_kmh: 400, ti_s: 0.1');
  expect(told(run)).toEqual(['loop-unstable']);
  expect(run.candidates[1]!.loop).toMatchObject({ stable: false, gainMargin: null, phaseMargin: null });
  expect(written(run)[1]).toMatchObject({
    gain_margin: null,
    gain_margin_reason: 'the linear loop is unstable',
    phase_margin_deg: null,
  });
  expect(renderReport(run, { units: 'kmh' })).toMatch(/Gain margin[\s\S]{0,400}unstable/);
});

test('margins below common practice are told with both figures', () => {
  const run = runWith('kp_pct_per_kmh: 40, ti_s: 0.5');
  expect(told(run)).toEqual(['loop-margins-thin']);
  const { message } = run.warnings.find(({ code }) => code === 'loop-margins-thin')!;
  expect(message).toMatch(
    /gain margin \d+\.\d\d, phase margin -?\d+ deg.*at least 2 and 30 deg.*from memory/,
  );
});

test('usual gains raise no word, a load widens their margins, a throttle that is locked has none', () => {
  const [alone, laden] = [0, 100].map((payload) =>
    runWith('kp_pct_per_kmh: 4, ti_s: 8', 'set_speed_kmh: 60', payload),
  );
  expect([told(alone!), told(laden!)]).toEqual([[], []]);
  const margin = (run: RunResult): number => run.candidates[1]!.loop!.gainMargin!;
  // The gain margin lies high up, where the vehicle is 1 / (m s): it goes with the mass, 1.03 * 125 + 75 of it without the load.
  expect(margin(laden!) / margin(alone!)).toBeGreaterThan(1.4);
  expect(margin(laden!) / margin(alone!)).toBeLessThan(1.6);
  expect(alone!.candidates[0]!.loop).toBeNull();
  const [locked, mine] = written(alone!);
  expect(locked).toMatchObject({ gain_margin: null, phase_margin_deg: null });
  expect(mine!.gain_margin).toBeCloseTo(margin(alone!), 3);
  expect(mine!.phase_margin_deg).toBeCloseTo((alone!.candidates[1]!.loop!.phaseMargin! * 180) / Math.PI, 2);
});

test('every set speed counts, in true speed', () => {
  const changes = 'set_speed_kmh: 60, changes: [{at_km: 0.3, set_speed_kmh: 30}]';
  const [high, low, both] = ['set_speed_kmh: 60', 'set_speed_kmh: 30', changes].map(
    (hold) => runWith('kp_pct_per_kmh: 4, ti_s: 8', hold).candidates[1]!.loop!,
  );
  const worst = high!.gainMargin! < low!.gainMargin! ? high : low;
  expect(both).toEqual(worst);
});

test('every gear that was driven counts, and the words say which', () => {
  const run = runCase({
    file: 'case.yaml',
    read: () =>
      new TextEncoder().encode(`track: {profile: [{length_m: 900, grade_pct: 0}]}
vehicle:
  mass: {kerb_kg: 125, rider_kg: 75}
  road_load: {cda_m2: 0.58, crr: 0.014}
  drive:
    kind: engine
    torque: {peak_nm: 12, peak_rpm: 6500, falloff: 0.4}
    closed_throttle_drag: [{rpm: 500, nm: 1}, {rpm: 9000, nm: 3}]
    idle_rpm: 1300
    stall_rpm: 700
    rev_limit_rpm: 10500
    engine_inertia_kg_m2: 0.005
    gear_ratios: [2.8, 1.7, 1.3, 1]
    primary_ratio: 3
    final_ratio: 2.5
    wheel_radius_m: 0.3
    gearbox: {kind: clutch, open_s: 0.3, resume_s: 0.5}
    lag_s: 0.15
  actuator: {lag_s: 0.1}
hold: {set_speed_kmh: 45, gear: 4, shifts: [{at_km: 0.4, gear: 2}]}
candidates: [{name: mine, kind: pi, kp_pct_per_kmh: 60, ti_s: 1}]
`),
  });
  const { loop } = run.candidates[0]!;
  // The lower gear has 1.7 times the force at the wheel for the same throttle.
  expect(loop!.gear).toBe(1);
  expect(run.warnings.find(({ code }) => code.startsWith('loop-'))!.message).toContain(
    'at 45.0 km/h in gear 2 on the level',
  );
});
