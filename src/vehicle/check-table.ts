import { InputError, type Problem } from '../problems/input-error.ts';

/** A row of numbers of a specification and what must hold for each. */
export interface TableRule {
  readonly key: string;
  readonly values: Float64Array;
  readonly unit: string;
  readonly least?: number;
  readonly greatest?: number;
  /** The least value itself is refused. */
  readonly above?: boolean;
  /** Each number must be greater than the one before. */
  readonly increasing?: boolean;
  /** How many numbers there must be; without it at least one. */
  readonly length?: number;
}

/**
 * The door of the functions that build a vehicle from rows of numbers.
 *
 * @throws InputError with the first problem of each row: `wrong-length`, `out-of-range`, `not-increasing`
 */
export function checkTable(what: string, rules: readonly TableRule[]): void {
  const problems = rules.map((rule) => problemOf(what, rule)).filter((problem) => problem !== null);
  const [first, ...more] = problems;
  if (first !== undefined) throw new InputError(first, ...more);
}

function problemOf(what: string, rule: TableRule): Problem | null {
  const { key, values, unit, least = Number.NEGATIVE_INFINITY, greatest = Number.POSITIVE_INFINITY } = rule;
  const problem = (code: string, message: string, found: string, allowed: string): Problem => {
    return { code, place: { key }, message: `${what} ${message}`, found, allowed };
  };
  const ofUnit = unit === '' ? '' : ` ${unit}`;
  if (rule.length === undefined ? values.length === 0 : values.length !== rule.length) {
    const allowed = rule.length === undefined ? 'one or more' : `${rule.length}`;
    return problem('wrong-length', 'has the wrong number of values', `${values.length}`, allowed);
  }
  for (let i = 0; i < values.length; i++) {
    const value = values[i]!;
    const low = rule.above === true ? value > least : value >= least;
    if (!Number.isFinite(value) || !low || value > greatest)
      return problem('out-of-range', 'is out of range', `${value}`, rangeWords(rule) + ofUnit);
    if (rule.increasing === true && i > 0 && value <= values[i - 1]!)
      return problem(
        'not-increasing',
        'does not increase',
        `${value}${ofUnit} after ${values[i - 1]}`,
        'more',
      );
  }
  return null;
}

function rangeWords({ least, greatest, above }: TableRule): string {
  const from = least === undefined ? '' : ` ${above === true ? 'above' : 'from'} ${least}`;
  const to = greatest === undefined ? '' : ` up to ${greatest}`;
  return `finite numbers${from}${to}`;
}
