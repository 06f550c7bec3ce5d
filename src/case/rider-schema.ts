import * as z from 'zod';
import {
  integer,
  kind,
  km,
  kmh,
  list,
  mapping,
  NOT_GIVEN,
  number,
  optional,
  otherwise,
  word,
} from './fields.ts';

const braking = (words: string) =>
  otherwise(number('m/s2', 0.1, 12, words), 2, 'unhurried braking, from memory');

/** Something that the rider does, at a place or at a time. */
function act<const Name extends string, Rest extends z.core.$ZodLooseShape>(
  name: Name,
  words: string,
  rest: Rest,
) {
  return [
    mapping(words, { at_km: km('Where, along the driven road'), act: kind(name), ...rest }),
    mapping(words, { at_s: number('s', 0, 1000000, 'When'), act: kind(name), ...rest }),
  ] as const;
}

const actSchema = z
  .union([
    ...act('engage', 'Hold takes over at the present speed', {}),
    ...act('resume', 'Hold takes over at the set speed that it had', {}),
    ...act('tap', 'Taps up or down', {
      taps: integer(-100, 100, 'How many: up, or negative, down'),
    }),
    ...act('override', 'The grip is opened further than the controller asks', {
      throttle_pct: number('%', 0, 100, 'How far'),
      for_s: number('s', 0.1, 3600, 'For how long'),
    }),
    ...act('cancel', 'The switch ends hold', {
      // biome-ignore lint/suspicious/noThenProperty: a key of the file, never a promise
      then: otherwise(
        word(['holds_speed', 'coasts'], 'What the rider does by hand after it'),
        'holds_speed',
        NOT_GIVEN,
      ),
    }),
    ...act('brake', 'The brake ends hold', {
      to_kmh: kmh('True speed that the rider brakes to, and goes on at by hand'),
      brake_m_s2: braking('How hard, drag and slope included; whether the tyres carry it is not asked'),
    }),
    ...act('ride', 'The switch ends hold, if it is on, and the rider goes on by hand at another speed', {
      to_kmh: kmh('True speed that the rider goes on at'),
      gains_m_s2: otherwise(
        number('m/s2', 0.05, 10, 'Greatest acceleration on the way there'),
        1,
        'unhurried riding, an assumption',
      ),
    }),
    ...act('clutch', 'The clutch is pulled without a change of gear: hold ends', {
      for_s: number('s', 0.1, 60, 'For how long'),
    }),
  ])
  .meta({ description: 'Something that the rider does' });

/** The rider who stands by, and what the rider does with the unit on the way. */
export const riderSchema = mapping('The rider who stands by', {
  brakes_above_kmh: optional(
    number('km/h', 0.1, 200, 'Overspeed that the rider holds with the brake'),
    'none',
    'not given: the rider does not brake',
  ),
  resumes_after_s: optional(
    number('s', 0, 3600, 'The rider resumes a hold that a rule of the unit has ended, this long after'),
  ),
  does: otherwise(list(actSchema, 0, 1000, 'What the rider does on the way, in order'), [], null),
  bends: optional(
    mapping('The rider brakes for bends, which ends hold, and resumes after them', {
      max_lateral_m_s2: otherwise(
        number('m/s2', 0.2, 15, 'Greatest lateral acceleration that the rider rides'),
        2.5,
        'the middle of unhurried riding, 2 to 3 m/s2, from memory',
      ),
      brake_m_s2: braking('How hard the rider brakes for a bend, drag and slope included'),
      resumes_after_s: otherwise(
        number('s', 0, 600, 'From the end of a bend to where the rider resumes, at the speed of the bend'),
        2,
        'an assumption',
      ),
      shortest_hold_s: otherwise(
        number('s', 0, 3600, 'Between bends nearer than this, at the set speed, the rider does not resume'),
        20,
        'an assumption',
      ),
    }),
  ),
});
