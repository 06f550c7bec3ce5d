import * as z from 'zod';
import { candidateSchema } from './candidate-schema.ts';
import { faultsSchema } from './fault-schema.ts';
import {
  block,
  fileName,
  kind,
  line,
  list,
  mapping,
  NOT_GIVEN,
  number,
  optional,
  otherwise,
  word,
} from './fields.ts';
import { holdSchema } from './hold-schema.ts';
import { loggedRidesSchema } from './logged-ride-schema.ts';
import { matrixSchema } from './matrix-schema.ts';
import { requirementSchema } from './requirement-schema.ts';
import { riderSchema } from './rider-schema.ts';
import { roadSchema, trackSchema } from './road-schema.ts';
import { supervisorSchema } from './supervisor-schema.ts';
import { tuneSchema } from './tune-schema.ts';
import { vehicleSchema } from './vehicle-schema.ts';
import { airSchema, windSchema } from './weather-schema.ts';

/** The case file. The one source of its type, its checks and its JSON Schema. */
export const caseSchema = mapping(
  'A case: a road, a vehicle, a speed to hold, the candidates that shall hold it',
  {
    title: optional(line('Title of the report')),
    track: trackSchema,
    road: block(roadSchema),
    wind: optional(windSchema, 'none', 'not given: still air'),
    air: block(airSchema),
    vehicle: z
      .union([fileName, vehicleSchema])
      .meta({ description: 'File name of a vehicle, or the vehicle itself' }),
    hold: holdSchema,
    rider: block(riderSchema),
    supervisor: optional(supervisorSchema),
    faults: faultsSchema,
    scheme: otherwise(word(['exact', 'fast'], 'How the plant is stepped'), 'exact', NOT_GIVEN),
    candidates: list(candidateSchema, 1, 50, 'What drives the throttle'),
    segments: otherwise(
      z
        .union([
          mapping('Segments of equal length', {
            by: kind('length'),
            length_m: otherwise(number('m', 10, 100000, 'Length of a segment'), 500, NOT_GIVEN),
          }),
          mapping('Segments of near constant grade', { by: kind('terrain') }),
        ])
        .meta({ description: 'How the road is cut for the table' }),
      { by: 'length', length_m: 500 },
      NOT_GIVEN,
    ),
    requirements: otherwise(list(requirementSchema, 0, 200, 'Written requirements'), [], null),
    logged_rides: otherwise(loggedRidesSchema, [], null),
    matrix: optional(matrixSchema),
    tune: optional(tuneSchema),
    output: block(
      mapping('What is written', {
        series: otherwise(
          word(['bins', 'full'], 'By distance bins, or every controller sample'),
          'bins',
          NOT_GIVEN,
        ),
        bin_m: otherwise(number('m', 1, 1000, 'Width of the distance bins'), 10, 'the usual grid'),
      }),
    ),
  },
);

export type CaseFile = z.output<typeof caseSchema>;
export type CandidateFile = CaseFile['candidates'][number];
export type RequirementFile = CaseFile['requirements'][number];
export type ActFile = CaseFile['rider']['does'][number];
