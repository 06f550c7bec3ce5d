import * as z from 'zod';
import { PUBLISHED_ROAD_LOADS } from '../vehicle/published-road-load.ts';
import { IDEAL, list, mapping, number, optional, otherwise, word } from './fields.ts';

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
const tyreRoadLoad = mapping('Road load by drag area and the pressure of motorcycle tyres', {
  cda_m2: number('m2', 0, 5, 'Drag area without yaw'),
  ...yaw,
  tyre_pressure_bar: number(
    'bar',
    1,
    4,
    'Pressure of both tyres; rolling coefficient 0.0085 + 0.018 / p + 1.59e-6 V2 / p (J. Bradley, The Racing Motorcycle, 1996), below 165 km/h',
  ),
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

const publishedRoadLoad = mapping('Road load that a regulation publishes for a motorcycle of a mass', {
  published: word(
    PUBLISHED_ROAD_LOADS,
    'Table of the regulation; that of UN GTR 2, for a roller on which the driven tyre adds its own loss, is on the low side',
  ),
  test_mass_kg: optional(
    number('kg', 20, 3000, 'Mass of the row that is taken'),
    'mass of the vehicle',
    'not given: the row of this vehicle as loaded',
  ),
  ...yaw,
});

/** Road load: by coefficients, by tyre pressure, with a table over yaw, as measured in the form of regulations, or as one publishes it. */
export const roadLoadSchema = z
  .union([coefficientRoadLoad, tyreRoadLoad, tableRoadLoad, regulationRoadLoad, publishedRoadLoad])
  .meta({ description: 'Road load' });
