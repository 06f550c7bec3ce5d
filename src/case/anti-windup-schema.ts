import type * as z from 'zod';
import type { IntegralRule } from '../control/setup.ts';
import { kind, mapping, NOT_GIVEN, number, otherwise, word } from './fields.ts';

const rules = {
  none: mapping('The integral runs on at a limit', { kind: kind('none') }),
  conditional: mapping('The integral stands still at a limit', { kind: kind('conditional') }),
  back_calculation: mapping('The integral is pulled back at a limit', {
    kind: kind('back_calculation'),
    tracking_s: number('s', 0.01, 1000, 'Tracking time'),
  }),
  clamping: mapping('The integral keeps to what the other parts leave of the range', {
    kind: kind('clamping'),
  }),
  cap: mapping('The integral is kept between two ends of one size', {
    kind: kind('integral_cap'),
    cap_pct: number('%', 0, 100000, 'Its size'),
    against: otherwise(
      word(
        ['throttle', 'summed_error'],
        'What it is compared with: the integral in throttle, or, a slip, the sum of the error in km/h s',
      ),
      'throttle',
      NOT_GIVEN,
    ),
  }),
  sign_test: mapping(
    'The integral stands still at a limit where command and error have one sign, a slip where both limits have one sign',
    { kind: kind('sign_test') },
  ),
} satisfies Record<IntegralRule['kind'], z.ZodType>;

const velocityForm = mapping('The command is remembered in place of an integral: nothing winds up', {
  kind: kind('velocity_form'),
});

/** Rules of a controller in floating point, and of one in whole numbers. */
export const antiWindupSchemas = [
  rules.none,
  rules.conditional,
  rules.back_calculation,
  rules.clamping,
  rules.cap,
  rules.sign_test,
  velocityForm,
] as const;
export const integerWindupSchemas = [
  rules.none,
  rules.conditional,
  rules.clamping,
  rules.cap,
  rules.sign_test,
] as const;
