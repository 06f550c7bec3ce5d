import { expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { runCase } from '../../src/run/run-case.ts';

/** A road of 3.3 km; what is asked of it comes last. */
const CASE = (hold: string, requirements = ''): string => `track: {profile: [{length_m: 3300, grade_pct: 1}]}
vehicle:
  mass: {kerb_kg: 125, rider_kg: 75}
  road_load: {cda_m2: 0.58, crr: 0.014}
  drive: {kind: force, peak_force_n: 320, closed_throttle_force_n: 40}
hold: {set_speed_kmh: 60${hold}}
candidates:
  - {name: locked, kind: locked}
  - {name: typed, kind: pi, kp_pct_per_kmh: 4, ti_s: 8}
${requirements}`;
const run = (text: string, overrides: readonly string[] = []) =>
  runCase({ file: 'case.yaml', read: () => new TextEncoder().encode(text), overrides });
const requirement = (where: string): string =>
  `requirements:\n  - {id: R-1, figure: worst_low_kmh, at_least: -90, where: ${where}}\n`;

function refusal(text: string, overrides: readonly string[] = []): InputError {
  try {
    run(text, overrides);
  } catch (error) {
    expect(error).toBeInstanceOf(InputError);
    return error as InputError;
  }
  return expect.unreachable();
}

test('a requirement that begins beyond the end of the road is refused at its key', () => {
  const asked = requirement('{from_km: 10, to_km: 12}');
  const column = asked.split('\n')[1]!.indexOf('10, to') + 1;
  const { code, message } = refusal(CASE('', asked));
  expect(code).toBe('beyond-the-road');
  expect(message).toBe(
    `case.yaml:11:${column}: requirements.R-1.where.from_km: the stretch would begin beyond the end of the road (found 10 km; allowed: less than 3.3 km, the length of the road)`,
  );
  expect(refusal(CASE('', requirement('{from_km: 3.3, to_km: 12}'))).code).toBe('beyond-the-road');
});

test('a change of the set speed beyond the end of the road is refused, beside all else that is', () => {
  const text = CASE(', changes: [{at_km: 1, set_speed_kmh: 50}, {at_km: 50, set_speed_kmh: 60}]');
  const { problems } = refusal(text + requirement('{from_km: 4, to_km: 5}'));
  expect(problems.map(({ place }) => [place.line, place.key])).toEqual([
    [6, 'hold.changes.1.at_km'],
    [11, 'requirements.R-1.where.from_km'],
  ]);
  expect(refusal(text, []).message).toMatch(
    /would change beyond the end of the road \(found 50 km; allowed: less than 3\.3 km/,
  );
  expect(
    refusal(CASE(', changes: [{at_km: 1, set_speed_kmh: 50}]'), ['hold.changes.0.at_km=7']).message,
  ).toMatch(/^--set hold\.changes\.0\.at_km=7: hold\.changes\.0\.at_km: /);
});

test('a shift of the rider beyond the end of the road is refused at its key', () => {
  const engine =
    'kind: engine, torque: {peak_nm: 10, peak_rpm: 6000, falloff: 0.5}, gear_ratios: [25, 15, 11, 9], wheel_radius_m: 0.3, gearbox: {kind: clutch}';
  const text = CASE(', gear: 4, shifts: [{at_km: 1, gear: 3}, {at_km: 3.3, gear: 4}]').replace(
    'kind: force, peak_force_n: 320, closed_throttle_force_n: 40',
    engine,
  );
  expect(refusal(text).problems).toMatchObject([
    {
      code: 'beyond-the-road',
      place: { line: 6, key: 'hold.shifts.1.at_km' },
      found: '3.3 km',
      allowed: 'less than 3.3 km, the length of the road',
    },
  ]);
});

test('on a road there and back the whole way counts', () => {
  const { warnings } = run(CASE('', requirement('{from_km: 4, to_km: 6.6}')), ['track.direction=both']);
  expect(warnings.map(({ code }) => code)).toEqual(['turn-at-speed']);
});

test('a stretch that runs over the end is judged to the end, with a warning', () => {
  const asked = requirement('{from_km: 3, to_km: 12}');
  const column = asked.split('\n')[1]!.indexOf('12}') + 1;
  const { warnings, requirements } = run(CASE('', asked));
  expect(warnings).toEqual([
    {
      code: 'stretch-cut-at-end',
      message: 'R-1 is judged to the end of the road, 3.3 km: its stretch would go on to 12 km.',
      place: { file: 'case.yaml', line: 11, column, key: 'requirements.R-1.where.to_km' },
      from: 3000,
      to: 3300,
    },
  ]);
  expect(requirements.map(({ verdict }) => verdict)).toEqual(['met']);
  expect(run(CASE('', requirement('{from_km: 3, to_km: 3.3}'))).warnings).toEqual([]);
});

test('a change by seconds that a run did not live to see is a warning with who and when', () => {
  // 3.3 km at 60 km/h take 198 s.
  const { warnings } = run(
    CASE(', changes: [{at_s: 190, set_speed_kmh: 59}, {at_s: 500, set_speed_kmh: 60}]'),
  );
  expect(warnings.map(({ code, place }) => [code, place?.key])).toEqual([
    ['change-not-reached', 'hold.changes.1.at_s'],
  ]);
  expect(warnings[0]?.message).toMatch(
    /^The set speed did not change at 500 s: the run had ended before it \(locked after \d+\.\d s, typed after 19\d\.\d s\)\.$/,
  );
});
