import * as z from 'zod';
import type { AntiWindup, ControllerSetup } from '../control/setup.ts';
import {
  block,
  fieldNotes,
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
import { vehicleSchema } from './vehicle-schema.ts';

const kmh = (words: string) => number('km/h', 1, 300, words);
const km = (words: string) => number('km', 0, 5000, words);

const fileName = line('File name, seen from the folder of this file', 1000);

const pieceRest = {
  grade_pct: number('%', -60, 60, 'Grade, positive uphill: rise over horizontal run'),
  heading_deg: optional(number('deg', 0, 360, 'Heading, clockwise from true north')),
  headwind_m_s: optional(number('m/s', -60, 60, 'Wind against travel')),
};
const direction = otherwise(
  word(['there', 'back', 'both'], 'Which way the road is driven'),
  'there',
  'as written',
);
const fileTrack = mapping('A road from a track file', {
  file: fileName,
  track: optional(
    z
      .union([
        line('Name of the track in the file'),
        z.int().min(1).max(10000).meta({ description: 'Number of the track in the file, from 1' }),
      ])
      .meta({ description: 'Which track of the file, by name or by number from 1' }),
  ),
  trim_ends_m: otherwise(
    number('m', 0, 50000, 'Length left out at both ends of the track'),
    0,
    'nothing is left out',
  ),
  direction,
});
const profileTrack = mapping('A written road', {
  profile: list(
    z.union([
      mapping('Piece by length', { length_m: number('m', 0.1, 1000000, 'Horizontal length'), ...pieceRest }),
      mapping('Piece by time', { for_s: number('s', 0.01, 100000, 'Duration'), ...pieceRest }),
    ]),
    1,
    10000,
    'Pieces of constant grade, one after the other, all by length or all by time',
  ),
  vertical_curve_m: otherwise(
    number('m', 0, 2000, 'Length of the curve over each change of grade'),
    0,
    'the grade steps',
  ),
  direction,
  start_elevation_m: otherwise(number('m', -450, 6000, 'Elevation of the first point'), 0, 'sea level'),
});

const stretch = {
  from_km: km('Start, along the track of the file'),
  to_km: km('End, along the track of the file'),
};
const roadSchema = mapping('From track to road', {
  grid_m: otherwise(
    number('m', 0.5, 100, 'Spacing of the road grid'),
    10,
    'half the spacing of common tracks, fine against the smoothing',
  ),
  elevation_source: otherwise(
    word(
      ['exact', 'lidar', 'barometric', 'gnss', 'dem30', 'dem90'],
      'Where the elevation comes from: sets smoothing and grade uncertainty',
    ),
    'gnss',
    'not given: the source with the larger errors of those that riders record',
  ),
  smoothing_wavelength_m: optional(
    number('m', 20, 5000, 'Wavelength at which smoothing keeps one half'),
    'by elevation_source',
    NOT_GIVEN,
  ),
  masks: otherwise(
    list(
      mapping('Stretch', { ...stretch, reason: optional(line('Why')) }),
      0,
      1000,
      'Stretches whose elevation is not to be believed: bridges, tunnels',
    ),
    [],
    null,
  ),
  shelter: otherwise(
    list(
      mapping('Stretch', {
        ...stretch,
        factor: number(
          '',
          0,
          1,
          'What is left of the wind speed: 1 open, 0.7 hedged, 0.3 to 0.5 wood or town',
        ),
        reason: optional(line('Why')),
      }),
      0,
      1000,
      'Sheltered stretches',
    ),
    [],
    null,
  ),
});

/** Roughness lengths [m] of the classes of Davenport as revised by Wieringa (1992), J. Wind Eng. Ind. Aerodyn. 41, 357-368. */
export const TERRAIN_ROUGHNESS = {
  sea: 0.0002,
  smooth: 0.005,
  open: 0.03,
  roughly_open: 0.1,
  rough: 0.25,
  very_rough: 0.5,
  closed: 1,
} as const;

const windRest = {
  speed_m_s: number('m/s', 0, 60, 'Mean wind speed'),
  from_deg: number('deg', 0, 360, 'Where it blows from, clockwise from true north'),
  height_m: otherwise(
    number('m', 0.5, 200, 'Height at which it was measured'),
    10,
    'height of weather stations (WMO No. 8)',
  ),
  rider_height_m: otherwise(
    number('m', 0.3, 5, 'Height of the middle of rider and vehicle'),
    1.2,
    'middle of a seated rider',
  ),
};
const windSchema = z
  .union([
    mapping('Steady wind over a class of terrain', {
      ...windRest,
      terrain: otherwise(
        word(
          ['sea', 'smooth', 'open', 'roughly_open', 'rough', 'very_rough', 'closed'],
          'Terrain by the classes of Davenport and Wieringa',
        ),
        'open',
        'the terrain of weather stations (WMO No. 8)',
      ),
    }),
    mapping('Steady wind over terrain of a given roughness', {
      ...windRest,
      roughness_m: number('m', 0.00001, 2, 'Roughness length of the terrain'),
    }),
  ])
  .meta({ description: 'Steady wind' });

const airSchema = z
  .union([
    mapping('Standard atmosphere, shifted to the weather', {
      temperature_c: otherwise(number('deg C', -40, 55, 'Temperature at sea level'), 15, 'ISO 2533:1975'),
      sea_level_pressure_hpa: otherwise(
        number('hPa', 850, 1090, 'Pressure at sea level'),
        1013.25,
        'ISO 2533:1975',
      ),
    }),
    mapping('The same air everywhere', { density_kg_m3: number('kg/m3', 0.3, 2, 'Air density') }),
  ])
  .meta({ description: 'Air' });

const changeRest = {
  set_speed_kmh: kmh('New set speed'),
  ramp_m_s2: optional(number('m/s2', 0.01, 20, 'Rate at which the reference goes there')),
};
const holdSchema = mapping('The speed to hold', {
  set_speed_kmh: kmh('Set speed'),
  set_speed_is: otherwise(
    word(['true_speed', 'indicated'], 'What the set speed means'),
    'true_speed',
    NOT_GIVEN,
  ),
  start_speed_kmh: optional(
    number('km/h', 1, 300, 'Speed at the first point'),
    'set_speed_kmh',
    'the run starts at the set speed',
  ),
  changes: otherwise(
    list(
      z.union([
        mapping('Change at a place', { at_km: km('Where, along the driven road'), ...changeRest }),
        mapping('Change at a time', { at_s: number('s', 0, 1000000, 'When'), ...changeRest }),
      ]),
      0,
      1000,
      'Changes of the set speed, in order',
    ),
    [],
    null,
  ),
});

const antiWindupSchemas = {
  none: mapping('The integral runs on at a limit', { kind: kind('none') }),
  conditional: mapping('The integral stands still at a limit', { kind: kind('conditional') }),
  back_calculation: mapping('The integral is pulled back at a limit', {
    kind: kind('back_calculation'),
    tracking_s: number('s', 0.01, 1000, 'Tracking time'),
  }),
} satisfies Record<AntiWindup['kind'], z.ZodType>;

/** Lower case, digits, hyphens: a candidate's name becomes part of a file name. */
const name = z
  .string()
  .regex(/^[a-z0-9][a-z0-9-]{0,40}$/)
  .meta({ description: 'Name: lower-case letters, digits and hyphens' })
  .register(fieldNotes, { allowed: 'lower-case letters, digits and hyphens, up to 41, not a hyphen first' });
const candidateName = optional(name);
const throttle = (words: string) => number('%', -100, 100, words);

const lockedLevel = mapping('Throttle locked at what holds the set speed on the level in still air', {
  name: candidateName,
  kind: kind('locked'),
  throttle: otherwise(
    word(
      ['level'],
      'Locked again at each change of the set speed',
      'level; a figure goes under throttle_pct',
    ),
    'level',
    NOT_GIVEN,
  ),
});
const lockedGiven = mapping('Throttle locked at a given value', {
  name: candidateName,
  kind: kind('locked'),
  throttle_pct: throttle('Throttle; below 0 only where the drive regenerates'),
});

const piRest = {
  name: candidateName,
  kind: kind('pi'),
  sample_s: otherwise(
    number('s', 0.0005, 2, 'Sample time'),
    0.02,
    'a usual period of a speed loop, 10 to 100 ms',
  ),
  computing_delay_s: otherwise(number('s', 0, 2, 'From sample to command'), 0, 'ideal: not given'),
  integration: otherwise(
    word(['forward', 'backward'], 'When the integral is added up: after the command, or before'),
    'forward',
    NOT_GIVEN,
  ),
  setpoint_ramp_m_s2: optional(
    number('m/s2', 0.01, 20, 'Rate of the reference after a change of set speed'),
    'step',
    NOT_GIVEN,
  ),
  anti_windup: otherwise(
    z
      .union([antiWindupSchemas.none, antiWindupSchemas.conditional, antiWindupSchemas.back_calculation])
      .meta({ description: 'What the integral does while the command is at a limit' }),
    { kind: 'conditional' },
    'needs no figure of its own',
  ),
};
const weight = number('', 0, 1, 'Weight of the set speed in the proportional part');
const typedWeight = otherwise(weight, 1, 'the common form: P on the error');
const kp = (least: number) => number('% per km/h', least, 10000, 'Proportional gain');

const settlingDesign = mapping('Gains from how the set speed is reached', {
  settling_s: number('s', 0.1, 1000, 'Time after which the speed stays within 2 % of a step'),
  overshoot_pct: number('%', 0, 60, 'Overshoot of a step'),
  at_kmh: optional(kmh('Speed of the operating point'), 'hold.set_speed_kmh', NOT_GIVEN),
});
const droopDesign = mapping('Gains from the hill', {
  droop_kmh: number('km/h', 0.05, 50, 'Greatest loss of speed on the step of grade'),
  grade_step_pct: number('%', 0.1, 40, 'Step of grade'),
  damping: number('', 0.1, 5, 'Damping ratio'),
  at_kmh: optional(kmh('Speed of the operating point'), 'hold.set_speed_kmh', NOT_GIVEN),
});
const piDesigned = mapping('PI with designed gains', {
  ...piRest,
  design: z.union([settlingDesign, droopDesign]).meta({ description: 'What the gains are worked out from' }),
  setpoint_weight: otherwise(weight, 0, 'designed gains: the zero of P on the error is left out'),
});
const piByTime = mapping('PI by gain and integral time', {
  ...piRest,
  kp_pct_per_kmh: kp(0.000001),
  ti_s: number('s', 0.01, 100000, 'Integral time'),
  setpoint_weight: typedWeight,
});
const piByGain = mapping('PI by two gains', {
  ...piRest,
  kp_pct_per_kmh: kp(0),
  ki_pct_per_kmh_s: number('% per km/h s', 0, 10000, 'Integral gain'),
  setpoint_weight: typedWeight,
});

const candidateSchemas = {
  locked: [lockedLevel, lockedGiven],
  pi: [piDesigned, piByTime, piByGain],
} as const satisfies Record<ControllerSetup['kind'], readonly z.ZodType[]>;

const where = z
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
  where: otherwise(where, 'holdable', 'a hill beyond the drive is no fault of the design'),
  candidates: optional(list(name, 1, 50, 'Names of the candidates it is for')),
};
const limit = (words: string) => number('', -1000000, 1000000, words);

/** The case file. The one source of its type, its checks and its JSON Schema. */
export const caseSchema = mapping(
  'A case: a road, a vehicle, a speed to hold, the candidates that shall hold it',
  {
    title: optional(line('Title of the report')),
    track: z.union([fileTrack, profileTrack]).meta({ description: 'The road' }),
    road: block(roadSchema),
    wind: optional(windSchema, 'none', 'not given: still air'),
    air: block(airSchema),
    vehicle: z
      .union([fileName, vehicleSchema])
      .meta({ description: 'File name of a vehicle, or the vehicle itself' }),
    hold: holdSchema,
    rider: block(
      mapping('The rider who stands by', {
        brakes_above_kmh: optional(
          number('km/h', 0.1, 200, 'Overspeed that the rider holds with the brake'),
          'none',
          'not given: the rider does not brake',
        ),
      }),
    ),
    scheme: otherwise(word(['exact', 'fast'], 'How the plant is stepped'), 'exact', NOT_GIVEN),
    candidates: list(
      z.union([...candidateSchemas.locked, ...candidateSchemas.pi]),
      1,
      50,
      'What drives the throttle',
    ),
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
    requirements: otherwise(
      list(
        z.union([
          mapping('Lower limit', {
            ...requirementRest,
            at_least: limit('Least value, in the unit of the figure'),
          }),
          mapping('Upper limit', {
            ...requirementRest,
            at_most: limit('Greatest value, in the unit of the figure'),
          }),
        ]),
        0,
        200,
        'Written requirements',
      ),
      [],
      null,
    ),
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
