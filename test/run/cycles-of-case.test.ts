import { expect, it } from 'vitest';
import { runCase } from '../../src/run/run-case.ts';
import { expectClose } from '../compare.ts';

// A rise of 20 m sets the loop swinging; its integral then fights the slack.
const CASE = `track: {profile: [{length_m: 300, grade_pct: 0}, {length_m: 20, grade_pct: 3}, {length_m: 2500, grade_pct: 0}]}
vehicle:
  name: Test
  mass: {kerb_kg: 140, rider_kg: 75}
  road_load: {cda_m2: 0.58, crr: 0.014}
  drive: {kind: force, peak_force_n: 260, closed_throttle_force_n: 40, lag_s: 0.1}
  actuator: {lag_s: 0.06, slack_pct: 10}
air: {density_kg_m3: 1.2}
hold: {set_speed_kmh: 60}
candidates:
  - {name: locked, kind: locked}
  - {name: swings, kind: pi, kp_pct_per_kmh: 5.56, ti_s: 1}
  - {name: calm, kind: pi, kp_pct_per_kmh: 5.56, ti_s: 60}
`;

it('a run tells the limit cycles of its candidates, and that it looks for them', () => {
  const told = new Map<string, number>();
  const { cycles } = runCase({
    file: 'case.yaml',
    read: () => new TextEncoder().encode(CASE),
    onProgress: (share, words) => told.set(words, share),
  });
  expect(cycles.map(({ candidate, cause }) => [candidate, cause])).toEqual([['swings', 'slack']]);
  // By the describing function of play: 13.6 s and 0.98 km/h (test/study/limit-cycles.test.ts).
  expectClose(cycles[0]!.period, 13.6, 0.8);
  expectClose(cycles[0]!.speedAmplitude * 3.6, 0.98, 0.1);
  expect(told.get('limit cycles')).toBeGreaterThan(told.get('swings')!);
  expect(told.get('limit cycles')).toBeLessThan(told.get('series')!);
});
