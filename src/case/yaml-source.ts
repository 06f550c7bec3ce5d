import { isAlias, isCollection, isMap, isScalar, LineCounter, type Node, parseDocument } from 'yaml';
import { InputError, type Problem } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import { deepNestingAt } from './deep-nesting.ts';

export type Path = readonly (string | number)[];

/** Where a value and its key stand, counted from 1. */
interface Spot {
  readonly line: number;
  readonly column: number;
}

/** A YAML text as plain data, with the place of every key and value. Plain data itself. */
export interface YamlSource {
  readonly file: string;
  readonly text: string;
  /** Mappings as objects, lists as arrays, scalars as string, number, boolean or null. */
  readonly value: unknown;
  /** By `pathId`: where the value stands, and where its key does. */
  readonly values: ReadonlyMap<string, Spot>;
  readonly keys: ReadonlyMap<string, Spot>;
  /** By `pathId`: the text of the override that put a value there. */
  readonly overridden: ReadonlyMap<string, string>;
}

/** More values than any written file has, and more than aliases are good for: aliases of aliases blow up. */
const MOST_NODES = 100_000;
const MOST_ALIASED = 2000;
const DEEPEST = 40;
const LONGEST_TEXT = 4_000_000;
/** More than anyone reads. */
export const MOST_PROBLEMS = 100;

export const pathId = (path: Path): string => JSON.stringify(path);

const PARSER_WORDS: Readonly<Record<string, readonly [code: string, message: string, allowed: string]>> = {
  DUPLICATE_KEY: ['duplicate-key', 'the same key stands twice in one mapping', 'each key once'],
  TAB_AS_INDENT: ['tab-indent', 'a tab is used for indentation', 'spaces'],
  MULTIPLE_DOCS: ['several-documents', 'the file holds several documents', 'one document in a file'],
};

/**
 * Reads YAML 1.2 (and so JSON) into plain data with places. Aliases are followed; their places are those of the alias.
 *
 * @param file name for messages
 * @throws InputError `empty-file`, `yaml-syntax`, `duplicate-key`, `tab-indent`, `several-documents`,
 *   `alias-bomb`, `too-deep`, `unknown-alias`, `bad-key`, `file-too-long`: all that the parser found, in order of lines
 */
export function readYaml(text: string, file: string): YamlSource {
  if (text.length > LONGEST_TEXT)
    throw new InputError({
      code: 'file-too-long',
      place: { file },
      message: 'the file is too long to be written by hand',
      found: `${text.length} characters`,
      allowed: `at most ${LONGEST_TEXT}`,
    });
  const deep = deepNestingAt(text);
  if (deep >= 0) throw new InputError(tooDeep({ file, ...spotIn(text, deep) }));
  const lines = new LineCounter();
  const doc = parseDocument(text, { lineCounter: lines, prettyErrors: false, logLevel: 'error' });
  const spotAt = (offset: number): Spot => {
    const { line, col } = lines.linePos(offset);
    return { line: Math.max(1, line), column: Math.max(1, col) };
  };
  const faults = [...doc.errors, ...doc.warnings]
    .sort((a, b) => a.pos[0] - b.pos[0])
    .map((fault): Problem => {
      const place = { file, ...spotAt(fault.pos[0]) };
      const [code, message, allowed] = PARSER_WORDS[fault.code] ?? [];
      if (code !== undefined && message !== undefined)
        return { code, place, message, ...(allowed && { allowed }) };
      if (/call stack/i.test(fault.message)) return tooDeep(place);
      return { code: 'yaml-syntax', place, message: `not valid YAML: ${firstLine(fault.message)}` };
    });
  // What follows on a fault of syntax is mostly its consequence.
  const last = faults.findIndex(({ code }) => code === 'yaml-syntax' || code === 'too-deep');
  const [first, ...others] =
    last < 0 ? faults.slice(0, MOST_PROBLEMS) : faults.slice(0, last + 1).slice(-MOST_PROBLEMS);
  if (first !== undefined) throw new InputError(first, ...others);
  if (doc.contents === null || (isScalar(doc.contents) && doc.contents.value === null))
    throw new InputError({
      code: 'empty-file',
      place: { file, line: 1, column: 1 },
      message: 'the file is empty',
    });

  const values = new Map<string, Spot>();
  const keys = new Map<string, Spot>();
  let nodes = 0;
  let aliased = 0;
  const refuse = (node: Node | null, code: string, message: string, allowed: string): never => {
    throw new InputError({ code, place: { file, ...spotAt(node?.range?.[0] ?? 0) }, message, allowed });
  };

  /** `at` is the place to tell: the alias's, while following one. */
  const convert = (node: Node | null, path: Path, at: Spot | null): unknown => {
    if (at === null) nodes++;
    else aliased++;
    if (nodes > MOST_NODES || aliased > MOST_ALIASED || path.length > DEEPEST)
      refuse(
        node,
        'alias-bomb',
        'aliases or nesting make far too much of this',
        `at most ${MOST_NODES} values, ${MOST_ALIASED} of them through aliases, ${DEEPEST} deep`,
      );
    const spot = at ?? (node?.range ? spotAt(node.range[0]) : null);
    if (spot !== null) values.set(pathId(path), spot);
    if (isAlias(node)) {
      const target = node.resolve(doc);
      if (target === undefined)
        return refuse(
          node,
          'unknown-alias',
          `the alias *${node.source} has no anchor before it`,
          'an anchor written earlier',
        );
      return convert(target, path, spot);
    }
    if (isMap(node)) {
      const object = {};
      for (const pair of node.items) {
        const keyNode = pair.key as Node | null;
        if (!isScalar(keyNode) || keyNode.value === null)
          return refuse(keyNode, 'bad-key', 'a key is not a plain word', 'key: value');
        const inner = [...path, String(keyNode.value)];
        if (keyNode.range) keys.set(pathId(inner), at ?? spotAt(keyNode.range[0]));
        // defineProperty: a key `__proto__` stays a key.
        Object.defineProperty(object, String(keyNode.value), {
          value: convert(pair.value as Node | null, inner, at),
          enumerable: true,
          writable: true,
          configurable: true,
        });
      }
      return object;
    }
    if (isCollection(node)) return node.items.map((item, i) => convert(item as Node, [...path, i], at));
    const value = isScalar(node) ? node.value : null;
    return typeof value === 'bigint' ? Number(value) : (value ?? null);
  };
  return { file, text, value: convert(doc.contents, [], null), values, keys, overridden: new Map() };
}

const tooDeep = (place: Place): Problem => ({
  code: 'too-deep',
  place,
  message: 'the nesting is far too deep',
  allowed: `at most ${DEEPEST} deep`,
});

function spotIn(text: string, at: number): Spot {
  const before = text.slice(0, at).split('\n');
  return { line: before.length, column: (before.at(-1) ?? '').length + 1 };
}

const firstLine = (text: string): string => (text.split('\n')[0] ?? '').replace(/\.$/, '');

/** The place of a value; of the nearest parent that exists when it is missing. The key is always the whole path. */
export function placeOf(source: YamlSource, path: Path): Place {
  return placed(source, path, source.values.get(pathId(path)));
}

/** The place of a key rather than of its value. */
export function placeOfKey(source: YamlSource, path: Path): Place {
  return placed(source, path, source.keys.get(pathId(path)));
}

function placed(source: YamlSource, path: Path, spot: Spot | undefined): Place {
  const key = pathWords(source.value, path);
  const named = key === '' ? {} : { key };
  for (let n = path.length; n > 0; n--) {
    const option = source.overridden.get(pathId(path.slice(0, n)));
    if (option !== undefined) return { file: `--set ${option}`, ...named };
  }
  let at = spot;
  for (let n = path.length - 1; at === undefined && n > 0; n--)
    at = source.keys.get(pathId(path.slice(0, n))) ?? source.values.get(pathId(path.slice(0, n)));
  at ??= source.values.get(pathId([])) ?? { line: 1, column: 1 };
  return { file: source.file, line: at.line, column: at.column, ...named };
}

/** What names an item of a list: its `name` or `id`, where that is a text no other item has. */
export function itemName(list: readonly unknown[], index: number): string | null {
  const name = ownName(list[index]);
  return name !== null && list.filter((item) => ownName(item) === name).length === 1 ? name : null;
}

function ownName(item: unknown): string | null {
  if (typeof item !== 'object' || item === null) return null;
  const { name, id } = item as { name?: unknown; id?: unknown };
  const own = typeof name === 'string' ? name : id;
  return typeof own === 'string' && /^[A-Za-z0-9][\w.-]*$/.test(own) ? own : null;
}

/** `candidates.pi-60s.sample_s`: a dotted path, list items by their name or id where they have one, else by number from 0. */
export function pathWords(root: unknown, path: Path): string {
  const words: string[] = [];
  let here: unknown = root;
  for (const step of path) {
    words.push(
      Array.isArray(here) && typeof step === 'number' ? (itemName(here, step) ?? String(step)) : String(step),
    );
    here =
      typeof here === 'object' && here !== null
        ? (here as Record<string | number, unknown>)[step]
        : undefined;
  }
  return words.join('.');
}

/** The value at a path, undefined where there is none. */
export function valueAt(root: unknown, path: Path): unknown {
  let here: unknown = root;
  for (const step of path) {
    if (typeof here !== 'object' || here === null || !Object.hasOwn(here, step)) return undefined;
    here = (here as Record<string | number, unknown>)[step];
  }
  return here;
}
