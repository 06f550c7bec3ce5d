import * as z from 'zod';
import { altitudeDerate, driveLag, list, mapping, number, optional, otherwise } from './fields.ts';
import { fuelSchema } from './fuel-schema.ts';

/** Shape of part throttle of a throttle plate, from memory. */
export const PLATE_SHAPE = 3;

const rpm = (words: string) => number('rpm', 50, 30000, words);
const torqueAtSpeed = (words: string) =>
  list(
    mapping('Row', { rpm: rpm('Engine speed, increasing'), nm: number('N m', 0, 2000, words) }),
    2,
    200,
    `${words} over engine speed; between rows on a straight line, beyond the ends constant`,
  );

const parabola = mapping('Torque by the textbook parabola, linear in the throttle', {
  peak_nm: number('N m', 0.1, 2000, 'Greatest torque'),
  peak_rpm: rpm('Engine speed of the greatest torque'),
  falloff: number('', 0, 10, 'Share b that is lost away from it: 1 - b (rpm / peak_rpm - 1)^2'),
});
const fullLoad = mapping('Torque by the full-load curve, with a shape for part throttle', {
  full_load: torqueAtSpeed('Torque at full throttle'),
  part_throttle: optional(
    mapping('How torque goes from closed to full throttle', {
      shape: number(
        '',
        0,
        20,
        'k of s = (1 - e^(-k x)) / (1 - e^(-k)) at throttle x: 0 in proportion to it, 3 to 5 like a throttle plate, steep at small opening',
      ),
      at_rpm: optional(
        rpm(
          'Engine speed of that shape; at another it is k at_rpm / rpm, so that a small opening lets the same air in and gives less torque the faster the engine turns',
        ),
        'no speed',
        'not given: the same shape at every engine speed, as of a throttle by wire that asks for a share of torque',
      ),
    }),
    `a throttle plate of shape ${PLATE_SHAPE} at the engine speed of the greatest torque`,
    'from memory: plates are like shapes of 3 to 5',
  ),
});
const torqueMap = mapping('Torque by a map over engine speed and throttle', {
  map: mapping('Torque map', {
    rpm: list(rpm('Engine speed of a row'), 2, 100, 'Engine speeds, increasing [rpm]'),
    throttle_pct: list(
      number('%', 0, 100, 'Throttle of a column'),
      2,
      50,
      'Throttle openings, increasing, from 0 to 100 [%]',
    ),
    nm: list(
      list(number('N m', -500, 2000, 'Torque'), 2, 50, 'Row at one engine speed [N m]'),
      2,
      100,
      'A row for each engine speed, in it a torque for each throttle; the first of a row is that of closed throttle [N m]',
    ),
  }),
});

/** Keys that an engine has before whatever gearbox. */
export const combustionKeys = {
  torque: z.union([parabola, fullLoad, torqueMap]).meta({ description: 'Torque at the crankshaft' }),
  closed_throttle_drag: optional(
    torqueAtSpeed('Torque that holds the engine back at closed throttle, written positive'),
    'none',
    'not given: nothing holds back at closed throttle, but for what a torque map says of it',
  ),
  fuel_cut: optional(
    mapping('Fuel cut: more drag at closed throttle while no fuel is burnt', {
      above_rpm: rpm('Engine speed above which the fuel is cut'),
      blend_rpm: otherwise(
        number('rpm', 1, 5000, 'It fades in over so much above that speed'),
        200,
        'an assumed round figure',
      ),
      below_throttle_pct: number('%', 0.01, 50, 'Throttle below which the fuel is cut'),
      extra_drag_nm: number('N m', 0, 500, 'Drag that comes on top'),
    }),
    'none',
    'not given: closed throttle holds back without a step',
  ),
  idle_rpm: otherwise(
    rpm('Engine speed that the idle governor keeps'),
    1500,
    'from memory: small four-stroke engines idle at 1300 to 1800 rpm',
  ),
  stall_rpm: optional(
    rpm('Engine speed below which the engine dies'),
    'half of idle_rpm',
    'an assumed round figure: half of the idle speed',
  ),
  rev_limit_rpm: optional(rpm('Engine speed at which full torque ends'), 'none', 'not given: no limiter'),
  rev_limit_band_rpm: otherwise(
    number('rpm', 1, 5000, 'The torque falls to that of closed throttle over so much above it'),
    200,
    'an assumed round figure',
  ),
  engine_inertia_kg_m2: otherwise(
    number('kg m2', 0, 5, 'Moment of inertia of all that turns with the crankshaft'),
    0,
    'ideal: not given',
  ),
  lag_s: driveLag,
  altitude_derate: altitudeDerate,
  fuel: optional(fuelSchema, 'none', 'not given: no account of fuel'),
};

export const wheelRadius = number('m', 0.05, 1.5, 'Rolling radius of the driven wheel');
