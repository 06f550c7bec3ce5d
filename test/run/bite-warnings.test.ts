import { expect, it } from 'vitest';
import { runCase } from '../../src/run/run-case.ts';

/** A hill of 4 % under three controllers with a slip each, and one without. */
const CASE = `track: {profile: [{length_m: 800, grade_pct: 0}, {length_m: 800, grade_pct: 4}, {length_m: 400, grade_pct: 0}]}
vehicle:
  mass: {kerb_kg: 130, rider_kg: 75}
  road_load: {cda_m2: 0.55, crr: 0.014}
  drive: {kind: force, peak_force_n: 340}
hold: {set_speed_kmh: 60}
candidates:
  - {name: sound, kind: pi, kp_pct_per_kmh: 4, ti_s: 8}
  - {name: capped, kind: pi, kp_pct_per_kmh: 4, ti_s: 8, anti_windup: {kind: integral_cap, cap_pct: 100, against: summed_error}}
  - {name: whole, kind: integer, kp_pct_per_kmh: 4, ti_s: 60, speed_counts_per_kmh: 10, full_throttle_counts: 1000, gain_divisor: 256}
  - {name: creeping, kind: pi, kp_pct_per_kmh: 4, ti_s: 8, dead_band: {half_width_kmh: 0.5, inside: runs_on}}
`;

it('warns of each slip of a controller that had a say, and of none that had not', () => {
  const run = runCase({ file: 'slips.yaml', read: () => new TextEncoder().encode(CASE) });
  const slips = run.candidates.map(({ result }) => result.bites.map(({ bite }) => bite));
  expect(slips).toEqual([[], ['integral_cap'], ['increment_lost'], ['dead_band']]);
  const warning = (code: string) => run.warnings.find((told) => told.code === code);
  // ki 0.5 % per km/h s times a figure of 100 caps at 50 % of throttle: the hill asks for 60 %.
  expect(warning('integral-cap-unit')?.message).toContain('capped: in ');
  expect(warning('integral-cap-unit')!.from).toBeGreaterThanOrEqual(700);
  // Ki is 4 / 60 % per km/h s: 0.0013 counts of throttle for each count of error, whose count rounds to 0.
  expect(warning('integral-increment-lost')?.message).toContain('Ki e rounds to nothing');
  expect(warning('dead-band-integrates')?.message).toContain('creeping: in ');
  expect(run.warnings.filter(({ message }) => message.startsWith('sound:'))).toEqual([]);
});
