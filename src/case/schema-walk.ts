import * as z from 'zod';
import { fieldNotes } from './fields.ts';

type Schema = z.core.$ZodType;

/** The schema inside of defaults and optionals. */
export function bare(schema: Schema): Schema {
  let inner = schema;
  while (
    inner instanceof z.ZodDefault ||
    inner instanceof z.ZodPrefault ||
    inner instanceof z.ZodExactOptional ||
    inner instanceof z.ZodOptional
  )
    inner = inner.def.innerType as Schema;
  return inner;
}

/** Keys of a mapping's schema; none for anything else. */
export function shapeOf(schema: Schema): Readonly<Record<string, Schema>> {
  const inner = bare(schema);
  return inner instanceof z.ZodObject ? (inner.def.shape as Record<string, Schema>) : {};
}

/** Keys that must be written. */
export function neededKeys(schema: Schema): string[] {
  const shape = shapeOf(schema);
  return Object.keys(shape).filter((key) => bare(shape[key]!) === shape[key]);
}

export const isMapping = (value: unknown): value is Record<string, unknown> =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

/** Keys by which the options of a union are told apart (`kind`, `by`), with all that each may be. */
export function tellingKeys(options: readonly Schema[]): Map<string, string[]> {
  const found = new Map<string, string[]>();
  for (const option of options)
    for (const [key, field] of Object.entries(shapeOf(option)))
      if (field instanceof z.ZodLiteral) {
        const words = found.get(key) ?? [];
        for (const value of field.def.values) if (!words.includes(String(value))) words.push(String(value));
        found.set(key, words);
      }
  return found;
}

/** Options of a union in the order written, unions inside flattened out; the schema itself when it is none. */
export function optionsOf(schema: Schema): readonly Schema[] {
  const inner = bare(schema);
  return inner instanceof z.ZodUnion ? (inner.def.options as readonly Schema[]) : [inner];
}

/**
 * The option of a union that the writer most likely meant: same kind of value, same telling words, most keys in
 * common, fewest keys missing; the first of equals.
 */
export function optionFor(options: readonly Schema[], value: unknown): number {
  let best = 0;
  let bestScore = Number.NEGATIVE_INFINITY;
  options.forEach((option, i) => {
    const score = likeness(bare(option), value);
    if (score > bestScore) {
      best = i;
      bestScore = score;
    }
  });
  return best;
}

function likeness(option: Schema, value: unknown): number {
  if (!(option instanceof z.ZodObject)) {
    const type =
      option instanceof z.ZodNumber ? 'number' : option instanceof z.ZodArray ? 'object' : 'string';
    return typeof value === type ? 100 : 0;
  }
  if (!isMapping(value)) return 0;
  const shape = shapeOf(option);
  let score = 100;
  for (const [key, field] of Object.entries(shape)) {
    const given = Object.hasOwn(value, key);
    if (given) score += 1;
    if (field instanceof z.ZodLiteral && given)
      score += field.def.values.includes(value[key] as string) ? 1000 : -1000;
  }
  return score - neededKeys(option).filter((key) => !Object.hasOwn(value, key)).length / 100;
}

/** The schema at a path, by the options that the value most likely means; null where the schema has no such place. */
export function schemaAt(root: Schema, value: unknown, path: readonly (string | number)[]): Schema | null {
  let schema: Schema | undefined = root;
  let here = value;
  for (const step of path) {
    if (schema === undefined) return null;
    schema = stepInto(chosen(schema, here), step);
    here =
      typeof here === 'object' && here !== null
        ? (here as Record<string | number, unknown>)[step]
        : undefined;
  }
  return schema ?? null;
}

/** A union's likely option, bare. */
export function chosen(schema: Schema, value: unknown): Schema {
  const options = optionsOf(schema);
  const option = bare(options[optionFor(options, value)]!);
  return option instanceof z.ZodUnion ? chosen(option, value) : option;
}

function stepInto(schema: Schema, step: string | number): Schema | undefined {
  if (schema instanceof z.ZodArray) return schema.def.element as Schema;
  if (schema instanceof z.ZodTuple) return schema.def.items[Number(step)] as Schema | undefined;
  const shape = shapeOf(schema);
  return Object.hasOwn(shape, step) ? shape[String(step)] : undefined;
}

const keyWords = (keys: readonly string[]): string =>
  keys.length > 8 ? `${keys.slice(0, 7).join(', ')} and others` : keys.join(', ');

/** What is allowed, in words: every option of a union. */
export function allowedWords(schema: Schema): string {
  const words = optionsOf(schema).map((option) => {
    const inner = bare(option);
    if (inner instanceof z.ZodUnion) return allowedWords(inner);
    if (inner instanceof z.ZodObject) return `a mapping of ${keyWords(Object.keys(shapeOf(inner)))}`;
    return fieldNotes.get(inner)?.allowed ?? (inner as z.ZodType).description ?? inner._zod.def.type;
  });
  return [...new Set(words)].join(', or ');
}
