import * as z from 'zod';
import { km, list, mapping, number, otherwise, word } from './fields.ts';

const rest = {
  speed_sensor: word(
    ['nothing', 'last_value', 'double'],
    'What the controller is told: no pulses, the last value, or twice the speed',
  ),
  for_s: number('s', 0.01, 100000, 'For how long'),
};

/** What the speed sensor does wrong on the way. */
export const faultsSchema = otherwise(
  list(
    z.union([
      mapping('Fault from a place on', { at_km: km('Where, along the driven road'), ...rest }),
      mapping('Fault from a time on', { at_s: number('s', 0, 1000000, 'When'), ...rest }),
    ]),
    0,
    1000,
    'What the speed sensor does wrong on the way, in order',
  ),
  [],
  null,
);
