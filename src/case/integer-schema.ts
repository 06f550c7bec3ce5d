import { integer, NOT_GIVEN, number, otherwise, word } from './fields.ts';

/** Greatest divisor, and counts. */
const MOST = 16_777_216;

/** What a controller in whole numbers has besides gains. */
export const integerFields = {
  word_bits: otherwise(integer(8, 32, 'Bits of a word'), 16, 'usual on small processors'),
  product_bits: otherwise(
    integer(8, 48, 'Bits of a product, and of sums before they are scaled down'),
    32,
    'usual on small processors',
  ),
  speed_counts_per_kmh: number('counts per km/h', 0.01, 100000, 'Counts of a km/h'),
  full_throttle_counts: integer(10, MOST, 'Counts of full throttle'),
  gain_divisor: integer(1, MOST, 'What gains are divided by; a power of two where scaling is by shift'),
  integral_of: otherwise(
    word(
      ['increments', 'errors'],
      'What is summed: Ki e scaled down, or the error itself, multiplied by Ki afterwards',
    ),
    'increments',
    NOT_GIVEN,
  ),
  integral_divisor: otherwise(
    integer(1, MOST, 'Counts of a summed integral in one count of throttle'),
    1,
    NOT_GIVEN,
  ),
  scaling: otherwise(
    word(['shift', 'division'], 'Towards minus infinity as a shift, or towards 0 as division in C'),
    'shift',
    NOT_GIVEN,
  ),
  rounding: otherwise(
    word(['truncate', 'nearest'], 'Whether half of the divisor is added before'),
    'truncate',
    NOT_GIVEN,
  ),
  overflow: otherwise(
    word(['wrap', 'saturate'], 'What a word does beyond its range'),
    'wrap',
    "two's complement, as small processors add",
  ),
} as const;
