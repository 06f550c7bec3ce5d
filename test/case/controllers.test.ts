import { describe, expect, it } from 'vitest';
import { candidatesOf } from '../../src/case/candidates-of.ts';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { vehicleOf } from '../../src/case/vehicle-of.ts';
import type { ControllerSetup, IntegerSetup, PidSetup } from '../../src/control/setup.ts';
import type { InputError } from '../../src/problems/input-error.ts';
import { expectClose } from '../compare.ts';

const vehicle = vehicleOf(
  readVehicleFile(
    `mass: {kerb_kg: 125, rider_kg: 75}
road_load: {cda_m2: 0.5, crr: 0.014}
drive: {kind: force, peak_force_n: 300}
`,
    'v.yaml',
  ),
);
const read = (candidate: string) =>
  readCaseFile(
    `track: {profile: [{length_m: 1000, grade_pct: 0}]}
vehicle: v.yaml
hold: {set_speed_kmh: 60}
candidates: [{${candidate}}]
`,
    'c.yaml',
  );
const setupOf = (candidate: string): ControllerSetup => candidatesOf(read(candidate), vehicle)[0]!.controller;
const PI = 'kind: pi, kp_pct_per_kmh: 4, ti_s: 8';
const INTEGER =
  'kind: integer, kp_pct_per_kmh: 4, ti_s: 8, speed_counts_per_kmh: 10, full_throttle_counts: 1000';

describe('a candidate of the family', () => {
  it('stays a plain PI while it asks for nothing more', () => {
    expect(setupOf(PI).kind).toBe('pi');
    for (const kind of ['none', 'conditional'])
      expect(setupOf(`${PI}, anti_windup: {kind: ${kind}}`).kind).toBe('pi');
    for (const more of ['anti_windup: {kind: clamping}', 'rate_limit_pct_per_s: 50', 'observer: {}'])
      expect(setupOf(`${PI}, ${more}`).kind).toBe('pid');
  });

  it('has its figures in SI', () => {
    // 4 % per km/h are 0.04 3.6 = 0.144 per m/s; Ti 8 s: 0.018; Td 0.5 s: 0.072.
    const pid = setupOf('kind: pid, kp_pct_per_kmh: 4, ti_s: 8, td_s: 0.5') as PidSetup;
    expectClose([pid.kp, pid.ki, pid.kd, pid.derivativeFilter], [0.144, 0.018, 0.072, 0.05], 1e-14);
    const typed =
      'kind: pid, kp_pct_per_kmh: 4, ki_pct_per_kmh_s: 0.5, kd_pct_s_per_kmh: 2, derivative_filter_s: 0.1';
    const byGain = setupOf(typed) as PidSetup;
    expectClose(
      [byGain.kp, byGain.ki, byGain.kd, byGain.derivativeFilter],
      [0.144, 0.018, 0.072, 0.1],
      1e-14,
    );
    const p = setupOf('kind: p, kp_pct_per_kmh: 4') as PidSetup;
    expectClose([p.kp, p.ki, p.kd, p.setpointWeight], [0.144, 0, 0, 1], 1e-14);
    const limited = setupOf(`${PI}, rate_limit_pct_per_s: 50, dead_band: {half_width_kmh: 1.8}`) as PidSetup;
    expectClose([limited.rateLimit!, limited.deadBand!.halfWidth], [0.5, 0.5], 1e-14);
    expect(limited.deadBand!.integratesInside).toBe(false);
  });

  it('has every rule for its integral', () => {
    const formOf = (windup: string) => (setupOf(`${PI}, anti_windup: ${windup}`) as PidSetup).form;
    expect(formOf('{kind: velocity_form}')).toEqual({ kind: 'velocity' });
    expect(formOf('{kind: sign_test}')).toMatchObject({ antiWindup: { kind: 'sign_test' } });
    expect(formOf('{kind: integral_cap, cap_pct: 40}')).toMatchObject({
      antiWindup: { kind: 'cap', cap: 0.4, of: 'throttle' },
    });
    // 36 of km/h s are 10 m/s s.
    expect(formOf('{kind: integral_cap, cap_pct: 36, against: summed_error}')).toMatchObject({
      antiWindup: { kind: 'cap', cap: 10, of: 'summed_error' },
    });
  });

  it('has feedforward and observer with the mass of the vehicle, or another', () => {
    const from = '{kind: accelerometer, filter_hz: 1, pitch_error_deg: 0.9}';
    const setup = setupOf(`${PI}, feedforward: {of: grade, grade_from: ${from}}`) as PidSetup;
    expect(setup.feedforward!.drag).toBe(false);
    expect(setup.model!.mass).toBe(200);
    const { grade } = setup.feedforward!;
    if (grade?.kind !== 'accelerometer') throw new Error('no accelerometer');
    // A low-pass of 1 Hz has a time constant of 1 / (2 pi) s; 0.9 degrees are 0.005 pi.
    expectClose([grade.filter, grade.pitchError], [0.15915494309189535, 0.015707963267948967], 1e-15);
    const observing = setupOf(`${PI}, observer: {filter_hz: 0.2}, model_mass_kg: 250`) as PidSetup;
    expectClose([observing.observerFilter!, observing.model!.mass], [0.7957747154594768, 250], 1e-13);
    const known = setupOf(
      `${PI}, feedforward: {of: drag_and_grade, grade_from: {kind: known_road}}`,
    ) as PidSetup;
    expect(known.feedforward).toEqual({ drag: true, grade: { kind: 'known_road', preview: 0 } });
  });

  it('schedules its gains by speed and gear, and knows the gears of its vehicle', () => {
    const schedule =
      'schedule: {at_kmh: [36, 72], rows: [{gear: 1, factor: [2, 1], ki_factor: [3, 1]}, {factor: [1, 1]}]}';
    const setup = setupOf(`${PI}, ${schedule}`) as PidSetup;
    expectClose([...setup.schedule!.speed], [10, 20], 1e-13);
    expect(setup.schedule!.rows.map(({ gear }) => gear)).toEqual([0, null]);
    expect([...setup.schedule!.rows[0]!.integral]).toEqual([3, 1]);
    expect([...setup.schedule!.rows[1]!.integral]).toEqual([1, 1]);
    let refused: InputError | null = null;
    try {
      setupOf(`${PI}, schedule: {at_kmh: [60], rows: [{gear: 2, factor: [1]}]}`);
    } catch (error) {
      refused = error as InputError;
    }
    expect(refused!.problems[0]).toMatchObject({ code: 'out-of-range', place: { line: 4 } });
    expect(refused!.message).toContain('is no gear of the vehicle');
  });
});

describe('a candidate in whole numbers', () => {
  it('has its scales in SI, and what is usual where nothing is said', () => {
    const setup = setupOf(`${INTEGER}, gain_divisor: 64`) as IntegerSetup;
    // 10 counts per km/h are 36 per m/s.
    expectClose([setup.speedScale, setup.throttleScale, setup.kp], [36, 1000, 0.144], 1e-13);
    expect(setup).toMatchObject({
      wordBits: 16,
      productBits: 32,
      integralOf: 'increments',
      integralDivisor: 1,
      scaling: 'shift',
      rounding: 'truncate',
      overflow: 'wrap',
      integralRule: { kind: 'conditional' },
    });
    const told = read(`${INTEGER}, gain_divisor: 64`).defaults.map(({ key }) => key);
    expect(told).toContain('candidates.0.word_bits');
    expect(told).toContain('candidates.0.overflow');
  });

  it('is refused where a gain is beyond its word', () => {
    // Kp = 0.144 1000 / 36 = 4 counts of throttle per count of speed: with 16384 it is 65 536.
    expect(() => setupOf(`${INTEGER}, gain_divisor: 16384`)).toThrow(
      'count of kp greater than a word of 16 bits',
    );
    expect(setupOf(`${INTEGER}, gain_divisor: 4096`).kind).toBe('integer');
  });
});
