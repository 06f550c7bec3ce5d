import * as z from 'zod';
import type { Drive } from '../vehicle/drive.ts';
import { block, kind, line, list, mapping, number, optional, otherwise, word } from './fields.ts';

const IDEAL = 'ideal: not given';

const massSchema = mapping('Masses', {
  kerb_kg: number('kg', 20, 2000, 'Mass of the vehicle ready to ride'),
  rider_kg: otherwise(
    number('kg', 0, 300, 'Mass of the rider'),
    0,
    'not given: the kerb mass is taken as the whole mass',
  ),
  payload_kg: otherwise(number('kg', 0, 1000, 'Mass of what is carried'), 0, 'not given: nothing is carried'),
  rotating_kg: optional(
    number('kg', 0, 300, 'Equivalent mass of all that turns with the wheels'),
    '4 % of kerb_kg',
    'wheels as 4 % of the kerb mass, as motorcycle regulations allow (UN global technical regulation No. 2)',
  ),
});

const yaw = {
  cda_yaw_per_rad2: otherwise(
    number('1/rad2', 0, 10, 'Growth k of the drag area with the yaw angle: CdA (1 + k min(|beta|, 0.44)^2)'),
    0,
    'not given: the drag area does not change with yaw',
  ),
};
const rolling = {
  crr: number('', 0, 0.2, 'Rolling resistance coefficient'),
  crr_v_s_per_m: otherwise(
    number('s/m', -0.01, 0.01, 'Growth of the rolling resistance coefficient with speed'),
    0,
    IDEAL,
  ),
  crr_v2_s2_per_m2: otherwise(
    number('s2/m2', -0.001, 0.001, 'Growth of the rolling resistance coefficient with speed squared'),
    0,
    IDEAL,
  ),
};

const coefficientRoadLoad = mapping('Road load by coefficients', {
  cda_m2: number('m2', 0, 5, 'Drag area without yaw'),
  ...yaw,
  ...rolling,
});
const tableRoadLoad = mapping('Road load by coefficients, the drag area by a table over yaw', {
  cda_table: list(
    mapping('Row', {
      yaw_deg: number('deg', 0, 180, 'Yaw angle of the air flow, its size; the first row at 0, increasing'),
      cda_m2: number('m2', 0, 5, 'Drag area at this yaw'),
    }),
    2,
    200,
    'Drag area over yaw; between rows on a straight line, beyond the last row constant',
  ),
  ...rolling,
});
const regulationRoadLoad = mapping(
  'Road load as regulations publish it: F = f0 + f1 V + f2 V2, still air, level',
  {
    f0_n: number('N', 0, 1000, 'Constant part'),
    f1_n_per_kmh: otherwise(
      number('N per km/h', -20, 20, 'Part that grows with speed'),
      0,
      'not given: two-term form',
    ),
    f2_n_per_kmh2: number('N per (km/h)2', 0, 0.5, 'Part that grows with speed squared: the air'),
    test_mass_kg: optional(
      number('kg', 20, 3000, 'Mass to which f0 and f1 belong'),
      'mass of the vehicle',
      'not given: the table belongs to this vehicle as loaded',
    ),
    air_density_kg_m3: otherwise(
      number('kg/m3', 0.5, 2, 'Air density to which f2 belongs'),
      1.189,
      'reference conditions of coast-down standards, 20 deg C and 100 kPa (ISO 10521-1)',
    ),
    ...yaw,
  },
);

const lag = otherwise(number('s', 0, 20, 'First-order lag from throttle to force'), 0, IDEAL);
const peakPower = optional(
  number('kW', 0.01, 500, 'Greatest power at the wheel'),
  'none',
  'not given: no power limit',
);

const driveSchemas = {
  force: mapping('Force at the wheel by throttle, one fixed ratio', {
    kind: kind('force'),
    peak_force_n: number('N', 1, 20000, 'Greatest force at the wheel, at full throttle'),
    peak_power_kw: peakPower,
    closed_throttle_force_n: otherwise(
      number('N', 0, 5000, 'Force at the wheel that holds back at closed throttle, written positive'),
      0,
      'ideal: nothing holds back at closed throttle',
    ),
    lag_s: lag,
    altitude_derate: otherwise(
      word(['none', 'naturally_aspirated'], 'Loss of full-throttle force with air density'),
      'none',
      'not given: full-throttle force is the same at every altitude',
    ),
  }),
  electric: mapping('Electric motor: force-power envelope, regeneration down to throttle -100 %', {
    kind: kind('electric'),
    peak_force_n: number('N', 1, 20000, 'Greatest force at the wheel'),
    peak_power_kw: peakPower,
    regeneration_force_n: otherwise(
      number('N', 0, 20000, 'Greatest force that regeneration holds back with, written positive'),
      0,
      'not given: no regeneration',
    ),
    regeneration_power_kw: optional(
      number('kW', 0.01, 500, 'Greatest power that regeneration takes at the wheel'),
      'none',
      'not given: no power limit of its own',
    ),
    regeneration_fade_kmh: otherwise(
      number('km/h', 0, 50, 'Speed below which drag and regeneration fade to nothing at a standstill'),
      8,
      'an assumed round figure, about 2 m/s: a motor cannot hold back at a standstill',
    ),
    closed_throttle_force_n: otherwise(
      number('N', 0, 5000, 'Drag of the motor at closed throttle, written positive'),
      0,
      'ideal: no drag at closed throttle',
    ),
    efficiency_pct: optional(
      mapping('Efficiencies [%]', {
        drive: number('%', 1, 100, 'Wheel energy over battery energy'),
        regeneration: number('%', 0, 100, 'Battery energy over wheel energy'),
      }),
      'none',
      'not given: no account of battery energy',
    ),
    lag_s: lag,
  }),
} satisfies Record<Exclude<Drive['kind'], 'engine' | 'variator'>, z.ZodType>;

/** The vehicle file. The one source of its type, its checks and its JSON Schema. */
export const vehicleSchema = mapping('A vehicle', {
  name: optional(line('Name for the report', 100)),
  mass: massSchema,
  road_load: z
    .union([coefficientRoadLoad, tableRoadLoad, regulationRoadLoad])
    .meta({ description: 'Road load' }),
  drive: optional(
    z.union([driveSchemas.force, driveSchemas.electric]).meta({ description: 'Drive' }),
    'none',
    'not given: the vehicle can only coast',
  ),
  actuator: block(
    mapping('From command to throttle', {
      lag_s: otherwise(number('s', 0, 20, 'First-order lag'), 0, IDEAL),
      rate_limit_pct_per_s: optional(
        number('%/s', 0.1, 100000, 'Fastest movement of the throttle'),
        'none',
        IDEAL,
      ),
    }),
  ),
  speed_sensor: block(
    mapping('From true to measured speed', {
      filter_s: otherwise(number('s', 0, 20, 'First-order filter'), 0, IDEAL),
      delay_s: otherwise(number('s', 0, 10, 'Transport delay'), 0, IDEAL),
      scale_error_pct: otherwise(number('%', -50, 50, 'Measured speed over true speed, less one'), 0, IDEAL),
    }),
  ),
});

export type VehicleFile = z.output<typeof vehicleSchema>;
