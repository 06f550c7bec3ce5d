import {
  type Document,
  isAlias,
  isCollection,
  isMap,
  isScalar,
  isSeq,
  type Node,
  parseDocument,
  stringify,
  type YAMLMap,
  type YAMLSeq,
} from 'yaml';
import { InputError } from '../problems/input-error.ts';
import { isMapping } from './schema-walk.ts';
import { type Path, readYaml, valueAt } from './yaml-source.ts';

/** What an edit may put in. */
export type Editable =
  | string
  | number
  | boolean
  | null
  | readonly Editable[]
  | { readonly [key: string]: Editable };

/**
 * Changes one value of a YAML text and leaves every other byte as it was: comments, spacing, the way numbers are
 * written. A missing key is inserted after the last one of its mapping, missing mappings on the way with it; the number
 * that follows the last item of a list appends one. JSON stays JSON.
 *
 * @param text of a case or vehicle file
 * @param path keys and item numbers
 * @param value scalars as they are; lists and mappings are written on one line
 * @returns the new text; read again, it differs from the old one at `path` alone
 * @throws InputError `edit-no-place` where the path leads into a plain value or further beyond a list's end, or into an empty list,
 *   `edit-shared` where the value is shared through an alias, so that other places would change too
 */
export function editCase(text: string, path: Path, value: Editable): string {
  const before = readYaml(text, 'case');
  const doc = parseDocument(text, { prettyErrors: false, logLevel: 'error' });
  const edited = splice(text, doc, path, isJson(text) ? (inner) => JSON.stringify(inner) : written, value);
  const after = readYaml(edited, 'case').value;
  const wanted = withValue(before.value, path, value);
  if (!same(after, wanted))
    throw new InputError({
      code: 'edit-shared',
      place: { key: path.join('.') },
      message:
        'the value is shared with other places of the text or written in a way that cannot be changed alone',
      allowed: 'a value of its own',
    });
  return edited;
}

type Write = (value: Editable) => string;

/** YAML that is JSON too, and shall stay so. */
function isJson(text: string): boolean {
  try {
    JSON.parse(text);
    return true;
  } catch {
    return false;
  }
}

function splice(text: string, doc: Document, path: Path, write: Write, value: Editable): string {
  let node = doc.contents as Node | null;
  for (let depth = 0; depth < path.length; depth++) {
    const step = path[depth]!;
    if (isMap(node)) {
      const pair = node.items.find(({ key }) => isScalar(key) && String(key.value) === step);
      if (pair === undefined)
        return insert(text, node, `${write(String(step))}: ${write(nested(path.slice(depth + 1), value))}`);
      const child = pair.value as Node | null;
      if (isScalar(child) && child.value === null && depth + 1 < path.length)
        return replace(text, child, write(nested(path.slice(depth + 1), value)));
      node = child;
    } else if (isSeq(node) && typeof step === 'number' && node.items[step] !== undefined)
      node = node.items[step] as Node;
    else if (isSeq(node) && step === node.items.length && step > 0)
      return append(text, node, write(nested(path.slice(depth + 1), value)));
    else
      throw new InputError({
        code: 'edit-no-place',
        place: { key: path.join('.') },
        message: 'there is no place for this value',
        found: isAlias(node) ? 'an alias' : isCollection(node) ? 'a list' : 'a plain value',
        allowed: 'a key of a mapping, or an item that a list has',
      });
  }
  return replace(text, node, write(value));
}

/** The value under the keys that are still missing. */
function nested(path: Path, value: Editable): Editable {
  return path.reduceRight<Editable>((inner, step) => ({ [String(step)]: inner }), value);
}

/** A value as an edit writes it: on one line, safe inside of brackets too. */
export function written(value: Editable): string {
  if (typeof value === 'string') {
    const plain = stringify(value, { lineWidth: 0 }).trimEnd();
    return /^[\w./][\w ./+-]*$/.test(value) && plain === value ? value : JSON.stringify(value);
  }
  if (Array.isArray(value)) return `[${value.map(written).join(', ')}]`;
  if (isMapping(value))
    return `{${Object.entries(value as Record<string, Editable>)
      .map(([key, inner]) => `${written(key)}: ${written(inner)}`)
      .join(', ')}}`;
  return String(value);
}

/** Start of a node and end of what it writes, without the comments and blank lines after it. */
function extent(text: string, node: Node | null): [start: number, end: number] {
  const [start, end] = node?.range ?? [0, 0];
  if (isCollection(node) && !node.flow) {
    const last = node.items.at(-1) as { key?: Node; value?: Node } | Node | undefined;
    const inner = isMap(node)
      ? ((last as { value?: Node }).value ?? (last as { key?: Node }).key)
      : (last as Node);
    return [start, inner === undefined ? end : Math.max(start, extent(text, inner as Node)[1])];
  }
  return [start, end];
}

function replace(text: string, node: Node | null, written: string): string {
  const [start, end] = extent(text, node);
  // A missing value stands right after its colon; a block text ends with its line break.
  const space = start > 0 && text[start - 1] === ':' ? ' ' : '';
  const tail = end > start && text[end - 1] === '\n' ? '\n' : '';
  return text.slice(0, start) + space + written + tail + text.slice(end);
}

function insert(text: string, map: YAMLMap, entry: string): string {
  const last = map.items.at(-1);
  const lastNode = (last?.value ?? last?.key ?? null) as Node | null;
  if (map.flow) return afterFlow(text, map, lastNode, entry);
  return afterBlock(text, columnOf(text, map.items[0]!.key as Node), lastNode, entry);
}

/** One more item of a list that has some. */
function append(text: string, list: YAMLSeq, item: string): string {
  const last = list.items.at(-1) as Node;
  if (list.flow) return afterFlow(text, list, last, item);
  return afterBlock(text, columnOf(text, list), last, `- ${item}`);
}

function columnOf(text: string, { range }: Node): number {
  const start = range?.[0] ?? 0;
  return start - (text.lastIndexOf('\n', start - 1) + 1);
}

function afterFlow(text: string, around: YAMLMap | YAMLSeq, last: Node | null, entry: string): string {
  const end = last === null ? around.range![0] + 1 : extent(text, last)[1];
  return text.slice(0, end) + (last === null ? '' : ', ') + entry + text.slice(end);
}

function afterBlock(text: string, column: number, last: Node | null, entry: string): string {
  const end = extent(text, last)[1];
  const lineEnd = text[end - 1] === '\n' ? end - 1 : text.indexOf('\n', end);
  const breakAt = lineEnd < 0 ? text.length : lineEnd;
  const newline = text.includes('\r\n') ? '\r\n' : '\n';
  const at = text[breakAt - 1] === '\r' ? breakAt - 1 : breakAt;
  return `${text.slice(0, at)}${newline}${' '.repeat(column)}${entry}${text.slice(at)}`;
}

function withValue(root: unknown, path: Path, value: Editable): unknown {
  if (path.length === 0) return value;
  const [step, ...rest] = path as [string | number, ...(string | number)[]];
  if (Array.isArray(root)) {
    const items = root.map((item, i) => (i === step ? withValue(item, rest, value) : item));
    return step === root.length ? [...items, withValue(undefined, rest, value)] : items;
  }
  const old = isMapping(root) ? root : {};
  return { ...old, [step]: withValue(valueAt(old, [step]), rest, value) };
}

/** Equal data; the order of keys does not count. */
function same(a: unknown, b: unknown): boolean {
  if (Object.is(a, b) || (a === 0 && b === 0)) return true;
  if (Array.isArray(a))
    return Array.isArray(b) && a.length === b.length && a.every((item, i) => same(item, b[i]));
  if (!isMapping(a) || !isMapping(b)) return false;
  const keys = Object.keys(a);
  return (
    keys.length === Object.keys(b).length &&
    keys.every((key) => Object.hasOwn(b, key) && same(a[key], b[key]))
  );
}
