import { formatPlace, type Place } from './place.ts';

/** One thing wrong with an input. `found` and `allowed` are words for people, with units. */
export interface Problem {
  /** Stable, kebab-case: `unknown-key`, `not-a-number`, `track-too-short` ... */
  readonly code: string;
  readonly place: Place;
  /** What is wrong, a clause without a full stop: `latitude is out of range`. */
  readonly message: string;
  readonly found?: string;
  readonly allowed?: string;
}

/** `place: message (found ..., allowed ...)` on one line. */
export function formatProblem(problem: Problem): string {
  const where = formatPlace(problem.place);
  const more = [
    problem.found === undefined ? '' : `found ${problem.found}`,
    problem.allowed === undefined ? '' : `allowed: ${problem.allowed}`,
  ].filter((part) => part !== '');
  return `${where === '' ? '' : `${where}: `}${problem.message}${more.length > 0 ? ` (${more.join('; ')})` : ''}`;
}

/** Bad input, thrown once, at the door. Carries every problem found; the message has a line for each. */
export class InputError extends Error {
  readonly problems: readonly Problem[];

  constructor(...problems: readonly [Problem, ...Problem[]]) {
    super(problems.map(formatProblem).join('\n'));
    this.name = 'InputError';
    this.problems = problems;
  }

  /** Code of the first problem. */
  get code(): string {
    return this.problems[0]?.code ?? 'unknown';
  }
}
