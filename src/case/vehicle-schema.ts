import type * as z from 'zod';
import { actuatorSchema } from './actuator-schema.ts';
import { driveSchema } from './drive-schemas.ts';
import { block, line, mapping, number, optional, otherwise } from './fields.ts';
import { roadLoadSchema } from './road-load-schema.ts';
import { sensorSchema } from './sensor-schema.ts';
import { tractionSchema } from './traction-schema.ts';

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

/** The vehicle file. The one source of its type, its checks and its JSON Schema. */
export const vehicleSchema = mapping('A vehicle', {
  name: optional(line('Name for the report', 100)),
  mass: massSchema,
  road_load: roadLoadSchema,
  drive: optional(driveSchema, 'none', 'not given: the vehicle can only coast'),
  actuator: block(actuatorSchema),
  speed_sensor: block(sensorSchema),
  traction: optional(tractionSchema, 'none', 'not given: the grip of the driven wheel is not looked at'),
});

export type VehicleFile = z.output<typeof vehicleSchema>;
