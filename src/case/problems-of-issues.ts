import type * as z from 'zod';
import type { Problem } from '../problems/input-error.ts';
import { nearestKey } from './nearest-key.ts';
import {
  allowedWords,
  bare,
  isMapping,
  neededKeys,
  optionFor,
  optionsOf,
  schemaAt,
  shapeOf,
  tellingKeys,
} from './schema-walk.ts';
import { type Path, pathId, placeOf, placeOfKey, valueAt, type YamlSource } from './yaml-source.ts';

type Schema = z.core.$ZodType;
type Issue = z.core.$ZodIssue;

/** A problem with the path it is about, so that later checks know what to leave alone. */
export interface PathProblem {
  readonly path: Path;
  readonly problem: Problem;
}

/** What was found, in words. */
export function foundWords(value: unknown): string {
  if (value === undefined) return 'nothing';
  if (value === null) return 'nothing after the colon';
  if (Array.isArray(value)) return `a list of ${value.length}`;
  if (typeof value === 'object') return `a mapping (${Object.keys(value).slice(0, 4).join(', ') || 'empty'})`;
  if (typeof value !== 'string') return String(value);
  const text = JSON.stringify(value.length > 60 ? `${value.slice(0, 57)}...` : value);
  if (/^[-+]?\d+,\d+$/.test(value)) return `${text}, a text: a decimal comma does not make a number`;
  if (/^[-+]?(\d+\.?\d*|\.\d+)(e[-+]?\d+)?$/i.test(value)) return `${text}, a text: quotes make it one`;
  if (/^[-+]?\d+([.,]\d+)?\s*[a-z%/°]+/i.test(value))
    return `${text}, a text: the unit stands in the key alone`;
  return text;
}

/** What the schema complains of. */
export interface SchemaFaults {
  readonly problems: readonly PathProblem[];
  /** Everything that is not as the schema wants it, with what goes without a problem of its own. */
  readonly paths: readonly Path[];
}

/** Turns the schema's complaints into problems with place, what was found and what is allowed. */
export function problemsOfIssues(schema: Schema, issues: readonly Issue[], source: YamlSource): SchemaFaults {
  const found: PathProblem[] = [];
  const suggested = new Set<string>();
  for (const issue of issues) translate(schema, issue, [], source, found, suggested);
  const seen = new Set<string>();
  const problems = found.filter(({ path, problem }) => {
    // "did you mean" says it already.
    if (problem.code === 'missing-key' && suggested.has(pathId(path))) return false;
    const id = `${problem.code} ${pathId(path)}`;
    if (seen.has(id)) return false;
    seen.add(id);
    return true;
  });
  return { problems, paths: found.map(({ path }) => path) };
}

function translate(
  root: Schema,
  issue: Issue,
  base: Path,
  source: YamlSource,
  out: PathProblem[],
  suggested: Set<string>,
): void {
  const path: Path = [...base, ...(issue.path as (string | number)[])];
  const value = valueAt(source.value, path);
  const schema = schemaAt(root, source.value, path);
  const add = (at: Path, code: string, message: string, more: { found?: string; allowed?: string }): void => {
    const place =
      code === 'unknown-key' || code === 'keys-exclude' ? placeOfKey(source, at) : placeOf(source, at);
    out.push({ path: at, problem: { code, place, message, ...more } });
  };
  const allowed = schema === null ? {} : { allowed: allowedWords(schema) };

  if (issue.code === 'unrecognized_keys') {
    for (const key of issue.keys) unknownKey(root, path, key, source, add, suggested);
    return;
  }
  if (value === undefined) {
    missingKey(root, path, source, add);
    return;
  }
  if (value === null) {
    add(path, 'empty-value', 'has no value', allowed);
    return;
  }
  if (issue.code === 'invalid_union') {
    const options = optionsOf(schema!);
    for (const [key, words] of isMapping(value) ? tellingKeys(options) : []) {
      const told = (value as Record<string, unknown>)[key];
      if (words.includes(told as string)) continue;
      const at = [...path, key];
      if (told === undefined) add(at, 'missing-key', 'is missing', { allowed: words.join(', ') });
      else
        add(at, 'not-allowed', 'is none of the words known here', {
          found: foundWords(told),
          allowed: words.join(', '),
        });
      return;
    }
    const branch = issue.errors[optionFor(options, value)] ?? [];
    if (isMapping(value) || options.length === 1)
      for (const inner of branch) translate(root, inner, path, source, out, suggested);
    else add(path, 'wrong-type', 'is not what stands here', { found: foundWords(value), ...allowed });
    return;
  }
  const found = foundWords(value);
  if (issue.code === 'invalid_type' && issue.expected === 'number' && typeof value === 'number')
    add(path, 'not-finite', 'is not a finite number', { found, ...allowed });
  else if (issue.code === 'invalid_type' && (issue.expected === 'number' || issue.expected === 'int'))
    add(path, 'not-a-number', 'is not a number', { found, ...allowed });
  else if (issue.code === 'invalid_type')
    add(path, 'wrong-type', `is not a ${TYPE_WORDS[issue.expected] ?? issue.expected}`, {
      found,
      ...allowed,
    });
  else if (issue.code === 'invalid_value')
    add(path, 'not-allowed', 'is none of the words known here', { found, ...allowed });
  else if (issue.code === 'invalid_format') add(path, 'bad-name', 'is not a name', { found, ...allowed });
  else if ((issue.code === 'too_small' || issue.code === 'too_big') && typeof value !== 'number')
    add(path, 'wrong-length', 'has the wrong length', { found, ...allowed });
  else add(path, 'out-of-range', 'is out of range', { found, ...allowed });
}

const TYPE_WORDS: Readonly<Record<string, string>> = {
  object: 'mapping',
  array: 'list',
  tuple: 'list',
  string: 'text',
};

type Add = (at: Path, code: string, message: string, more: { found?: string; allowed?: string }) => void;

/** The options that stand at the mapping around a path, and the mapping. */
function around(
  root: Schema,
  path: Path,
  source: YamlSource,
): { options: readonly Schema[]; raw: Record<string, unknown> } {
  const schema = schemaAt(root, source.value, path);
  const raw = valueAt(source.value, path);
  return { options: schema === null ? [] : optionsOf(schema), raw: isMapping(raw) ? raw : {} };
}

function unknownKey(
  root: Schema,
  path: Path,
  key: string,
  source: YamlSource,
  add: Add,
  suggested: Set<string>,
): void {
  const { options, raw } = around(root, path, source);
  const at = [...path, key];
  const mine = Object.keys(shapeOf(options[optionFor(options, raw)] ?? bare(root)));
  const telling = tellingKeys(options);
  const sibling = options.find(
    (option) =>
      Object.hasOwn(shapeOf(option), key) &&
      [...telling.keys()].every(
        (k) =>
          !Object.hasOwn(raw, k) ||
          (shapeOf(option)[k] as z.ZodLiteral).def.values.includes(raw[k] as string),
      ),
  );
  if (sibling !== undefined) {
    const against = Object.keys(raw).filter((k) => mine.includes(k) && !Object.hasOwn(shapeOf(sibling), k));
    add(at, 'keys-exclude', `cannot stand beside ${against.join(', ') || 'the other keys'}`, {
      allowed: 'one of them',
    });
    return;
  }
  const near = nearestKey(key, mine);
  if (near !== null) suggested.add(pathId([...path, near.key]));
  add(at, 'unknown-key', `is not a key known here${hint(root, options, key, raw[key], near)}`, {
    allowed: mine.join(', '),
  });
}

/** What may help with an unknown key, to follow on the message. */
function hint(
  root: Schema,
  options: readonly Schema[],
  key: string,
  value: unknown,
  near: ReturnType<typeof nearestKey>,
): string {
  if (key === '<<') return ': YAML 1.2 has no merge keys';
  if (value === null && /^\d+$/.test(key))
    return ': a comma ends a number, a decimal point goes in its place';
  const other = options.find((option) => Object.hasOwn(shapeOf(option), key));
  const telling = other === undefined ? undefined : [...tellingKeys([other])][0];
  if (telling !== undefined) return `, it goes with ${telling[0]}: ${telling[1].join(', ')}`;
  if (near !== null) return `, did you mean ${near.key}?${near.unit ? ' (the unit is part of the key)' : ''}`;
  const home = homeOf(root, key);
  return home === null ? '' : `, it belongs under ${home}`;
}

/** The top-level block that has a key; null when none or several have. */
function homeOf(root: Schema, key: string): string | null {
  const homes = Object.entries(shapeOf(root)).filter(([, field]) =>
    optionsOf(field).some((option) => Object.hasOwn(shapeOf(option), key)),
  );
  return homes.length === 1 ? homes[0]![0] : null;
}

function missingKey(root: Schema, path: Path, source: YamlSource, add: Add): void {
  const parent = path.slice(0, -1);
  const { options, raw } = around(root, parent, source);
  const fits = (option: Schema): boolean =>
    Object.keys(raw).every(
      (key) => Object.hasOwn(shapeOf(option), key) || !options.some((o) => Object.hasOwn(shapeOf(o), key)),
    );
  const ways = options
    .filter(
      (option) =>
        fits(option) && [...tellingKeys([option])].every(([k, words]) => words.includes(raw[k] as string)),
    )
    .map((option) => neededKeys(option).filter((key) => !Object.hasOwn(raw, key)))
    .filter((keys) => keys.length > 0)
    .map((keys) => keys.join(' and '));
  if (ways.length > 1) {
    add(parent, 'missing-key', 'a key is missing', { allowed: [...new Set(ways)].join(', or ') });
    return;
  }
  const schema = schemaAt(root, source.value, path);
  add(path, 'missing-key', 'is missing', schema === null ? {} : { allowed: allowedWords(schema) });
}
