import { integerGains } from '../control/integer-gains.ts';
import type { IntegerSetup } from '../control/setup.ts';
import { powerOfTwo } from '../control/whole-numbers.ts';
import { InputError } from '../problems/input-error.ts';
import { fromPerKmh } from '../units/convert.ts';
import type { CandidateFile } from './case-schema.ts';
import type { CandidateContext, GainsOfCandidate } from './gains-of.ts';
import { integralRuleOf } from './pid-of.ts';
import { placeOf } from './yaml-source.ts';

type IntegerFile = Extract<CandidateFile, { kind: 'integer' }>;

/**
 * A controller in whole numbers, in SI.
 *
 * @throws InputError where a gain's count is beyond a word
 */
export function integerOf(
  file: IntegerFile,
  { kp, ki }: GainsOfCandidate,
  context: CandidateContext,
): IntegerSetup {
  const setup: IntegerSetup = {
    kind: 'integer',
    kp,
    ki,
    sample: file.sample_s,
    computingDelay: file.computing_delay_s,
    integration: file.integration,
    wordBits: file.word_bits,
    productBits: file.product_bits,
    speedScale: fromPerKmh(file.speed_counts_per_kmh),
    throttleScale: file.full_throttle_counts,
    gainDivisor: file.gain_divisor,
    integralOf: file.integral_of,
    integralDivisor: file.integral_divisor,
    scaling: file.scaling,
    rounding: file.rounding,
    overflow: file.overflow,
    integralRule: integralRuleOf(file.anti_windup),
    ramp: file.setpoint_ramp_m_s2 ?? null,
  };
  const most = powerOfTwo(file.word_bits - 1) - 1;
  const counts = integerGains(setup);
  const [name, count] = counts.kp > counts.ki ? ['kp', counts.kp] : ['ki', counts.ki];
  if (count > most)
    throw new InputError({
      code: 'out-of-range',
      place: placeOf(context.document.source, ['candidates', context.index, 'gain_divisor']),
      message: `makes the count of ${name} greater than a word of ${file.word_bits} bits`,
      found: `${count}`,
      allowed: `up to ${most}: a smaller divisor, coarser counts of throttle, or a longer word`,
    });
  return setup;
}
