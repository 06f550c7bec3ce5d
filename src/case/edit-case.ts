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
 * written. A missing key is inserted after the last one of its mapping, missing mappings on the way with it.
 *
 * @param text of a case or vehicle file
 * @param path keys and item numbers
 * @param value scalars as they are; lists and mappings are written on one line
 * @returns the new text; read again, it differs from the old one at `path` alone
 * @throws InputError `edit-no-place` where the path leads into a plain value or beyond a list's end,
 *   `edit-shared` where the value is shared through an alias, so that other places would change too
 */
export function editCase(text: string, path: Path, value: Editable): string {
  const before = readYaml(text, 'case');
  const doc = parseDocument(text, { prettyErrors: false, logLevel: 'error' });
  const edited = splice(text, doc, path, value);
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

function splice(text: string, doc: Document, path: Path, value: Editable): string {
  let node = doc.contents as Node | null;
  for (let depth = 0; depth < path.length; depth++) {
    const step = path[depth]!;
    if (isMap(node)) {
      const pair = node.items.find(({ key }) => isScalar(key) && String(key.value) === step);
      if (pair === undefined) return insert(text, node, String(step), nested(path.slice(depth + 1), value));
      const child = pair.value as Node | null;
      if (isScalar(child) && child.value === null && depth + 1 < path.length)
        return replace(text, child, nested(path.slice(depth + 1), value));
      node = child;
    } else if (isSeq(node) && typeof step === 'number' && node.items[step] !== undefined)
      node = node.items[step] as Node;
    else
      throw new InputError({
        code: 'edit-no-place',
        place: { key: path.join('.') },
        message: 'there is no place for this value',
        found: isAlias(node) ? 'an alias' : isCollection(node) ? 'a list' : 'a plain value',
        allowed: 'a key of a mapping, or an item that a list has',
      });
  }
  return replace(text, node, value);
}

/** The value under the keys that are still missing. */
function nested(path: Path, value: Editable): Editable {
  return path.reduceRight<Editable>((inner, step) => ({ [String(step)]: inner }), value);
}

/** On one line, safe inside of brackets too. */
function written(value: Editable): string {
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

function replace(text: string, node: Node | null, value: Editable): string {
  const [start, end] = extent(text, node);
  // A missing value stands right after its colon; a block text ends with its line break.
  const space = start > 0 && text[start - 1] === ':' ? ' ' : '';
  const tail = end > start && text[end - 1] === '\n' ? '\n' : '';
  return text.slice(0, start) + space + written(value) + tail + text.slice(end);
}

function insert(text: string, map: YAMLMap, key: string, value: Editable): string {
  const entry = `${written(key)}: ${written(value)}`;
  const last = map.items.at(-1);
  const lastNode = (last?.value ?? last?.key ?? null) as Node | null;
  if (map.flow) {
    const end = lastNode === null ? map.range![0] + 1 : extent(text, lastNode)[1];
    return text.slice(0, end) + (lastNode === null ? '' : ', ') + entry + text.slice(end);
  }
  const firstKey = map.items[0]!.key as Node;
  const column = firstKey.range![0] - (text.lastIndexOf('\n', firstKey.range![0] - 1) + 1);
  const end = extent(text, lastNode)[1];
  const lineEnd = text[end - 1] === '\n' ? end - 1 : text.indexOf('\n', end);
  const breakAt = lineEnd < 0 ? text.length : lineEnd;
  const newline = text.includes('\r\n') ? '\r\n' : '\n';
  const at = text[breakAt - 1] === '\r' ? breakAt - 1 : breakAt;
  return `${text.slice(0, at)}${newline}${' '.repeat(column)}${entry}${text.slice(at)}`;
}

function withValue(root: unknown, path: Path, value: Editable): unknown {
  if (path.length === 0) return value;
  const [step, ...rest] = path as [string | number, ...(string | number)[]];
  if (Array.isArray(root)) return root.map((item, i) => (i === step ? withValue(item, rest, value) : item));
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
