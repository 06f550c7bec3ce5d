import { expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import type { MatrixCell, MatrixResult } from '../../src/run/matrix-result.ts';
import { runCase, runWithoutMatrix } from '../../src/run/run-case.ts';
import { runCell } from '../../src/run/run-cell.ts';
import type { RunResult } from '../../src/run/run-result.ts';
import { expectClose } from '../compare.ts';
import { seeded } from '../report/seeded.ts';

/** Hills that are too much for the drive, and one that is not. */
const HILLY = `track: {profile: [{length_m: 900, grade_pct: 0, heading_deg: 0}, {length_m: 700, grade_pct: 6, heading_deg: 20}, {length_m: 900, grade_pct: -1, heading_deg: 90}, {length_m: 500, grade_pct: 3, heading_deg: 90}, {length_m: 1200, grade_pct: -4, heading_deg: 60}], vertical_curve_m: 60}
`;
const VEHICLE = `vehicle: {mass: {kerb_kg: 125, rider_kg: 75, payload_kg: 10}, road_load: {cda_m2: 0.58, crr: 0.014}, drive: {kind: force, peak_force_n: 240, peak_power_kw: 6, closed_throttle_force_n: 40, lag_s: 0.15}, actuator: {lag_s: 0.06, rate_limit_pct_per_s: 400}}
air: {density_kg_m3: 1.2}
`;
const HOLD = 'hold: {set_speed_kmh: 60}\n';
const CANDIDATES = `candidates:
  - {name: locked, kind: locked}
  - {name: stiff, kind: pi, kp_pct_per_kmh: 6, ti_s: 8}
  - {name: soft, kind: pi, kp_pct_per_kmh: 2, ti_s: 12, anti_windup: {kind: none}}
`;
const REQUIREMENTS = `requirements:
  - {id: M-1, figure: within_band_pct, band_kmh: 2, at_least: 95}
  - {id: M-2, figure: worst_high_kmh, at_most: 3, where: all}
  - {id: M-3, figure: worst_low_kmh, at_least: -3, where: {from_km: 0.7, to_km: 1.7}}
  - {id: M-4, figure: recovery_s, at_most: 15}
  - {id: M-5, figure: rms_error_kmh, at_most: 2, candidates: [locked, stiff]}
`;
const BASE = HILLY + VEHICLE + HOLD + CANDIDATES + REQUIREMENTS;

const request = (text: string, overrides: readonly string[] = []) => ({
  file: 'case.yaml',
  read: () => new TextEncoder().encode(text),
  overrides,
});
const run = (text: string, overrides: readonly string[] = []): RunResult => runCase(request(text, overrides));
const matrixOf = (text: string): MatrixResult => {
  const { matrix } = run(text);
  if (matrix === null) throw new Error('no matrix');
  return matrix;
};
/** Figures of a cell or a run, by requirement and candidate. */
const figures = ({ findings }: Pick<MatrixCell, 'findings'>) =>
  findings.map(({ requirement, candidate, measured, margin, spread, worstAt, verdict }) => ({
    id: requirement.id,
    candidate,
    measured,
    margin,
    spread,
    worstAt,
    verdict,
  }));
const measuredIn = (cell: MatrixCell | undefined, id: string): number => {
  const measured = cell?.findings.find(({ requirement }) => requirement.id === id)?.measured;
  if (typeof measured !== 'number') throw new Error(`no figure ${id}`);
  return measured;
};
function refusal(text: string): InputError {
  try {
    run(text);
  } catch (error) {
    if (error instanceof InputError) return error;
    throw error;
  }
  throw new Error('it was not refused');
}

test('a combination that is the case itself has its figures, places and verdicts bit for bit', () => {
  const whole = run(
    `${BASE}wind: {speed_m_s: 4, from_deg: 30}\nmatrix: {loads: [own], winds: [own], directions: [there], set_speeds_kmh: [60]}\n`,
  );
  const [cell, ...others] = whole.matrix?.cells ?? [];
  expect(others).toEqual([]);
  expect(cell?.own).toBe(true);
  expect(figures(cell!)).toEqual(figures({ findings: whole.requirements }));
  expect(cell?.findings.find(({ requirement }) => requirement.id === 'M-4')?.measured).toBeGreaterThan(0);
});

test('each combination has the figures of a case of its own with those values, for random cases', () => {
  const random = seeded(20_261_201);
  for (let k = 0; k < 4; k++) {
    const rider = Math.round(50 + 60 * random());
    const payload = Math.round(30 * random());
    const speed = Math.round(40 + 30 * random());
    const wind = Math.round(8 * random());
    const from = Math.round(360 * random());
    const { matrix } = run(
      `${BASE}matrix: {loads: [solo, {rider_kg: ${rider}, payload_kg: ${payload}, pillion_kg: 20}], winds: [{speed_m_s: ${wind}, from_deg: ${from}}], set_speeds_kmh: [${speed}]}\n`,
    );
    const own = run(BASE, [
      `vehicle.mass.rider_kg=${rider}`,
      `vehicle.mass.payload_kg=${payload + 20}`,
      `hold.set_speed_kmh=${speed}`,
      `wind={speed_m_s: ${wind}, from_deg: ${from}}`,
    ]);
    expect(figures(matrix!.cells[1]!)).toEqual(figures({ findings: own.requirements }));
  }
});

test('combinations stand in the order of the lists, the last one changing fastest', () => {
  const { lists, cells } = matrixOf(
    `${BASE}matrix: {set_speeds_kmh: [50, 60], loads: [solo, two_up], directions: [back, there]}\n`,
  );
  expect(lists).toEqual(['loads', 'directions', 'set_speeds_kmh']);
  expect(
    cells.map(({ number, combination: { load, direction, setSpeedKmh } }) => [
      number,
      load.label,
      direction,
      setSpeedKmh,
    ]),
  ).toEqual([
    [1, 'solo', 'back', 50],
    [2, 'solo', 'back', 60],
    [3, 'solo', 'there', 50],
    [4, 'solo', 'there', 60],
    [5, 'two up', 'back', 50],
    [6, 'two up', 'back', 60],
    [7, 'two up', 'there', 50],
    [8, 'two up', 'there', 60],
  ]);
});

test('outcomes do not depend on order, on company, or on having been posted to another thread', () => {
  const { matrix } = runWithoutMatrix(
    request(`${BASE}matrix: {loads: [solo, two_up], directions: [there, back]}\n`),
  );
  const inOrder = matrix!.cells.map((_, i) => runCell(matrix!, i));
  const posted = structuredClone(matrix!);
  const backwards = posted.cells.map((_, i) => runCell(posted, posted.cells.length - 1 - i)).reverse();
  expect(backwards).toEqual(inOrder);
  expect(structuredClone(inOrder)).toEqual(inOrder);
});

test('on a road that is its own mirror image, turning the road round is turning the wind round', () => {
  const mirror = `track: {profile: [{length_m: 800, grade_pct: 0, heading_deg: 0}, {length_m: 400, grade_pct: 5, heading_deg: 0}, {length_m: 300, grade_pct: 0, heading_deg: 0}, {length_m: 400, grade_pct: -5, heading_deg: 0}, {length_m: 800, grade_pct: 0, heading_deg: 0}]}\n`;
  const { cells } = matrixOf(
    `${mirror}${VEHICLE}${HOLD}${CANDIDATES}requirements: [{id: A, figure: worst_low_kmh, at_least: -3, where: all}, {id: B, figure: rms_error_kmh, at_most: 1, where: all}]
matrix: {winds: [{speed_m_s: 6, from_deg: 0}, {speed_m_s: 6, from_deg: 180}], directions: [there, back]}\n`,
  );
  const [headThere, tailBack, tailThere, headBack] = cells;
  for (const id of ['A', 'B']) {
    expectClose(measuredIn(headBack, id), measuredIn(headThere, id), 1e-9, `${id} against the wind`);
    expectClose(measuredIn(tailBack, id), measuredIn(tailThere, id), 1e-9, `${id} with the wind`);
    expect(Math.abs(measuredIn(headThere, id) - measuredIn(tailThere, id))).toBeGreaterThan(1e-3);
  }
});

test('driven back, stretches, changes of set speed and shifts of the plan stay at their places on the ground', () => {
  const pieces = [
    '{length_m: 1000, grade_pct: 0}',
    '{length_m: 600, grade_pct: 3}',
    '{length_m: 900, grade_pct: 1}',
  ];
  const turned = [
    '{length_m: 900, grade_pct: -1}',
    '{length_m: 600, grade_pct: -3}',
    '{length_m: 1000, grade_pct: 0}',
  ];
  const asked = (from: number, to: number) =>
    `requirements: [{id: A, figure: rms_error_kmh, at_most: 1, where: {from_km: ${from}, to_km: ${to}}}, {id: B, figure: within_band_pct, band_kmh: 1, at_least: 90, where: all}]\n`;
  const rest = VEHICLE + CANDIDATES;
  const { cells } = matrixOf(
    `track: {profile: [${pieces.join(', ')}]}\n${rest}hold: {set_speed_kmh: 60, changes: [{at_km: 0.5, set_speed_kmh: 50, ramp_m_s2: 0.5}, {at_km: 2, set_speed_kmh: 55}]}\n${asked(0.9, 1.7)}matrix: {directions: [there, back]}\n`,
  );
  const byHand = run(
    `track: {profile: [${turned.join(', ')}]}\n${rest}hold: {set_speed_kmh: 55, changes: [{at_km: 0.5, set_speed_kmh: 50}, {at_km: 2, set_speed_kmh: 60, ramp_m_s2: 0.5}]}\n${asked(0.8, 1.6)}`,
  );
  byHand.requirements.forEach(({ measured }, i) => {
    expectClose(cells[1]!.findings[i]!.measured as number, measured as number, 1e-9, `finding ${i}`);
  });
});

test('a load takes throttle as weight along the slope and rolling resistance say', () => {
  const gravity = 9.80665; // standard acceleration of free fall, 3rd CGPM (1901)
  const [grade, speed, crr, area, density] = [0.03, 60 / 3.6, 0.014, 0.58, 1.2];
  const { cells } = matrixOf(
    `track: {profile: [{length_m: 4000, grade_pct: 3}]}\n${VEHICLE}hold: {set_speed_kmh: 60}\ncandidates: [{name: pi, kind: pi, kp_pct_per_kmh: 6, ti_s: 4}]
requirements: [{id: U, figure: throttle_mean_pct, at_most: 100, where: {from_km: 3, to_km: 4}}]
matrix: {loads: [own, solo, {rider_kg: 50}, two_up]}\n`,
  );
  const masses = [125 + 75 + 10, 125 + 75, 125 + 50 + 10, 125 + 75 + 10 + 75];
  const cosine = 1 / Math.sqrt(1 + grade * grade);
  cells.forEach((cell, i) => {
    const force = masses[i]! * gravity * cosine * (grade + crr) + 0.5 * density * area * speed * speed;
    // Throttle 0 holds back with 40 N, throttle 1 pushes with 240 N: 6 kW are 360 N at this speed.
    const throttle = (100 * (force + 40)) / (240 + 40);
    expectClose(measuredIn(cell, 'U'), throttle, 2e-3, `throttle of load ${i} [%]`);
  });
});

test('road load of a regulation without a test mass stays that of the mass of the case', () => {
  const road = 'track: {profile: [{length_m: 3000, grade_pct: 0}]}\n';
  const vehicle =
    'vehicle: {mass: {kerb_kg: 125, rider_kg: 75}, road_load: {f0_n: 30, f2_n_per_kmh2: 0.02, air_density_kg_m3: 1.2}, drive: {kind: force, peak_force_n: 300}}\nair: {density_kg_m3: 1.2}\n';
  const { cells } = matrixOf(
    `${road}${vehicle}hold: {set_speed_kmh: 60}\ncandidates: [{name: pi, kind: pi, kp_pct_per_kmh: 6, ti_s: 4}]
requirements: [{id: U, figure: throttle_mean_pct, at_most: 100, where: {from_km: 2, to_km: 3}}]
matrix: {loads: [own, {pillion_kg: 100}]}\n`,
  );
  // The constant part scales with the mass: 30 N at 200 kg, 45 N at 300 kg; 0.02 x 60^2 = 72 N of air in both.
  expectClose(measuredIn(cells[0], 'U'), (100 * (30 + 72)) / 300, 2e-3, 'own load [%]');
  expectClose(measuredIn(cells[1], 'U'), (100 * (45 + 72)) / 300, 2e-3, 'with a pillion [%]');
});

const ENGINE = `vehicle:
  mass: {kerb_kg: 125, rider_kg: 75}
  road_load: {cda_m2: 0.58, crr: 0.014}
  drive:
    kind: engine
    torque: {full_load: [{rpm: 2000, nm: 7}, {rpm: 6500, nm: 11}, {rpm: 9000, nm: 9}]}
    closed_throttle_drag: [{rpm: 2000, nm: 1.5}, {rpm: 9000, nm: 3}]
    gear_ratios: [2.8, 1.8, 1.3, 1.05, 0.9, 0.8]
    gearbox: {kind: clutch}
    gear: 5
    primary_ratio: 3.3
    final_ratio: 3.1
    wheel_radius_m: 0.3
    rev_limit_rpm: 10000
`;

test('a gear that cannot turn at a set speed is not judged, says why, and the rest is', () => {
  const whole = run(
    `${HILLY}${ENGINE}${HOLD}${CANDIDATES}${REQUIREMENTS}matrix: {gears: [1, 4], set_speeds_kmh: [30, 60]}\n`,
  );
  const cells = whole.matrix!.cells;
  expect(
    cells.map(({ combination, reason }) => [combination.gear, combination.setSpeedKmh, reason === null]),
  ).toEqual([
    [1, 30, true],
    [1, 60, false],
    [4, 30, true],
    [4, 60, true],
  ]);
  expect(cells[1]!.reason).toContain('beyond its limit');
  expect(cells[1]!.findings.map(({ verdict }) => verdict)).toEqual(
    whole.requirements.map(() => 'not judged'),
  );
  expect(cells[1]!.findings.map(({ candidate }) => candidate)).toEqual(
    whole.requirements.map(({ candidate }) => candidate),
  );
  expect(cells[1]!.runs).toEqual([]);
  expect(whole.status).toBe('requirement_not_met');
});

test('a requirement that only a combination misses makes the run one that misses a requirement', () => {
  const level = 'track: {profile: [{length_m: 1500, grade_pct: 0}, {length_m: 800, grade_pct: 4}]}\n';
  const text = `${level}${VEHICLE}${HOLD}${CANDIDATES}requirements: [{id: A, figure: worst_low_kmh, at_least: -3, where: all, candidates: [stiff]}]\n`;
  expect(run(text).status).toBe('ok');
  const whole = run(`${text}matrix: {loads: [own, {payload_kg: 90}]}\n`);
  expect(whole.requirements.map(({ verdict }) => verdict)).toEqual(['met']);
  expect(whole.matrix!.cells.map(({ findings }) => findings[0]!.verdict)).toEqual(['met', 'not met']);
  expect(whole.status).toBe('requirement_not_met');
});

test('every candidate is replayed in every combination, the locked one too', () => {
  const { cells } = matrixOf(`${BASE}matrix: {set_speeds_kmh: [50, 60]}\n`);
  for (const { runs } of cells) {
    expect(runs.map(({ candidate }) => candidate)).toEqual(['locked', 'stiff', 'soft']);
    for (const { figures: kept } of runs)
      expect(Object.keys(kept)).toEqual([
        'within_band_pct',
        'rms_error_kmh',
        'worst_low_kmh',
        'worst_high_kmh',
      ]);
  }
});

test('a picture shows the run around the place where the figure was worst', () => {
  const { cells } = matrixOf(`${BASE}matrix: {set_speeds_kmh: [60]}\n`);
  cells[0]!.findings.forEach(({ worstAt }, i) => {
    const picture = cells[0]!.pictures[i]!;
    if (worstAt !== null) expect(picture.at).toBe(worstAt);
    expect(Math.min(...picture.distance)).toBeLessThan(picture.at + 10);
    expect(Math.max(...picture.distance)).toBeGreaterThan(picture.at - 10);
    expect(Math.abs(picture.distance[0]! - picture.at)).toBeLessThan(611);
    picture.mean.forEach((mean, k) => {
      expect(picture.low[k]! <= mean + 1e-9 && mean <= picture.high[k]! + 1e-9).toBe(true);
    });
  });
});

test('a wind without a heading of the road is refused at its place in the list', () => {
  const text = `track: {profile: [{length_m: 900, grade_pct: 0}]}\n${VEHICLE}${HOLD}${CANDIDATES}requirements: [{id: A, figure: rms_error_kmh, at_most: 1}]\nmatrix: {winds: [none, {speed_m_s: 5, from_deg: 10}]}\n`;
  const [problem] = refusal(text).problems;
  expect(problem).toMatchObject({ code: 'wind-needs-heading', place: { key: 'matrix.winds.1' } });
});

test('winds over a track that says itself what wind it meets are refused', () => {
  const text = `track: {profile: [{length_m: 900, grade_pct: 0, headwind_m_s: 3}]}\n${VEHICLE}${HOLD}${CANDIDATES}requirements: [{id: A, figure: rms_error_kmh, at_most: 1}]\nmatrix: {winds: [none, {speed_m_s: 5, from_deg: 10}]}\n`;
  const [problem] = refusal(text).problems;
  expect(problem).toMatchObject({ code: 'wind-without-effect', place: { key: 'matrix.winds', line: 10 } });
});

test('a matrix that would run for hours is refused before it starts', () => {
  const text = `track: {profile: [{length_m: 900000, grade_pct: 0}]}\n${VEHICLE}${HOLD}${CANDIDATES}requirements: [{id: A, figure: rms_error_kmh, at_most: 1}]\nmatrix: {set_speeds_kmh: [${Array.from({ length: 40 }, (_, i) => 40 + i).join(', ')}], loads: [own, solo, two_up]}\n`;
  const [problem] = refusal(text).problems;
  expect(problem).toMatchObject({ code: 'run-too-long', place: { key: 'matrix' } });
  expect(problem?.message).toContain('120 combinations');
});
