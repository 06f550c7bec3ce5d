import * as z from 'zod';
import { fieldNotes } from './fields.ts';
import { bare, chosen, isMapping, shapeOf } from './schema-walk.ts';
import { type Path, pathWords } from './yaml-source.ts';

/** A value the user did not give. */
export interface DefaultUsed {
  /** Dotted path in the case or vehicle file, unit in the key. */
  readonly key: string;
  /** As it would be written in the file. */
  readonly value: string;
  /** `vehicle` or `case`. */
  readonly of: 'vehicle' | 'case';
  /** Where the value comes from. */
  readonly source: string;
}

/** Every default that a file leaves to the schema, in the order of the schema. */
export function listDefaults(schema: z.ZodType, value: unknown, of: DefaultUsed['of']): DefaultUsed[] {
  const list: DefaultUsed[] = [];
  const note = (path: Path, field: z.core.$ZodType, written: string): void => {
    const source = fieldNotes.get(field)?.source;
    if (source !== undefined) list.push({ key: pathWords(value, path), value: written, of, source });
  };
  const visit = (field: z.core.$ZodType, here: unknown, path: Path): void => {
    const option = chosen(field, here);
    if (Array.isArray(here) && option instanceof z.ZodArray)
      here.forEach((item, i) => {
        visit(option.def.element as z.core.$ZodType, item, [...path, i]);
      });
    if (!isMapping(here)) return;
    for (const [key, inner] of Object.entries(shapeOf(option))) {
      const at = [...path, key];
      if (Object.hasOwn(here, key)) visit(inner, here[key], at);
      else if (inner instanceof z.ZodPrefault) visit(bare(inner), {}, at);
      else if (inner instanceof z.ZodDefault) note(at, inner, written(inner.def.defaultValue));
      else note(at, inner, fieldNotes.get(inner)?.absent ?? '');
    }
  };
  visit(schema, value, []);
  return list;
}

/** As it would be written in the file, on one line. */
function written(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(written).join(', ')}]`;
  if (!isMapping(value)) return String(value);
  return `{${Object.entries(value)
    .map(([key, inner]) => `${key}: ${written(inner)}`)
    .join(', ')}}`;
}
