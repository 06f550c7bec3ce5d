import { formatProblem, InputError } from '../problems/input-error.ts';
import { NotFiniteError } from '../report/data/fixed.ts';
import { NUMERICAL_FAILURE, PROGRAM_FAULT, REFUSED } from './exit-status.ts';

/** Says on standard error what went wrong; the exit status that belongs to it. */
export function tellFailure(error: unknown): number {
  const say = (line: string): boolean => process.stderr.write(`${line}\n`);
  if (error instanceof InputError) {
    for (const problem of error.problems) say(`error: ${formatProblem(problem)}`);
    return REFUSED;
  }
  if (error instanceof NotFiniteError) {
    say(`error: a numerical failure: ${error.message}`);
    return NUMERICAL_FAILURE;
  }
  const words = error instanceof Error ? `${error.name}: ${error.message}` : String(error);
  say(`error: a fault of ridgehold, not of your input: ${words.split('\n')[0]}`);
  say('Please report it with the files that show it. RIDGEHOLD_DEBUG=1 prints where it happened.');
  if (process.env.RIDGEHOLD_DEBUG !== undefined && error instanceof Error) say(error.stack ?? '');
  return PROGRAM_FAULT;
}
