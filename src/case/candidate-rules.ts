import type * as z from 'zod';
import { powerOfTwo } from '../control/whole-numbers.ts';
import type { caseSchema } from './case-schema.ts';
import type { Rule, RuleFault } from './check-file.ts';
import { increasing } from './order-rules.ts';
import type { Path } from './yaml-source.ts';

type CaseInput = z.input<typeof caseSchema>;
type CandidateInput = CaseInput['candidates'][number];
type IntegerInput = Extract<CandidateInput, { kind: 'integer' }>;

/** What no single field of a candidate can say. */
export const candidateRules: readonly Rule<CaseInput>[] = [
  {
    about: ['candidates'],
    check: ({ candidates }) =>
      candidates.flatMap((candidate, i) => {
        const path = ['candidates', i];
        if (candidate.kind === 'integer') return integerFaults(candidate, path);
        if (candidate.kind === 'locked') return [];
        return [...scheduleFaults(candidate, path), ...modelFaults(candidate, path)];
      }),
  },
];

type FamilyInput = Exclude<CandidateInput, { kind: 'integer' | 'locked' }>;

/** Corners in order, a factor for each, no gear twice. */
function scheduleFaults({ schedule }: FamilyInput, path: Path): RuleFault[] {
  if (schedule === undefined) return [];
  const corners = schedule.at_kmh.length;
  const at = (...rest: Path): Path => [...path, 'schedule', ...rest];
  const gears = schedule.rows.map(({ gear }) => gear);
  return [
    ...increasing(schedule.at_kmh, (i) => at('at_kmh', i), 'km/h'),
    ...schedule.rows.flatMap((row, i) => {
      const faults: RuleFault[] = (['factor', 'ki_factor'] as const).flatMap((key) => {
        const factors = row[key];
        if (factors === undefined || factors.length === corners) return [];
        return [
          {
            path: at('rows', i, key),
            code: 'wrong-length',
            message: 'has not a factor for each corner',
            found: `a list of ${factors.length}`,
            allowed: `a list of ${corners}`,
          },
        ];
      });
      if (gears.indexOf(row.gear) < i)
        faults.push({
          path: at('rows', i),
          code: 'doubled-name',
          message: 'the gear has a row already',
          found: row.gear === undefined ? 'a second row for all gears' : `gear ${row.gear}`,
          allowed: 'each gear once',
        });
      return faults;
    }),
  ];
}

function modelFaults(file: FamilyInput, path: Path): RuleFault[] {
  if (file.model_mass_kg === undefined) return [];
  if (file.feedforward !== undefined || file.observer !== undefined) return [];
  return [
    {
      path: [...path, 'model_mass_kg'],
      code: 'keys-exclude',
      message: 'has no meaning without feedforward or observer',
      allowed: 'beside feedforward or observer',
    },
  ];
}

function integerFaults(file: IntegerInput, path: Path): RuleFault[] {
  const faults: RuleFault[] = [];
  const word = file.word_bits ?? 16;
  const product = file.product_bits ?? 32;
  const add = (key: string, code: string, message: string, found: string, allowed: string): void => {
    faults.push({ path: [...path, key], code, message, found, allowed });
  };
  if (product < word)
    add(
      file.product_bits === undefined ? 'word_bits' : 'product_bits',
      'out-of-range',
      'a product has fewer bits than a word',
      `${product}`,
      `from ${word} to 48`,
    );
  const most = powerOfTwo(word - 1) - 1;
  if (file.full_throttle_counts > most)
    add(
      'full_throttle_counts',
      'out-of-range',
      `is more than a word of ${word} bits holds`,
      `${file.full_throttle_counts}`,
      `up to ${most}`,
    );
  if ((file.scaling ?? 'shift') === 'shift')
    for (const key of ['gain_divisor', 'integral_divisor'] as const) {
      const divisor = file[key] ?? 1;
      if ((divisor & (divisor - 1)) !== 0)
        add(key, 'out-of-range', 'is no power of two, and scaling is by shift', `${divisor}`, '1, 2, 4, ...');
    }
  const sums = file.integral_of === 'errors';
  if (sums && (file.integral_divisor ?? 1) !== 1)
    add(
      'integral_divisor',
      'keys-exclude',
      'has no meaning where errors are summed',
      `${file.integral_divisor}`,
      '1, or left out',
    );
  const { anti_windup: windup } = file;
  if (windup?.kind === 'integral_cap' && windup.against === 'summed_error' && !sums)
    faults.push({
      path: [...path, 'anti_windup', 'against'],
      code: 'keys-exclude',
      message: 'there is no sum of errors: increments are summed',
      found: 'summed_error',
      allowed: 'throttle, or integral_of: errors',
    });
  return faults;
}
