// The gains of a case: operating points, and replays of the tuning on the road.
import { cpu } from './cpu.mjs';

const PIECES = [];
for (let k = 0; k < 40; k++) PIECES.push([0, 1, 4, 0, 0, -1, -4, 0][k % 8]);

const CASE = `track: {profile: [${PIECES.map((grade) => `{length_m: 500, grade_pct: ${grade}}`).join(', ')}], vertical_curve_m: 100}
vehicle: {mass: {kerb_kg: 125, rider_kg: 75}, road_load: {cda_m2: 0.58, crr: 0.014}, drive: {kind: force, peak_force_n: 320, peak_power_kw: 8.5, closed_throttle_force_n: 40, lag_s: 0.15}, actuator: {lag_s: 0.06, rate_limit_pct_per_s: 400}, speed_sensor: {filter_s: 0.05, delay_s: 0.02}}
hold: {set_speed_kmh: 60}
candidates: [{name: soft, kind: pi, kp_pct_per_kmh: 2, ti_s: 12}]
tune: {designs: [DESIGN], speeds_kmh: [40, 50, 60, 70], grades_pct: [-2, 0, 2], loads: [own, two_up]}
`;

/** CPU seconds of a tuning by one design, and what it found. */
function tuned(library, design) {
  const text = new TextEncoder().encode(CASE.replace('DESIGN', design));
  return cpu(() => library.tuneCase({ file: 'bench.yaml', read: () => text }));
}

/** Milliseconds of CPU an operating point (margins of one candidate and one proposal, and the proposal), and of a tuning on 20 km of road. */
export function benchTune(library) {
  tuned(library, 'rejection');
  const points = tuned(library, 'rejection');
  const road = tuned(library, 'road');
  return {
    points: points.result.sheet.points.length,
    pointMs: (1000 * points.seconds) / points.result.sheet.points.length,
    replays: road.result.trials.length,
    roadSeconds: road.seconds,
    replayMs: (1000 * (road.seconds - points.seconds)) / road.result.trials.length,
  };
}
