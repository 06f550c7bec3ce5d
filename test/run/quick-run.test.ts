import { expect, it } from 'vitest';
import { editCase } from '../../src/case/edit-case.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { QuickRuns } from '../../src/run/quick-run.ts';
import { runCase } from '../../src/run/run-case.ts';
import type { RunResult } from '../../src/run/run-result.ts';

const CASE = `# a comment that stays
track: {file: track.csv}
road: {elevation_source: barometric}
wind: {speed_m_s: 4, from_deg: 200}
vehicle: vehicle.yaml
hold: {set_speed_kmh: 60, changes: [{at_km: 1.8, set_speed_kmh: 50, ramp_m_s2: 0.6}]}
candidates:
  - {name: locked, kind: locked, throttle: level}
  - {name: typed, kind: pi, kp_pct_per_kmh: 3, ti_s: 8}
  - {name: settling, kind: pi, design: {settling_s: 30, overshoot_pct: 2}}
requirements:
  - {id: T-1, figure: within_band_pct, band_kmh: 2, at_least: 95}
  - {id: T-2, figure: recovery_s, at_most: 20}
`;
const VEHICLE = `mass: {kerb_kg: 125, rider_kg: 75, payload_kg: 15}
road_load: {cda_m2: 0.58, cda_yaw_per_rad2: 1, crr: 0.014}
drive: {kind: force, peak_force_n: 320, peak_power_kw: 8.5, closed_throttle_force_n: 40, lag_s: 0.15}
`;
const TRACK = `lat_deg,lon_deg,elevation_m\n${Array.from({ length: 121 }, (_, i) => {
  const x = i * 20;
  return `${(50 + x / 111200).toFixed(7)},-5,${(100 + 50 / (1 + ((x - 1100) / 400) * ((x - 1100) / 400)) + ((i * 7919) % 13) / 20).toFixed(2)}`;
}).join('\n')}\n`;

const bytes = (text: string) => new TextEncoder().encode(text);
const TRACK_BYTES = bytes(TRACK);

/** Reads the files of a study; the bytes of one text are one array, as a page keeps them. */
const reader = (caseText: string, vehicle = bytes(VEHICLE), track = TRACK_BYTES) => {
  const files = new Map([
    ['case.yaml', bytes(caseText)],
    ['vehicle.yaml', vehicle],
    ['track.csv', track],
  ]);
  return (name: string) => files.get(name) ?? bytes('');
};

function quick(runs: QuickRuns, caseText: string, vehicle?: Uint8Array<ArrayBuffer>): RunResult {
  const steps = runs.run({ file: 'case.yaml', read: reader(caseText, vehicle) });
  for (;;) {
    const { done, value } = steps.next();
    if (done) return value;
  }
}

/** Runs, figures but those of hills, and demand. */
const parts = (run: RunResult) => ({
  demand: run.demand,
  candidates: run.candidates.map(({ figures, full: _, ...rest }) => ({
    ...rest,
    figures: { ...figures, recovery_s: null, itae_kmh_s2: null, steady_hill_error_kmh: null },
  })),
});

it('runs and figures are those of the whole run, bit for bit, after any order of changes', () => {
  const runs = new QuickRuns();
  const gain = editCase(CASE, ['candidates', 1, 'ti_s'], 5);
  const wind = editCase(gain, ['wind', 'speed_m_s'], 7);
  const slower = editCase(wind, ['hold', 'set_speed_kmh'], 55);
  const loaded = bytes(VEHICLE.replace('payload_kg: 15', 'payload_kg: 60'));
  for (const text of [CASE, gain, wind, CASE]) quick(runs, text);
  for (const [text, vehicle] of [
    [gain, undefined],
    [slower, undefined],
    [slower, loaded],
  ] as const) {
    const whole = runCase({ file: 'case.yaml', read: reader(text, vehicle) });
    expect(parts(quick(runs, text, vehicle))).toEqual(parts(whole));
  }
});

it('a run that a change does not touch is not run again', () => {
  const runs = new QuickRuns();
  const vehicle = bytes(VEHICLE);
  const before = quick(runs, CASE, vehicle);
  const after = quick(runs, editCase(CASE, ['candidates', 1, 'ti_s'], 5), vehicle);
  expect(after.road).toBe(before.road);
  expect(after.demand).toBe(before.demand);
  expect(after.candidates.map(({ result }, i) => result === before.candidates[i]!.result)).toEqual([
    true,
    false,
    true,
  ]);
});

it('what needs hills is left to the whole run, and says so', () => {
  const run = quick(new QuickRuns(), CASE);
  expect(run.requirements.map(({ requirement }) => requirement.id)).toEqual(['T-1', 'T-1']);
  expect(run.candidates[1]!.figures.recovery_s).toEqual({ none: expect.stringContaining('whole run') });
});

it('it can be left before every candidate', () => {
  const steps = new QuickRuns().run({ file: 'case.yaml', read: reader(CASE) });
  let count = 0;
  while (!steps.next().done) count++;
  expect(count).toBe(4);
});

it('a fault is refused with its place, and the next run is none the worse', () => {
  const runs = new QuickRuns();
  const faulty = editCase(CASE, ['candidates', 2, 'design', 'settling_s'], 0.001);
  expect(() => quick(runs, faulty)).toThrow(InputError);
  expect(() => quick(runs, faulty)).toThrow(/case\.yaml:10:.*settling_s/);
  expect(quick(runs, CASE).candidates).toHaveLength(3);
});
