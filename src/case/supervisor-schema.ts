import { block, kmh, mapping, number, optional, otherwise, word } from './fields.ts';

const forSome = (seconds: number) =>
  otherwise(number('s', 0, 600, 'For how long, without a break'), seconds, 'an assumption');

/** The rules of the speed-hold unit itself. A rule that is not written is none. */
export const supervisorSchema = mapping(
  'Rules by which the speed-hold unit takes over, ends hold and comes back',
  {
    lowest_speed_kmh: optional(
      kmh('Below this measured speed hold ends, and cannot be engaged'),
      'none',
      'not given: no such rule (units in use have 30 to 50 km/h, from memory)',
    ),
    too_slow: optional(
      mapping('Hold ends when the speed stays too far below the set speed', {
        below_set_kmh: otherwise(
          number('km/h', 0.5, 200, 'How far below the set speed'),
          20,
          'the middle of what units in use have, 15 to 25 km/h, from memory',
        ),
        for_s: forSome(1),
      }),
      'none',
      'not given: no such rule',
    ),
    too_fast: optional(
      mapping('Hold ends when the speed stays too far above the set speed', {
        above_set_kmh: otherwise(
          number('km/h', 0.5, 200, 'How far above the set speed'),
          20,
          'as far as below it, an assumption',
        ),
        for_s: forSome(1),
      }),
      'none',
      'not given: no such rule',
    ),
    believable_m_s2: optional(
      number('m/s2', 0.5, 1000, 'Hold ends where the measured speed changes faster than this'),
      'none',
      'not given: the sensor is believed whatever it says',
    ),
    resume_ramp_m_s2: otherwise(
      number(
        'm/s2',
        0.01,
        20,
        'Rate at which the reference goes from the speed to the set speed at a resume',
      ),
      0.7,
      'the middle of what is usual, 0.5 to 1 m/s2, from memory',
    ),
    tap_kmh: otherwise(
      number('km/h', 0.1, 50, 'What one tap changes the set speed by'),
      1,
      'usual, from memory',
    ),
    tap_ramp_m_s2: optional(
      number('m/s2', 0.01, 20, 'Rate at which the reference goes there'),
      'none',
      "not given: the candidate's own, as for any change of the set speed",
    ),
    override: block(
      mapping('While the grip asks for more than the controller', {
        integral: otherwise(
          word(['held', 'runs'], 'Whether the integral stands still meanwhile'),
          'held',
          'usual, from memory',
        ),
        reentry_kmh: otherwise(
          number('km/h', 0.05, 50, 'Hold is back once the speed is within this of the set speed'),
          1.5,
          'the middle of what is usual, 1 to 2 km/h, from memory',
        ),
      }),
    ),
  },
);
