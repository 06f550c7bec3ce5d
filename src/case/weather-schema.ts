import * as z from 'zod';
import { mapping, number, otherwise, word } from './fields.ts';

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

export const windSpeed = number('m/s', 0, 60, 'Mean wind speed');
export const windFrom = number('deg', 0, 360, 'Where it blows from, clockwise from true north');
const windRest = {
  speed_m_s: windSpeed,
  from_deg: windFrom,
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
/** Steady wind. */
export const windSchema = z
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

/** The air: a standard atmosphere, or one density. */
export const airSchema = z
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
