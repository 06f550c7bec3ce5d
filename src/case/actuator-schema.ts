import { IDEAL, list, mapping, number, optional, otherwise, word } from './fields.ts';

/** From command to throttle. */
export const actuatorSchema = mapping('From command to throttle', {
  dead_time_s: otherwise(number('s', 0, 5, 'From command to the first movement'), 0, IDEAL),
  resolution_pct: otherwise(number('%', 0, 20, 'Step to whose multiples the command is rounded'), 0, IDEAL),
  travel_pct: optional(
    list(number('%', -100, 100, 'End stop of the throttle'), 2, 2, 'End stops, the lower first [%]'),
    'none',
    'not given: the whole range of the drive',
  ),
  lag_s: otherwise(number('s', 0, 20, 'First-order lag'), 0, IDEAL),
  rate_limit_pct_per_s: optional(
    number('%/s', 0.1, 100000, 'Fastest movement of the throttle'),
    'none',
    IDEAL,
  ),
  engages_from: optional(
    word(
      ['rider', 'rest'],
      "Where the actuator stands as hold takes over: where the rider's hand has the throttle, or at rest",
    ),
  ),
  slack_pct: otherwise(number('%', 0, 50, 'Whole width of the lost motion'), 0, IDEAL),
});
