import * as z from 'zod';
import { combustionKeys, wheelRadius } from './combustion-schema.ts';
import { integer, kind, list, mapping, NOT_GIVEN, number, optional, otherwise } from './fields.ts';

const rpm = (words: string) => number('rpm', 50, 30000, words);

const gearboxSchemas = [
  mapping('One gear for the whole run', { kind: kind('fixed') }),
  mapping('The rider shifts by hand or foot, and that cancels the hold', {
    kind: kind('clutch'),
    open_s: otherwise(
      number('s', 0.02, 10, 'Time with the clutch open and the throttle closed'),
      0.5,
      'from memory: an unhurried change of gear takes about half a second',
    ),
    resume_s: otherwise(
      number('s', 0, 60, 'Time from there until the rider lets the hold resume'),
      2,
      'an assumed round figure',
    ),
  }),
  mapping('It shifts by itself, and the hold goes on', {
    kind: kind('automatic'),
    shift_lines: list(
      mapping('Row', {
        throttle_pct: number('%', 0, 100, 'Throttle, increasing'),
        up_rpm: rpm('Engine speed above which it shifts up'),
        down_rpm: rpm('Engine speed below which it shifts down'),
      }),
      1,
      50,
      'Shift lines over the throttle; between rows on a straight line, beyond the ends constant',
    ),
    gap_s: otherwise(
      number('s', 0, 5, 'Time without torque in each shift'),
      0.3,
      'from memory: 0.2 to 0.4 s of an automated gearbox',
    ),
    dwell_s: otherwise(
      number('s', 0, 60, 'No shift within this time of the last'),
      2,
      'an assumed round figure',
    ),
  }),
] as const;

/** An engine with gears. */
export const engineSchema = mapping('Combustion engine with gears', {
  kind: kind('engine'),
  ...combustionKeys,
  driveline_efficiency_pct: otherwise(
    number('%', 10, 100, 'Power at the wheel over power of the engine'),
    94,
    'from memory: gearbox and chain, 92 to 95 %',
  ),
  gear_ratios: list(number('', 0.05, 200, 'Ratio of a gear'), 1, 20, 'Ratios, first gear first, decreasing'),
  primary_ratio: otherwise(
    number('', 0.05, 50, 'Ratio from crankshaft to gearbox'),
    1,
    'not given: part of gear_ratios',
  ),
  final_ratio: otherwise(
    number('', 0.05, 50, 'Ratio from gearbox to wheel'),
    1,
    'not given: part of gear_ratios',
  ),
  wheel_radius_m: wheelRadius,
  gear: optional(integer(1, 20, 'Gear that is engaged, from 1'), 'highest', 'not given: the highest gear'),
  gearbox: otherwise(
    z.union(gearboxSchemas).meta({ description: 'How gears change' }),
    { kind: 'fixed' },
    NOT_GIVEN,
  ),
});
