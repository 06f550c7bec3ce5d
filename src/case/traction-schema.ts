import { mapping, number, otherwise } from './fields.ts';

const GRIP = 'from memory: tyres on good asphalt, dry 0.8 to 1.0, wet 0.4 to 0.7';

/** Grip of the driven rear wheel. */
export const tractionSchema = mapping('Grip of the driven rear wheel, with load transfer, without slip', {
  friction_dry: otherwise(number('', 0.02, 2, 'Greatest coefficient of friction on a dry road'), 0.9, GRIP),
  friction_wet: otherwise(number('', 0.02, 2, 'Greatest coefficient of friction on a wet road'), 0.5, GRIP),
  wheelbase_m: number('m', 0.3, 5, 'Wheelbase'),
  mass_centre_ahead_m: number(
    'm',
    0.01,
    5,
    'Centre of mass ahead of the contact of the rear wheel, as loaded',
  ),
  mass_centre_height_m: number('m', 0.05, 3, 'Height of the centre of mass, as loaded'),
});
