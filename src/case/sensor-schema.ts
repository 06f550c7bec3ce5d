import { IDEAL, integer, mapping, number, optional, otherwise } from './fields.ts';

/** From true to measured speed. */
export const sensorSchema = mapping('From true to measured speed', {
  pulses_per_turn: optional(
    integer(1, 100000, 'Pulses of the toothed wheel in one turn'),
    'none',
    'ideal: the speed itself is seen, not pulses',
  ),
  wheel_circumference_m: optional(
    number('m', 0.1, 10, 'Way of the vehicle in one turn of the toothed wheel'),
  ),
  counting_window_s: optional(number('s', 0.001, 10, 'Pulses are counted in a window of this length')),
  timer_resolution_s: optional(
    number('s', 1e-9, 0.1, 'The last period is timed by a clock of this resolution'),
  ),
  noise_sd_kmh: otherwise(number('km/h', 0, 50, 'Standard deviation of the noise of a sample'), 0, IDEAL),
  noise_seed: otherwise(
    integer(0, 4294967295, 'Number that the noise is drawn from'),
    1,
    'not given: the first of them',
  ),
  filter_s: otherwise(number('s', 0, 20, 'First-order filter'), 0, IDEAL),
  delay_s: otherwise(number('s', 0, 10, 'Transport delay'), 0, IDEAL),
  scale_error_pct: otherwise(number('%', -50, 50, 'Measured speed over true speed, less one'), 0, IDEAL),
});
