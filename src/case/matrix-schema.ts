import * as z from 'zod';
import { integer, kmh, line, list, mapping, number, optional, word } from './fields.ts';
import { windFrom, windSpeed } from './weather-schema.ts';

const name = optional(line('Name in tables', 40));

/** Mass of one more person where nothing else is written: that of the rider in motorcycle regulations, from memory [kg]. */
export const PILLION_KG = 75;

export const loadSchema = z
  .union([
    word(['own', 'solo', 'two_up'], 'A load by its name'),
    mapping('A load by its masses', {
      name,
      rider_kg: optional(number('kg', 0, 300, 'Mass of the rider, in place of that of the vehicle file')),
      payload_kg: optional(
        number('kg', 0, 1000, 'Mass of what is carried, in place of that of the vehicle file'),
      ),
      pillion_kg: optional(number('kg', 0, 300, 'Mass of one more person; left out: none')),
    }),
  ])
  .meta({
    description: `own: as the vehicle file has it; solo: its rider and nothing else; two_up: as own, with one more person of ${PILLION_KG} kg`,
  });

const matrixWindSchema = z
  .union([
    word(['own', 'none'], 'The wind of the case, or still air'),
    mapping('A wind; its heights and terrain are those of the wind of the case', {
      name,
      speed_m_s: windSpeed,
      from_deg: windFrom,
    }),
  ])
  .meta({ description: 'A wind' });

/** Combinations that one run can have. */
export const MOST_COMBINATIONS = 240;

/** Lists of which every combination is replayed beside the run of the case itself. */
export const matrixSchema = mapping(
  `Combinations to be judged beside the run itself: every item of a list with every one of the others, at most ${MOST_COMBINATIONS}`,
  {
    loads: optional(list(loadSchema, 1, 20, 'Loads; left out: that of the vehicle file')),
    winds: optional(list(matrixWindSchema, 1, 40, 'Winds; left out: that of the case')),
    directions: optional(
      list(
        word(['there', 'back'], 'Which way the road is driven'),
        1,
        2,
        'Directions; left out: that of the track. What the case says by kilometres stays at its place on the ground',
      ),
    ),
    gears: optional(
      list(integer(1, 20, 'Gear at the start, from 1'), 1, 20, 'Gears; left out: that of the case'),
    ),
    set_speeds_kmh: optional(
      list(kmh('Set speed at the start'), 1, 40, 'Set speeds; left out: that of the case'),
    ),
  },
);
