import * as z from 'zod';
import { candidateName } from './candidate-schema.ts';
import { fileName, integer, line, list, mapping, optional } from './fields.ts';

/** Rides that one case can show beside its candidates. */
export const MOST_RIDES = 4;

/** Rides that were logged on the road of the case, shown beside its candidates. */
export const loggedRidesSchema = list(
  mapping('A ride that was logged on this road: GPX with times, or CSV with time_s and places', {
    name: candidateName,
    file: fileName,
    track: optional(
      z
        .union([
          line('Name of the track in the file'),
          integer(1, 10000, 'Number of the track in the file, from 1'),
        ])
        .meta({ description: 'Which track of the file, by name or by number from 1' }),
    ),
  }),
  0,
  MOST_RIDES,
  'Rides that were logged on this road, to be laid beside the candidates',
);
