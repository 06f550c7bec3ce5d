import { parseDocument } from 'yaml';
import { InputError } from '../problems/input-error.ts';
import { deepNestingAt } from './deep-nesting.ts';
import { nearestKey } from './nearest-key.ts';
import { isMapping } from './schema-walk.ts';
import { itemName, type Path, pathId, type YamlSource } from './yaml-source.ts';

/** A change given beside a file: `hold.set_speed_kmh=70`. */
interface Override {
  readonly text: string;
  readonly path: string;
  readonly value: unknown;
}

/**
 * Applies changes given beside the file, in order. A path is dotted, list items by number from 0, by name or by id;
 * missing mappings on the way are made. A value is read as YAML.
 *
 * @param under start of the paths that the source does not have: `vehicle.` for a vehicle in its own file
 * @returns the same source with the values put in, each known as coming from its option
 * @throws InputError `bad-override`, naming the option's text
 */
export function applyOverrides(source: YamlSource, overrides: readonly string[], under = ''): YamlSource {
  if (overrides.length === 0) return source;
  const value = structuredCopy(source.value);
  const overridden = new Map(source.overridden);
  for (const text of overrides) {
    const override = readOverride(text);
    const path = override.path.slice(override.path.startsWith(under) ? under.length : 0);
    overridden.set(pathId(put(value, { ...override, path })), text);
  }
  return { ...source, value, overridden };
}

/** The dotted path of an option's text, before the first `=`. */
export function readOverride(text: string): Override {
  const equals = text.indexOf('=');
  const path = text.slice(0, equals).trim();
  if (equals < 1 || path === '')
    refuse(text, 'is not a change of a key', text, 'key=value, such as hold.set_speed_kmh=70');
  const written = text.slice(equals + 1);
  if (deepNestingAt(written) >= 0)
    refuse(
      text.slice(0, equals),
      'its value is nested far too deep',
      'brackets in brackets',
      'a value as in the file',
    );
  const doc = parseDocument(written, { prettyErrors: false, logLevel: 'error' });
  const fault = doc.errors[0];
  if (fault !== undefined)
    refuse(text, `its value is not valid YAML: ${fault.message}`, written, 'a value as in the file');
  return { text, path, value: doc.toJS({ maxAliasCount: 0 }) };
}

function refuse(text: string, message: string, found: string, allowed: string): never {
  throw new InputError({ code: 'bad-override', place: { file: `--set ${text}` }, message, found, allowed });
}

function structuredCopy(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(structuredCopy);
  if (!isMapping(value)) return value;
  return Object.fromEntries(Object.entries(value).map(([key, inner]) => [key, structuredCopy(inner)]));
}

/** Puts the value in; returns its path. */
function put(root: unknown, { text, path: words, value }: Override): Path {
  const path: (string | number)[] = [];
  let here = root;
  let rest = words;
  for (;;) {
    const [step, after] = Array.isArray(here) ? itemStep(here, rest, text) : keyStep(here, rest, text);
    path.push(step);
    const holder = here as Record<string | number, unknown>;
    if (after === '') {
      holder[step] = value;
      return path;
    }
    if (!Object.hasOwn(holder, step) || holder[step] === null) holder[step] = {};
    here = holder[step];
    rest = after;
  }
}

function keyStep(here: unknown, rest: string, text: string): [string, string] {
  const dot = rest.indexOf('.');
  const key = dot < 0 ? rest : rest.slice(0, dot);
  if (!isMapping(here))
    refuse(text, `'${key}' would stand inside a plain value`, String(here), 'the key of a mapping');
  if (key === '' || key === '__proto__')
    refuse(text, 'its path has an empty or forbidden step', rest, 'keys with single dots between');
  return [key, dot < 0 ? '' : rest.slice(dot + 1)];
}

function itemStep(list: readonly unknown[], rest: string, text: string): [number, string] {
  const names = list.map((_, i) => itemName(list, i) ?? String(i));
  // The longest name first: an id may have dots.
  const byName = names
    .map((name, i) => [name, i] as const)
    .filter(([name]) => rest === name || rest.startsWith(`${name}.`))
    .sort(([a], [b]) => b.length - a.length)[0];
  if (byName !== undefined) return [byName[1], rest.slice(byName[0].length + 1)];
  const word = rest.split('.')[0]!;
  const index = /^\d+$/.test(word) ? Number(word) : -1;
  if (index < 0 || index >= list.length) {
    const near = nearestKey(word, names);
    refuse(
      text,
      `there is no item '${word}'${near === null ? '' : `, did you mean ${near.key}?`}`,
      word,
      `${names.join(', ') || 'an item of the list'}, or a number from 0 to ${list.length - 1}`,
    );
  }
  return [index, rest.slice(word.length + 1)];
}
