import * as z from 'zod';
import { fileName, km, line, list, mapping, NOT_GIVEN, number, optional, otherwise, word } from './fields.ts';

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
/** From track to road. */
export const roadSchema = mapping('From track to road', {
  grid_m: otherwise(
    number('m', 0.5, 100, 'Spacing of the road grid'),
    10,
    'fine against every smoothing wavelength',
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
  surface: optional(word(['dry', 'wet'], 'State of the surface, for a vehicle with traction; left out: dry')),
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

/** The road: from a file, or written. */
export const trackSchema = z.union([fileTrack, profileTrack]).meta({ description: 'The road' });
