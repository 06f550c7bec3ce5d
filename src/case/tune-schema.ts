import { FIGURES } from '../study/figure-table.ts';
import { candidateName } from './candidate-schema.ts';
import { integer, kmh, list, mapping, NOT_GIVEN, number, optional, otherwise, word } from './fields.ts';
import { loadSchema } from './matrix-schema.ts';
import { whereSchema } from './requirement-schema.ts';

/** Ways to gains that are proposed, in the order of the proposals. */
export const TUNE_DESIGNS = ['settling', 'droop', 'simc', 'rejection', 'schedule', 'road'] as const;

/** Figures of which less or more is better: what a cost may be made of. The account of the numbers is none of the road. */
const COST_FIGURES = FIGURES.filter(({ better, name }) => better !== null && name !== 'ledger_residual').map(
  ({ name }) => name,
) as [string, ...string[]];

const costTerm = mapping('A figure and what it weighs', {
  figure: word(COST_FIGURES, 'Figure of the table; one of which more is better counts negatively'),
  where: otherwise(whereSchema, 'all', 'a hold is lived with on the whole road'),
  weight: number('', 0.000001, 1000000, 'Weight of one unit of the figure'),
});

/** What `tune` looks for. */
export const tuneSchema = mapping('What ridgehold tune looks for; a run does not read it', {
  max_sensitivity: otherwise(
    number('', 1.1, 4, 'Greatest sensitivity that gains may have at any operating point'),
    1.7,
    'usual: 1.4 to 2 (Astrom and Hagglund, Advanced PID Control, 2006, from memory)',
  ),
  cost: otherwise(
    list(costTerm, 1, 20, 'What gains shall make small on the road: the sum of these'),
    [
      { figure: 'rms_error_kmh', where: 'all', weight: 1 },
      { figure: 'throttle_travel_pct_per_km', where: 'all', weight: 0.02 },
    ],
    'a start, chosen here: 50 %/km of throttle travel weigh as much as 1 km/h',
  ),
  speeds_kmh: optional(
    list(kmh('True speed'), 1, 12, 'Speeds of the grid of operating points'),
    'the set speeds of the case and of its matrix',
    NOT_GIVEN,
  ),
  grades_pct: otherwise(
    list(number('%', -40, 40, 'Grade'), 1, 12, 'Grades of the grid'),
    [-4, 0, 4],
    'level, and a hill to both sides',
  ),
  headwinds_m_s: otherwise(
    list(
      number('m/s', -30, 30, 'Headwind at the height of the rider; negative: from behind'),
      1,
      12,
      'Winds of the grid',
    ),
    [0],
    'still air: the points of the route have the wind of the case as it is there',
  ),
  gears: optional(
    list(integer(1, 20, 'Gear, from 1'), 1, 20, 'Gears of the grid'),
    'those of the case and of its matrix',
    NOT_GIVEN,
  ),
  loads: optional(
    list(loadSchema, 1, 12, 'Loads of the grid'),
    'those of the matrix, or that of the vehicle file',
    NOT_GIVEN,
  ),
  like: optional(
    candidateName,
    'the first PI candidate',
    'proposals have its sample time, delay, anti-windup and weight of the set speed',
  ),
  designs: otherwise(
    list(word(TUNE_DESIGNS, 'A way to gains'), 1, 6, 'What is proposed'),
    [...TUNE_DESIGNS],
    NOT_GIVEN,
  ),
  grade_step_pct: otherwise(number('%', 0.1, 40, 'Step of grade of the droop design'), 6, 'a usual hill'),
  damping: otherwise(number('', 0.1, 5, 'Damping ratio of the droop design'), 0.8, 'usual, 0.7 to 1'),
  overshoot_pct: otherwise(number('%', 0, 60, 'Overshoot of the settling design'), 1, 'hardly to be seen'),
  most_replays: otherwise(
    integer(20, 2000, 'Replays of the road that the tuning on it may take'),
    160,
    'enough for 1 % of the gains',
  ),
});
