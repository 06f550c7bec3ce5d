// A matrix of 24 combinations against its runs alone: what judging adds to them.

const PIECES = [];
for (let k = 0; k < 64; k++) PIECES.push([0, 1, 4, 0, 0, -1, -4, 0][k % 8]);

const CASE = `track: {profile: [${PIECES.map((grade, k) => `{length_m: 500, grade_pct: ${grade}, heading_deg: ${(37 * k) % 360}}`).join(', ')}], vertical_curve_m: 100}
vehicle: {mass: {kerb_kg: 125, rider_kg: 75}, road_load: {cda_m2: 0.58, cda_yaw_per_rad2: 1, crr: 0.014}, drive: {kind: force, peak_force_n: 320, peak_power_kw: 8.5, closed_throttle_force_n: 40, lag_s: 0.15}, actuator: {lag_s: 0.06, rate_limit_pct_per_s: 400}, speed_sensor: {filter_s: 0.05, delay_s: 0.02}}
hold: {set_speed_kmh: 60}
candidates:
  - {name: locked, kind: locked}
  - {name: soft, kind: pi, kp_pct_per_kmh: 2, ti_s: 12}
  - {name: firm, kind: pi, kp_pct_per_kmh: 4, ti_s: 8}
  - {name: stiff, kind: pi, kp_pct_per_kmh: 8, ti_s: 8}
requirements:
  - {id: B-1, figure: within_band_pct, band_kmh: 2, at_least: 95}
  - {id: B-2, figure: worst_high_kmh, at_most: 4}
RECOVERY
matrix: {loads: [solo, {payload_kg: 40}, two_up], winds: [none, {speed_m_s: 5, from_deg: 80}], directions: [there, back], set_speeds_kmh: [50, 60]}
`;

/** The work of such a matrix, with or without a recovery to be judged. */
export function benchMatrix(library, recovers) {
  const text = CASE.replace('RECOVERY', recovers ? '  - {id: B-3, figure: recovery_s, at_most: 20}' : '');
  const { matrix } = library.runWithoutMatrix({
    file: 'bench.yaml',
    read: () => new TextEncoder().encode(text),
  });
  return matrix;
}

/** Its runs and nothing else. */
export const runsOfMatrix = (library, work) =>
  work.cells.flatMap((_, i) => library.plansOfCell(work, i).map(library.runLoop)).length;

export const cellsOfMatrix = (library, work) => work.cells.map((_, i) => library.runCell(work, i));
