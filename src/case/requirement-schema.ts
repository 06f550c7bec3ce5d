import * as z from 'zod';
import { candidateName } from './candidate-schema.ts';
import { fieldNotes, km, line, list, mapping, number, optional, otherwise, word } from './fields.ts';

/** Part of the road that a figure is taken over. */
export const whereSchema = z
  .union([
    word(['holdable', 'all'], 'The stretches that the drive can hold, or the whole road'),
    mapping('A stretch', {
      from_km: km('Start, along the driven road'),
      to_km: km('End, along the driven road'),
    }),
  ])
  .meta({ description: 'Where it applies' });
const requirementRest = {
  id: z
    .string()
    .regex(/^[A-Za-z0-9][A-Za-z0-9_.-]{0,40}$/)
    .meta({ description: 'Letters, digits, hyphens, dots' })
    .register(fieldNotes, {
      allowed: 'letters, digits, hyphens and dots, up to 41, a letter or digit first',
    }),
  figure: line('Name in the table of figures', 60),
  band_kmh: optional(number('km/h', 0.05, 50, 'Half-width of the band of a figure that has one')),
  where: otherwise(whereSchema, 'holdable', 'a hill beyond the drive is no fault of the design'),
  candidates: optional(list(candidateName, 1, 50, 'Names of the candidates it is for')),
};
const limit = (words: string) => number('', -1000000, 1000000, words);

/** A written requirement: a figure and one limit. */
export const requirementSchema = z.union([
  mapping('Lower limit', {
    ...requirementRest,
    at_least: limit('Least value, in the unit of the figure'),
  }),
  mapping('Upper limit', {
    ...requirementRest,
    at_most: limit('Greatest value, in the unit of the figure'),
  }),
]);
