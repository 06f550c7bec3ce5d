// Every expected figure is worked out by hand, in the comment beside it.

import { expect, it } from 'vitest';
import { engineSpecOf, variatorSpecOf } from '../../src/case/combustion-of.ts';
import { electricSpecOf } from '../../src/case/electric-of.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { vehicleOf } from '../../src/case/vehicle-of.ts';
import type { VehicleFile } from '../../src/case/vehicle-schema.ts';
import type { InputError } from '../../src/problems/input-error.ts';
import { expectClose } from '../compare.ts';

const HEAD = 'mass: {kerb_kg: 150, rider_kg: 50}\nroad_load: {cda_m2: 0.5, crr: 0.01}\n';
/** An engine that turns 300 rpm turns 10 pi rad/s: 3000 rpm are 100 pi. */
const RPM_3000 = 100 * Math.PI;

type Drive = NonNullable<VehicleFile['drive']>;
function driveFile<K extends Drive['kind']>(kind: K, keys: string): Extract<Drive, { kind: K }> {
  const { drive } = readVehicleFile(`${HEAD}drive: {kind: ${kind}, ${keys}}\n`, 'v.yaml').file;
  if (drive?.kind !== kind) throw new Error('another kind');
  return drive as Extract<Drive, { kind: K }>;
}

const ENGINE = `torque: {full_load: [{rpm: 3000, nm: 9}, {rpm: 6000, nm: 11}], part_throttle: {shape: 4, at_rpm: 4500}},
  closed_throttle_drag: [{rpm: 3000, nm: 1.5}, {rpm: 6000, nm: 2}],
  fuel_cut: {above_rpm: 3000, blend_rpm: 300, below_throttle_pct: 2, extra_drag_nm: 0.7},
  idle_rpm: 1500, stall_rpm: 900, rev_limit_rpm: 9000, rev_limit_band_rpm: 300, engine_inertia_kg_m2: 0.006,
  gear_ratios: [3, 2, 1.5, 1.2], primary_ratio: 3, final_ratio: 2.5, wheel_radius_m: 0.3, gear: 3,
  gearbox: {kind: clutch, open_s: 0.4, resume_s: 1.5}, driveline_efficiency_pct: 92, lag_s: 0.1, altitude_derate: naturally_aspirated`;

it('brings an engine with gears to SI', () => {
  const spec = engineSpecOf(driveFile('engine', ENGINE), null);
  expectClose(spec.ratios, [22.5, 15, 11.25, 9], 1e-12); // times 3 times 2.5
  expect(spec.gear).toBe(2); // third, counted from 0
  expect(spec.gearbox).toEqual({ kind: 'clutch', open: 0.4, resume: 1.5 });
  if (spec.torque.kind !== 'full_load') throw new Error('another torque');
  expectClose(spec.torque.shaftSpeed, [RPM_3000, 2 * RPM_3000], 1e-12);
  expectClose(spec.torque.torque, [9, 11], 0);
  expect(spec.torque.shape).toBe(4);
  expectClose([spec.torque.shapeSpeed!], [1.5 * RPM_3000], 1e-12);
  expectClose(spec.drag?.shaftSpeed ?? [], [RPM_3000, 2 * RPM_3000], 1e-12);
  expectClose(spec.drag?.torque ?? [], [1.5, 2], 0);
  const { above, blend, throttle, torque } = spec.fuelCut!;
  expectClose([above, blend, throttle, torque], [RPM_3000, 10 * Math.PI, 0.02, 0.7], 1e-12);
  expectClose(
    [spec.idle, spec.stall, spec.revLimit!, spec.limitBand],
    [RPM_3000 / 2, 30 * Math.PI, 3 * RPM_3000, 10 * Math.PI],
    1e-12,
  );
  expect(spec).toMatchObject({
    inertia: 0.006,
    efficiency: 0.92,
    lag: 0.1,
    derate: 'naturally_aspirated',
    wheelRadius: 0.3,
    fuel: null,
  });
});

it('takes a throttle plate at the speed of the greatest torque, or one shape at every speed where only that is told', () => {
  const shapeOf = (keys: string) => {
    const full = '[{rpm: 3000, nm: 9}, {rpm: 6000, nm: 11}, {rpm: 9000, nm: 8}]';
    const torque = `torque: {full_load: ${full}${keys}}`;
    const spec = engineSpecOf(
      driveFile('engine', `${torque}, gear_ratios: [4, 2], wheel_radius_m: 0.5`),
      null,
    );
    if (spec.torque.kind !== 'full_load') throw new Error('another torque');
    return [spec.torque.shape, spec.torque.shapeSpeed];
  };
  expectClose(shapeOf('') as number[], [3, 2 * RPM_3000], 1e-12);
  expect(shapeOf(', part_throttle: {shape: 4}')).toEqual([4, null]);
});

it('takes the highest gear, half of the idle speed and no limiter where nothing is said', () => {
  const spec = engineSpecOf(
    driveFile(
      'engine',
      'torque: {peak_nm: 190, peak_rpm: 6000, falloff: 0.4}, gear_ratios: [4, 2, 1], wheel_radius_m: 0.5',
    ),
    null,
  );
  expect(spec.gear).toBe(2);
  expectClose([spec.idle, spec.stall], [50 * Math.PI, 25 * Math.PI], 1e-12); // 1500 and 750 rpm
  expect(spec).toMatchObject({
    revLimit: null,
    drag: null,
    fuelCut: null,
    gearbox: { kind: 'fixed' },
    derate: 'none',
  });
  if (spec.torque.kind !== 'parabola') throw new Error('another torque');
  expectClose(
    [spec.torque.peak, spec.torque.peakSpeed, spec.torque.falloff],
    [190, 2 * RPM_3000, 0.4],
    1e-12,
  );
});

it('lets a case have the last word on the gear', () => {
  expect(engineSpecOf(driveFile('engine', ENGINE), 2).gear).toBe(1);
});

it('brings a torque map, shift lines and a table of consumption to SI', () => {
  const spec = engineSpecOf(
    driveFile(
      'engine',
      `torque: {map: {rpm: [3000, 6000], throttle_pct: [0, 40, 100], nm: [[-1, 5, 8], [-2, 6, 10]]}},
  gear_ratios: [2, 1.5], wheel_radius_m: 0.3, rev_limit_rpm: 9000,
  gearbox: {kind: automatic, shift_lines: [{throttle_pct: 10, up_rpm: 6000, down_rpm: 3000}], gap_s: 0.2, dwell_s: 3},
  fuel: {bsfc: {rpm: [3000, 6000], nm: [4, 8], g_per_kwh: [[360, 288], [396, 324]], idle_g_per_h: 90}, heating_value_mj_per_kg: 40, density_kg_per_l: 0.75, tank_l: 12}`,
    ),
    null,
  );
  if (spec.torque.kind !== 'map') throw new Error('another torque');
  expectClose(spec.torque.throttle, [0, 0.4, 1], 1e-15);
  expectClose(spec.torque.torque, [-1, 5, 8, -2, 6, 10], 0);
  const { gearbox } = spec;
  if (gearbox.kind !== 'automatic') throw new Error('another gearbox');
  expectClose(gearbox.throttle, [0.1], 1e-15);
  expectClose([...gearbox.upSpeed, ...gearbox.downSpeed], [2 * RPM_3000, RPM_3000], 1e-12);
  expect(gearbox).toMatchObject({ gap: 0.2, dwell: 3 });
  const fuel = spec.fuel!;
  if (fuel.use.kind !== 'bsfc') throw new Error('another way');
  // 360 g/kWh = 0.36 kg / 3.6e6 J = 1e-7 kg/J
  expectClose(fuel.use.consumption, [1e-7, 0.8e-7, 1.1e-7, 0.9e-7], 1e-20);
  expectClose(fuel.use.idlePower, 1000, 1e-9); // 90 g/h = 0.025 g/s, times 40 kJ/g
  expectClose([fuel.heat, fuel.density, fuel.tank!], [40e6, 750, 0.012], 1e-9);
});

it('brings a belt to SI', () => {
  const spec = variatorSpecOf(
    driveFile(
      'variator',
      `torque: {peak_nm: 10, peak_rpm: 6000, falloff: 0.5},
  belt: {high_ratio: 0.8, low_ratio: 2.5, final_ratio: 8, line: [{throttle_pct: 0, rpm: 4500}, {throttle_pct: 100, rpm: 7500}], lag_s: 0.4},
  clutch: {begins_rpm: 3000, locked_rpm: 3600}, wheel_radius_m: 0.22, fuel: {willans: {friction_nm: 1.2, slope_pct: 38}}`,
    ),
  );
  expectClose([spec.leastRatio, spec.greatestRatio], [6.4, 20], 1e-12);
  expectClose(spec.line.throttle, [0, 1], 0);
  expectClose(spec.line.shaftSpeed, [1.5 * RPM_3000, 2.5 * RPM_3000], 1e-12);
  expectClose([spec.clutch.begins, spec.clutch.locked], [RPM_3000, 1.2 * RPM_3000], 1e-12);
  expect(spec).toMatchObject({ ratioLag: 0.4, wheelRadius: 0.22, efficiency: 0.8 });
  expect(spec.fuel!.use).toEqual({ kind: 'willans', friction: 1.2, slope: 0.38 });
});

it('brings battery, loss map and heating to SI', () => {
  const spec = electricSpecOf(
    driveFile(
      'electric',
      `peak_force_n: 400, peak_power_kw: 6, regeneration_force_n: 100,
  loss_map: {speed_kmh: [18, 72], force_n: [0, 400], loss_w: [[50, 300], [90, 800]]},
  battery: {capacity_wh: 2500, charge_pct: 90, reserve_pct: 10, open_voltage: [{charge_pct: 0, v: 44}, {charge_pct: 100, v: 56}],
    resistance_ohm: 0.04, nominal_v: 46, full_fade: [{charge_pct: 95, accepts_pct: 100}, {charge_pct: 100, accepts_pct: 20}]},
  heating: {continuous_power_kw: 3.5, peak_power_s: 240}`,
    ),
  );
  expect(spec.efficiency).toBeNull();
  expectClose(spec.lossMap?.speed ?? [], [5, 20], 1e-12);
  expectClose(spec.lossMap?.loss ?? [], [50, 300, 90, 800], 0);
  const battery = spec.battery!;
  expectClose([battery.capacity, battery.charge, battery.reserve], [9e6, 0.9, 0.1], 1e-9); // 2500 Wh at 3600 J
  expectClose(battery.cells!.openVoltage.charge, [0, 1], 0);
  expectClose(battery.cells!.openVoltage.voltage, [44, 56], 0);
  expect(battery.cells).toMatchObject({ resistance: 0.04, nominalVoltage: 46 });
  expectClose(battery.acceptance!.charge, [0.95, 1], 1e-15);
  expectClose(battery.acceptance!.share, [1, 0.2], 1e-15);
  expectClose([spec.heating!.continuousPower, spec.heating!.peakPowerTime], [3500, 240], 0);
  expectClose(spec.heating!.onset, 0.8, 1e-15); // the default
});

it('brings actuator, wheel sensor and grip to SI', () => {
  const document = readVehicleFile(
    `${HEAD}drive: {kind: force, peak_force_n: 300}
actuator: {dead_time_s: 0.04, resolution_pct: 0.5, travel_pct: [5, 90], lag_s: 0.1, rate_limit_pct_per_s: 80, slack_pct: 3}
speed_sensor: {pulses_per_turn: 48, wheel_circumference_m: 1.92, counting_window_s: 0.1, noise_sd_kmh: 1.8, noise_seed: 7}
traction: {friction_dry: 0.8, friction_wet: 0.4, wheelbase_m: 1.3, mass_centre_ahead_m: 0.6, mass_centre_height_m: 0.65}
`,
    'v.yaml',
  );
  const { actuator, sensor, traction } = vehicleOf(document);
  expect(actuator).toEqual({
    deadTime: 0.04,
    resolution: 0.005,
    travel: { least: 0.05, greatest: 0.9 },
    lag: 0.1,
    rateLimit: 0.8,
    slack: 0.03,
  });
  expectClose(sensor.pulses!.spacing, 0.04, 1e-15); // 1.92 m over 48
  expect(sensor.pulses!.reading).toEqual({ kind: 'counted', window: 0.1 });
  expectClose(sensor.noise!.sd, 0.5, 1e-15); // 1.8 km/h
  expect(sensor.noise!.seed).toBe(7);
  expect(traction).toEqual({
    friction: 0.8,
    wheelbase: 1.3,
    massCentreAhead: 0.6,
    massCentreHeight: 0.65,
  });
  expect(vehicleOf(document, { gear: null, surface: 'wet' }).traction?.friction).toBe(0.4);
});

it('times pulses by a clock where that is asked for', () => {
  const { sensor } = vehicleOf(
    readVehicleFile(
      `${HEAD}speed_sensor: {pulses_per_turn: 20, wheel_circumference_m: 2, timer_resolution_s: 0.000001}\n`,
      'v.yaml',
    ),
  );
  expect(sensor.pulses).toEqual({ spacing: 0.1, reading: { kind: 'timed', clock: 0.000001 } });
});

it('tells what only a compiler refuses with the place of the key in the file', () => {
  const document = readVehicleFile(
    `${HEAD}drive:
  kind: engine
  torque: {peak_nm: 10, peak_rpm: 6000, falloff: 0.5}
  gear_ratios: [20, 10]
  driveline_efficiency_pct: 94
  wheel_radius_m: 0.3
`,
    'v.yaml',
  );
  const drive = document.file.drive as Extract<Drive, { kind: 'engine' }>;
  const refused = (changed: Partial<typeof drive>): unknown => {
    try {
      return vehicleOf({ ...document, file: { ...document.file, drive: { ...drive, ...changed } } });
    } catch (error) {
      return (error as InputError).problems[0]?.place;
    }
  };
  // As if the rules of the file had let them through.
  expect(refused({ driveline_efficiency_pct: 200 })).toEqual({
    file: 'v.yaml',
    line: 7,
    column: 29,
    key: 'drive.driveline_efficiency_pct',
  });
  expect(refused({ gear_ratios: [10, 20] })).toMatchObject({ line: 6, key: 'drive.gear_ratios' });
  expect(refused({ rev_limit_rpm: 500 })).toMatchObject({ line: 3, key: 'drive.rev_limit_rpm' });
});
