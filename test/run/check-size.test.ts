import { expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { runCase } from '../../src/run/run-case.ts';

/** A thousand kilometres on the level: 60,000 s at 60 km/h. */
const CASE = `track: {profile: [{length_m: 1000000, grade_pct: 0}]}
road: {grid_m: 100}
vehicle:
  mass: {kerb_kg: 125, rider_kg: 75}
  road_load: {cda_m2: 0.58, crr: 0.014}
  drive: {kind: force, peak_force_n: 320}
hold: {set_speed_kmh: 60}
candidates:
  - {name: a, kind: pi, kp_pct_per_kmh: 4, ti_s: 8, sample_s: 0.1}
  - {name: b, kind: pi, kp_pct_per_kmh: 4, ti_s: 8, sample_s: 0.2}
`;

function refusal(...overrides: readonly string[]): InputError {
  try {
    runCase({ file: 'case.yaml', read: () => new TextEncoder().encode(CASE), overrides });
  } catch (error) {
    expect(error).toBeInstanceOf(InputError);
    return error as InputError;
  }
  return expect.unreachable();
}

test('runs of more than 500 million samples are refused at the shortest sample time', () => {
  // 60 times as long at 1 km/h: 3.6e6 s, 7.2e9 samples of 0.5 ms and 1.8e7 of 0.2 s.
  const { message, code } = refusal('hold.set_speed_kmh=1', 'candidates.a.sample_s=0.0005');
  expect(code).toBe('run-too-long');
  expect(message).toBe(
    '--set candidates.a.sample_s=0.0005: candidates.a.sample_s: the runs over 1000.0 km would take too many samples (found about 7.2e+9 samples of all candidates; allowed: at most 500000000: a shorter road, fewer candidates, or a longer sample time)',
  );
  const slow = 'hold.changes=[{at_km: 999, set_speed_kmh: 1}]';
  expect(refusal(slow, 'candidates.b.sample_s=0.0005').problems[0]?.place.key).toBe('candidates.b.sample_s');
});

test('a series of every sample of more than two million rows is refused', () => {
  // 600,000 and 300,000 samples at 60 km/h, three times as many at 20 km/h.
  expect(refusal('output.series=full', 'hold.set_speed_kmh=20').message).toBe(
    '--set output.series=full: output.series: the tables would have too many rows (found about 2700000 rows of all candidates; allowed: at most 2000000: a shorter road, fewer candidates, or series: bins, or a longer sample time)',
  );
});

test('a run that crawls for longer than its set speed says is refused when that is known', () => {
  // 100 km at 60 km/h and 4 ms are 1,500,000 samples. But 70 N = 200 kg 9.80665 m/s2 0.014 + 1.225 kg/m3 0.58 m2 v^2 / 2
  // at 39.4 km/h: 2,284,000 samples.
  const { code } = refusal(
    'track.profile=[{length_m: 100000, grade_pct: 0}]',
    'output.series=full',
    'candidates.a.sample_s=0.004',
    'vehicle.drive.peak_force_n=70',
  );
  expect(code).toBe('series-too-long');
});

test('bins and segments of more than two million rows are refused', () => {
  const profile = 'track.profile=[{length_m: 1000000, grade_pct: 0}, {length_m: 1000000, grade_pct: 0}]';
  expect(refusal(profile, 'output.bin_m=1').message).toMatch(
    /^--set output\.bin_m=1: output\.bin_m: .*about 4000000 rows.*wider bins\)$/,
  );
  const long = `track.profile=[${Array.from({ length: 11 }, () => '{length_m: 1000000, grade_pct: 0}').join(', ')}]`;
  const { code, problems } = refusal(long, 'output.bin_m=100', 'segments={by: length, length_m: 10}');
  expect([code, problems[0]?.place.key]).toEqual(['too-many-segments', 'segments.length_m']);
});
