import type { Bite } from '../control/bites.ts';
import type { Warning } from '../problems/warning.ts';
import { toKm } from '../units/convert.ts';
import type { CandidateResult } from './run-result.ts';

/** What had a say, and what would mend it. */
const WORDS: Readonly<Record<Bite, { readonly code: string; readonly what: string; readonly mend: string }>> =
  {
    increment_lost: {
      code: 'integral-increment-lost',
      what: 'there was an error and its integral stood still, because Ki e rounds to nothing',
      mend: 'A greater integral_divisor, finer counts, rounding to nearest or integral_of: errors keeps it.',
    },
    overflow: {
      code: 'word-overflow',
      what: 'a word overflowed',
      mend: 'A longer word or product, a smaller gain divisor or coarser counts keeps it in range.',
    },
    sign_test: {
      code: 'anti-windup-sign-test',
      what: 'the anti-windup that asks for signs took the wrong decision, since command and error have other signs than limit and error where both limits have one',
      mend: 'It must ask which limit was reached (conditional).',
    },
    integral_cap: {
      code: 'integral-cap-unit',
      what: 'the cap of the integral, set in per cent against a sum of error, held it',
      mend: 'A cap in throttle must be divided by Ki where the sum of the error is stored.',
    },
    dead_band: {
      code: 'dead-band-integrates',
      what: 'the integral ran on inside the dead band',
      mend: 'The command creeps until the error leaves the band: the integral must stand still inside.',
    },
  };

/** A warning for each slip of a controller that had a say in its run. */
export function biteWarnings({ name, controller, result }: CandidateResult): readonly Warning[] {
  const sample = controller.kind === 'locked' ? 0 : controller.sample;
  return result.bites.map(({ bite, samples, distance }) => {
    const { code, what, mend } = WORDS[bite];
    const share = (samples * sample) / result.endTime;
    const often = `${samples} samples (${share < 0.0995 ? (100 * share).toPrecision(2) : (100 * share).toFixed(0)} % of the time)`;
    return {
      code,
      message: `${name}: in ${often}, first at km ${toKm(distance).toFixed(2)}, ${what}. ${mend}`,
      from: distance,
      to: distance,
    };
  });
}
