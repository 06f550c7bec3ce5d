// Every expected figure is worked out by hand, in the comment beside it.

import { expect, it } from 'vitest';
import { candidatesOf } from '../../src/case/candidates-of.ts';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { profileOf, roadOptionsOf, trackChoiceOf } from '../../src/case/road-of.ts';
import {
  holdOf,
  outputOf,
  requirementsOf,
  riderOf,
  schemeOf,
  segmentsOf,
  titleOf,
} from '../../src/case/run-of.ts';
import { vehicleOf } from '../../src/case/vehicle-of.ts';
import type { PiSetup } from '../../src/control/setup.ts';
import type { InputError } from '../../src/problems/input-error.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import { expectClose } from '../compare.ts';

const VEHICLE = `
name: Tester
mass: {kerb_kg: 150, rider_kg: 40, payload_kg: 10}
road_load: {f0_n: 8.69, f1_n_per_kmh: 0.1, f2_n_per_kmh2: 0.0252, air_density_kg_m3: 1.2}
drive: {kind: force, peak_force_n: 300, peak_power_kw: 8.5, closed_throttle_force_n: 40, lag_s: 0.15}
actuator: {lag_s: 0.06, rate_limit_pct_per_s: 400}
speed_sensor: {filter_s: 0.05, delay_s: 0.02, scale_error_pct: -3}
`;
const CASE = `
title: Units
track: {file: a.gpx, track: 2, trim_ends_m: 200, direction: both}
road:
  grid_m: 5
  elevation_source: lidar
  smoothing_wavelength_m: 250
  masks: [{from_km: 3.1, to_km: 3.35, reason: viaduct}]
  shelter: [{from_km: 1, to_km: 2, factor: 0.7}]
wind: {speed_m_s: 5, from_deg: 270, terrain: rough}
air: {temperature_c: 20, sea_level_pressure_hpa: 1000}
vehicle: v.yaml
hold:
  set_speed_kmh: 72
  set_speed_is: indicated
  start_speed_kmh: 36
  changes: [{at_km: 4.2, set_speed_kmh: 54, ramp_m_s2: 0.6}]
rider: {brakes_above_kmh: 9}
scheme: fast
candidates:
  - {kind: locked}
  - {name: given, kind: locked, throttle_pct: 31}
  - {name: typed, kind: pi, kp_pct_per_kmh: 4, ti_s: 6, setpoint_ramp_m_s2: 1, anti_windup: {kind: back_calculation, tracking_s: 4}}
  - {name: two-gains, kind: pi, sample_s: 0.05, computing_delay_s: 0.01, integration: backward, kp_pct_per_kmh: 1, ki_pct_per_kmh_s: 0.5, setpoint_weight: 0.3}
segments: {by: length, length_m: 400}
requirements:
  - {id: A, figure: within_band_pct, band_kmh: 1.8, at_least: 95, where: all, candidates: [typed]}
  - {id: B, figure: worst_high_kmh, at_most: 4, where: {from_km: 1, to_km: 2.5}}
output: {series: full, bin_m: 20}
`;
const document = readCaseFile(CASE, 'case.yaml');
const vehicle = vehicleOf(readVehicleFile(VEHICLE, 'v.yaml'));

it('brings the vehicle to SI', () => {
  expectClose(vehicle.mass, 200, 0);
  expectClose(vehicle.payload, 10, 0);
  expectClose(vehicle.rotatingMass, 6, 1e-12); // 4 % of 150
  const { roadLoad } = vehicle;
  // CdA = 2 f2 3.6^2 / rho = 2 * 0.0252 * 12.96 / 1.2
  expectClose(roadLoad.cda, 0.54432, 1e-12);
  // c0 = 8.69 / (200 * 9.80665), c1 = 0.1 * 3.6 / (200 * 9.80665)
  expectClose(roadLoad.c0, 8.69 / 1961.33, 1e-15);
  expectClose(roadLoad.c1, 0.36 / 1961.33, 1e-15);
  expect(vehicle.drive).toMatchObject({
    kind: 'force',
    peakForce: 300,
    peakPower: 8500,
    closedThrottleForce: 40,
    lag: 0.15,
  });
  expect(vehicle.actuator).toEqual({ ...IDEAL_ACTUATOR, lag: 0.06, rateLimit: 4 });
  expect(vehicle.sensor).toEqual({ ...IDEAL_SENSOR, filter: 0.05, delay: 0.02, scaleError: -0.03 });
});

it('brings coefficients, yaw tables and an electric drive to SI', () => {
  const electric = vehicleOf(
    readVehicleFile(
      `mass: {kerb_kg: 100, rotating_kg: 0}
road_load: {cda_table: [{yaw_deg: 0, cda_m2: 0.5}, {yaw_deg: 18, cda_m2: 0.6}], crr: 0.01, crr_v_s_per_m: 0.0001, crr_v2_s2_per_m2: 0.000002}
drive: {kind: electric, peak_force_n: 400, regeneration_force_n: 90, regeneration_power_kw: 1.5, regeneration_fade_kmh: 9, efficiency_pct: {drive: 88, regeneration: 70}}
`,
      'e.yaml',
    ),
  );
  expectClose(electric.roadLoad.yawTable?.yaw ?? [], [0, Math.PI / 10], 1e-15); // 18 deg is a tenth of a half turn
  expectClose(electric.roadLoad.yawTable?.cda ?? [], [0.5, 0.6], 0);
  expect(electric.roadLoad).toMatchObject({ c0: 0.01, c1: 0.0001, c2: 0.000002 });
  expect(electric.rotatingMass).toBe(0);
  expect(electric.drive).toMatchObject({
    kind: 'electric',
    throttleMin: -1,
    peakPower: null,
    regenerationForce: 90,
  });
  // Power drawn for 1 W out of the shaft, and for 1 W into it.
  expectClose(electric.drive.source?.map.power ?? [], [0, 0, 0, -0.7, 0, 1 / 0.88], 1e-15);
  expectClose(electric.drive.speedEdges, [2.5, 1500 / 90], 1e-12); // 9 km/h; 1.5 kW over 90 N
});

it('lets no throttle below 0 where nothing is regenerated', () => {
  const plain = vehicleOf(
    readVehicleFile(
      'mass: {kerb_kg: 100}\nroad_load: {cda_m2: 0.5, crr: 0.01}\ndrive: {kind: electric, peak_force_n: 400}\n',
      'e.yaml',
    ),
  );
  expect(plain.drive.throttleMin).toBe(0);
});

it('brings road, wind and air to SI', () => {
  const options = roadOptionsOf(document, 'Units');
  expect(options).toMatchObject({
    name: 'Units',
    grid: 5,
    elevationSource: 'lidar',
    smoothingWavelength: 250,
    trimEnds: 200,
    direction: 'both',
    air: { kind: 'standard', temperature: 293.15, pressure: 100000 },
  });
  expectClose(options.nominalSpeed, 20, 1e-12); // 72 km/h
  expectClose([options.masks[0]!.from, options.masks[0]!.to], [3100, 3350], 1e-9);
  expect(options.shelter[0]).toMatchObject({ from: 1000, to: 2000, factor: 0.7 });
  expectClose(options.wind!.from, 1.5 * Math.PI, 1e-15); // from the west
  // Roughness length of the class "rough": 0.25 m (Wieringa 1992).
  expect(options.wind).toMatchObject({ speed: 5, height: 10, terrainRoughness: 0.25, riderHeight: 1.2 });
  expect(trackChoiceOf(document)).toBe(2);
  expect(profileOf(document)).toBeNull();
});

it('brings written roads to SI', () => {
  const text = `track: {profile: [{for_s: 20, grade_pct: 0}, {for_s: 30, grade_pct: -6, heading_deg: 90, headwind_m_s: 3}], vertical_curve_m: 60, start_elevation_m: 100}
vehicle: v.yaml
hold: {set_speed_kmh: 60}
air: {density_kg_m3: 1.189}
wind: {speed_m_s: 3, from_deg: 0, roughness_m: 0.07}
candidates: [{kind: locked, throttle_pct: 0}]
`;
  const written = readCaseFile(text, 'w.yaml');
  const profile = profileOf(written)!;
  expect(profile).toMatchObject({ by: 'time', verticalCurve: 60, startElevation: 100 });
  expect(profile.pieces[0]).toEqual({ extent: 20, grade: 0, heading: null, headwind: null });
  expectClose(profile.pieces[1]!.grade, -0.06, 1e-15);
  expectClose(profile.pieces[1]!.heading!, Math.PI / 2, 1e-15);
  expect(profile.pieces[1]!.headwind).toBe(3);
  expect(roadOptionsOf(written)).toMatchObject({
    air: { kind: 'density', density: 1.189 },
    smoothingWavelength: null,
    trimEnds: 0,
    direction: 'there',
  });
  expect(roadOptionsOf(written).wind?.terrainRoughness).toBe(0.07);
});

it('brings hold, rider, requirements and output to SI', () => {
  const hold = holdOf(document);
  expectClose([hold.setSpeed, hold.startSpeed, hold.changes[0]!.setSpeed], [20, 10, 15], 1e-12);
  expect(hold.setSpeedIs).toBe('indicated');
  expect(hold.changes[0]).toMatchObject({ at: { distance: 4200 }, ramp: 0.6 });
  expectClose(riderOf(document).brakesAbove!, 2.5, 1e-12); // 9 km/h
  const [first, second] = requirementsOf(document);
  expect(first).toMatchObject({
    id: 'A',
    figure: 'within_band_pct',
    atLeast: 95,
    atMost: null,
    where: 'all',
    candidates: ['typed'],
  });
  expectClose(first!.band!, 0.5, 1e-12); // 1.8 km/h
  expect(second).toMatchObject({
    atLeast: null,
    atMost: 4,
    band: null,
    where: { from: 1000, to: 2500 },
    candidates: null,
  });
  expect(segmentsOf(document)).toEqual({ by: 'length', length: 400 });
  expect(outputOf(document)).toEqual({ series: 'full', bin: 20 });
  expect(schemeOf(document)).toBe('fast');
  expect(titleOf(document)).toBe('Units');
});

it('starts at the set speed when no start speed is given', () => {
  const hold = holdOf(readCaseFile(CASE.replace('  start_speed_kmh: 36\n', ''), 'case.yaml'));
  expectClose(hold.startSpeed, 20, 1e-12);
});

it('brings gains to SI', () => {
  const [locked, given, typed, twoGains] = candidatesOf(document, vehicle);
  expect(locked).toEqual({ name: 'locked', controller: { kind: 'locked', throttle: 'level' } });
  expect(given?.controller).toMatchObject({ kind: 'locked', throttle: 0.31 });
  const a = typed!.controller as PiSetup;
  // 1 % per km/h is 0.01 per (1 / 3.6) m/s, which is 0.036 per m/s: 4 of them are 0.144; over 6 s, 0.024 a second.
  expectClose([a.kp, a.ki], [0.144, 0.024], 1e-15);
  expect(a).toMatchObject({
    setpointWeight: 1,
    sample: 0.02,
    computingDelay: 0,
    integration: 'forward',
    antiWindup: { kind: 'back_calculation', trackingTime: 4 },
    ramp: 1,
    design: null,
  });
  const b = twoGains!.controller as PiSetup;
  expectClose([b.kp, b.ki], [0.036, 0.018], 1e-15);
  expect(b).toMatchObject({
    setpointWeight: 0.3,
    sample: 0.05,
    computingDelay: 0.01,
    integration: 'backward',
    antiWindup: { kind: 'conditional' },
    ramp: null,
  });
});

it('refuses what the vehicle cannot do', () => {
  const coasting = vehicleOf(
    readVehicleFile('mass: {kerb_kg: 200}\nroad_load: {cda_m2: 0.5, crr: 0.01}\n', 'v.yaml'),
  );
  const code = (text: string, of: typeof vehicle): string | null => {
    try {
      candidatesOf(readCaseFile(text, 'case.yaml'), of);
      return null;
    } catch (error) {
      return (error as InputError).code;
    }
  };
  const one = (candidate: string): string =>
    CASE.replace(/candidates:\n[\s\S]*?segments/, `candidates: [${candidate}]\nsegments`).replace(
      ', candidates: [typed]',
      '',
    );
  expect(code(one('{kind: locked, throttle_pct: 0}'), coasting)).toBeNull();
  expect(code(one('{kind: locked}'), coasting)).toBe('no-drive');
  expect(code(one('{kind: pi, kp_pct_per_kmh: 4, ti_s: 6}'), coasting)).toBe('no-drive');
  expect(code(one('{kind: locked, throttle_pct: -20}'), vehicle)).toBe('out-of-range');
});

const loadOf = (load: string) =>
  vehicleOf(
    readVehicleFile(
      `mass: {kerb_kg: 125, rider_kg: 78}\nroad_load: ${load}\ndrive: {kind: force, peak_force_n: 260}\n`,
      'v.yaml',
    ),
  ).roadLoad;

it('takes rolling resistance by tyre pressure from the published formula', () => {
  // At 2.5 bar 0.0085 + 0.018 / 2.5 = 0.0157, and 1.59e-6 / 2.5 per (km/h)2, 3.6^2 = 12.96 times as much per (m/s)2.
  const load = loadOf('{cda_m2: 0.5, cda_yaw_per_rad2: 1, tyre_pressure_bar: 2.5}');
  expect(load).toMatchObject({ cda: 0.5, yawGain: 1, yawTable: null, c1: 0 });
  expectClose([load.c0, load.c2 * 1e6], [0.0157, 8.24256], 1e-9);
});

it("takes a road load from a regulation's table by the mass as loaded, or by one that is given", () => {
  // 203 kg belong to the row of 200 kg: 40 CFR 86.529-98 has 8.69 N and 0.0252 N/(km/h)2 at 200 kg; its air 1.17 kg/m3.
  const cfr = loadOf('{published: 40 CFR 86.529-98}');
  expectClose([cfr.cda, cfr.c0], [(2 * 0.0252 * 12.96) / 1.17, 8.69 / (200 * 9.80665)], 1e-9);
  // UN GTR 2: 0.088 x 300 = 26.4 N and 0.000015 x 300 + 0.02 = 0.0245; its air 1.189 kg/m3.
  const gtr = loadOf('{published: UN GTR 2, test_mass_kg: 300, cda_yaw_per_rad2: 2}');
  expectClose([gtr.cda, gtr.c0], [(2 * 0.0245 * 12.96) / 1.189, 26.4 / (300 * 9.80665)], 1e-9);
  expect(gtr.yawGain).toBe(2);
});
