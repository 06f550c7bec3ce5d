import * as z from 'zod';
import {
  IDEAL,
  integer,
  kind,
  kmh,
  list,
  mapping,
  NOT_GIVEN,
  number,
  optional,
  otherwise,
  word,
} from './fields.ts';

const factors = (words: string) => list(number('', 0, 1000, 'Factor'), 1, 40, words);

const deadBand = mapping('Errors that count as none', {
  half_width_kmh: number('km/h', 0.01, 20, 'Half of its width'),
  inside: otherwise(
    word(['stands', 'runs_on'], 'What the integral does inside of it; to run on is a slip'),
    'stands',
    NOT_GIVEN,
  ),
});

const schedule = mapping('Factors on the gains over the measured speed, straight between its corners', {
  at_kmh: list(kmh('Speed of a corner'), 1, 40, 'Corners, in increasing order'),
  rows: list(
    mapping('Factors in a gear', {
      gear: optional(integer(1, 20, 'Gear, counted from 1; left out: every gear without a row of its own')),
      factor: factors('Factor on the gains at each corner'),
      ki_factor: optional(factors('Factor on the integral gain at each corner; left out: as the others')),
    }),
    1,
    21,
    'Rows by gear',
  ),
});

const accelerometer = mapping('An accelerometer along the vehicle, less the measured acceleration', {
  kind: kind('accelerometer'),
  filter_hz: otherwise(
    number('Hz', 0.02, 50, 'Corner of its low-pass'),
    0.5,
    'a usual low-pass of such an estimate, 0.5 to 1 Hz',
  ),
  pitch_error_deg: otherwise(number('deg', -10, 10, 'By how much it is mounted too steep'), 0, IDEAL),
});
const knownRoad = mapping('The road is known', {
  kind: kind('known_road'),
  preview_s: otherwise(number('s', 0, 20, 'How far ahead it looks, at the speed now'), 0, NOT_GIVEN),
});

const gradeFrom = z
  .union([accelerometer, knownRoad])
  .meta({ description: 'Where the controller has the grade from' });

const feedforward = z
  .union([
    mapping('Throttle for the drag at the reference', { of: kind('drag') }),
    mapping('Throttle for the grade', { of: kind('grade'), grade_from: gradeFrom }),
    mapping('Throttle for both', { of: kind('drag_and_grade'), grade_from: gradeFrom }),
  ])
  .meta({ description: 'Throttle by a table of the vehicle, in still air at sea level' });

/** What PI and its family may have besides gains. */
export const familyFields = {
  dead_band: optional(deadBand),
  rate_limit_pct_per_s: optional(number('%/s', 0.1, 100000, 'Greatest rate of the command')),
  schedule: optional(schedule),
  feedforward: optional(feedforward),
  observer: optional(
    mapping('Takes back what a model of the vehicle cannot explain of the motion', {
      filter_hz: otherwise(
        number('Hz', 0.005, 5, 'Corner of its filter'),
        0.2,
        'usual for a vehicle, 0.1 to 0.3 Hz',
      ),
    }),
  ),
  model_mass_kg: optional(
    number(
      'kg',
      20,
      5000,
      'Mass that feedforward and observer reckon with, whatever is loaded; left out: that of the vehicle in its file',
    ),
  ),
} as const;

/** Keys of the family, beside which a candidate is more than a plain PI. */
export const FAMILY_KEYS = [
  'dead_band',
  'rate_limit_pct_per_s',
  'schedule',
  'feedforward',
  'observer',
] as const satisfies readonly (keyof typeof familyFields)[];
