import { InputError, type Problem } from '../problems/input-error.ts';

/** A number of a specification and the range it must lie in, ends included unless `above` is set. */
export interface SpecRule {
  readonly key: string;
  readonly value: number;
  readonly unit: string;
  readonly least?: number;
  readonly greatest?: number;
  /** The least value itself is refused. */
  readonly above?: boolean;
}

/**
 * The door of the functions that build a vehicle from numbers.
 *
 * @throws InputError `out-of-range` with one problem for each number that is not finite or not in its range
 */
export function checkSpec(what: string, rules: readonly SpecRule[]): void {
  const problems = rules.flatMap((rule): Problem[] => {
    const { key, value, unit, least = Number.NEGATIVE_INFINITY, greatest = Number.POSITIVE_INFINITY } = rule;
    const low = rule.above === true ? value > least : value >= least;
    if (Number.isFinite(value) && low && value <= greatest) return [];
    const from =
      least === Number.NEGATIVE_INFINITY ? '' : `${rule.above === true ? 'above' : 'from'} ${least}`;
    const to = greatest === Number.POSITIVE_INFINITY ? '' : `up to ${greatest}`;
    const range = [from, to].filter((part) => part !== '').join(' ');
    return [
      {
        code: 'out-of-range',
        place: { key },
        message: `${what} is out of range`,
        found: `${value}`,
        allowed: `a finite number ${range}${unit === '' ? '' : ` ${unit}`}`.replace('  ', ' '),
      },
    ];
  });
  const [first, ...more] = problems;
  if (first !== undefined) throw new InputError(first, ...more);
}
