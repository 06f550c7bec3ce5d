import * as z from 'zod';
import { integer, km, kmh, list, mapping, NOT_GIVEN, number, optional, otherwise, word } from './fields.ts';

const changeRest = {
  set_speed_kmh: kmh('New set speed'),
  ramp_m_s2: optional(number('m/s2', 0.01, 20, 'Rate at which the reference goes there')),
};
/** The speed to hold. */
export const holdSchema = mapping('The speed to hold', {
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
  starts: otherwise(
    word(
      ['engaged', 'by_hand'],
      'Whether hold is on at the first point, or the rider rides there by hand until it is engaged',
    ),
    'engaged',
    null,
  ),
  gear: optional(integer(1, 20, 'Gear at the start, from 1, in place of the gear of the vehicle file')),
  shifts: otherwise(
    list(
      mapping('Shift', {
        at_km: km('Where, along the driven road'),
        gear: integer(1, 20, 'New gear, from 1'),
      }),
      0,
      1000,
      'Changes of gear by the rider, in order; for a gearbox with a clutch',
    ),
    [],
    null,
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
