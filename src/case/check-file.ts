import type * as z from 'zod';
import { InputError, type Problem } from '../problems/input-error.ts';
import { type PathProblem, problemsOfIssues } from './problems-of-issues.ts';
import { isMapping } from './schema-walk.ts';
import { MOST_PROBLEMS, type Path, placeOf, type YamlSource } from './yaml-source.ts';

/** A fault that no single field has: two fields that do not go together. */
export interface RuleFault {
  readonly path: Path;
  readonly code: string;
  readonly message: string;
  readonly found?: string;
  readonly allowed?: string;
}

/** A check across fields of a part of a file; runs only where that part has passed the schema. */
export interface Rule<Input> {
  readonly about: Path;
  readonly check: (file: Input) => readonly RuleFault[];
}

/**
 * Checks a file against its schema and its rules.
 *
 * @returns the file with its defaults filled in
 * @throws InputError with every problem of the file (at most MOST_PROBLEMS), by line; those of overrides come last
 */
export function checkFile<S extends z.ZodType>(
  schema: S,
  rules: readonly Rule<z.input<S>>[],
  source: YamlSource,
): z.output<S> {
  if (!isMapping(source.value))
    throw new InputError({
      code: 'wrong-type',
      place: placeOf(source, []),
      message: 'the file is not a mapping',
      found: Array.isArray(source.value) ? `a list of ${source.value.length}` : 'a plain value',
      allowed: 'keys with values, as key: value',
    });
  const parsed = schema.safeParse(source.value);
  const faults = parsed.success ? null : problemsOfIssues(schema, parsed.error.issues, source);
  const found: PathProblem[] = [...(faults?.problems ?? [])];
  for (const rule of rules) {
    if (faults?.paths.some((path) => overlaps(path, rule.about))) continue;
    for (const { path, ...fault } of rule.check(source.value as z.input<S>))
      found.push({ path, problem: { place: placeOf(source, path), ...fault } });
  }
  const [first, ...others] = found
    .map(({ problem }) => problem)
    .sort(byLine)
    .slice(0, MOST_PROBLEMS);
  if (first !== undefined) throw new InputError(first, ...others);
  return parsed.data as z.output<S>;
}

const overlaps = (a: Path, b: Path): boolean => {
  const shorter = a.length < b.length ? a : b;
  return shorter.every((_, i) => a[i] === b[i]);
};

const byLine = (a: Problem, b: Problem): number =>
  (a.place.line ?? 1e9) - (b.place.line ?? 1e9) || (a.place.column ?? 0) - (b.place.column ?? 0);
