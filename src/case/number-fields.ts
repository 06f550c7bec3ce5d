import * as z from 'zod';
import { caseSchema } from './case-schema.ts';
import { fieldNotes } from './fields.ts';
import { bare, chosen, isMapping, schemaAt } from './schema-walk.ts';
import { vehicleSchema } from './vehicle-schema.ts';
import { type Path, pathWords, readYaml } from './yaml-source.ts';

/** A number that a file gives, with what its schema says of it. */
export interface NumberField {
  readonly path: Path;
  /** Dotted, list items by name or id where they have one: as messages tell it. */
  readonly key: string;
  readonly value: number;
  /** `''`: none. */
  readonly unit: string;
  /** What it is. */
  readonly words: string;
  /** Range, ends included. */
  readonly least: number;
  readonly most: number;
  readonly whole: boolean;
}

/** A longer list of mappings, such as a written road, is a table: not for typing number by number. So is any of a vehicle. */
const LONGEST_LIST = 12;

/**
 * The numbers that a text gives and that can be changed one by one, in the order of the text. Lists of plain numbers,
 * tables, and everything that its schema does not know or takes for another kind of value are left out.
 *
 * @param kind whose keys the text has; a vehicle written in a case is part of it
 * @throws InputError as `readYaml`
 */
export function numberFields(text: string, kind: 'case' | 'vehicle'): readonly NumberField[] {
  const root: z.ZodType = kind === 'case' ? caseSchema : vehicleSchema;
  const { value } = readYaml(text, kind);
  const found: NumberField[] = [];
  const visit = (here: unknown, path: Path): void => {
    if (isMapping(here)) for (const [key, inner] of Object.entries(here)) visit(inner, [...path, key]);
    else if (Array.isArray(here)) {
      const isTable = kind === 'vehicle' || path[0] === 'vehicle' || here.length > LONGEST_LIST;
      if (!isTable && here.every(isMapping))
        for (const [i, item] of here.entries()) visit(item, [...path, i]);
    } else if (typeof here === 'number') {
      const field = schemaAt(root, value, path);
      const number = field === null ? null : bare(chosen(field, here));
      if (!(number instanceof z.ZodNumber)) return;
      const { minValue, maxValue } = number;
      if (minValue === null || maxValue === null) return;
      const unit = fieldNotes.get(number)?.unit ?? '';
      const words = (number.description ?? '').replace(/ \[[^\]]*\]$/, '');
      found.push({
        path,
        key: pathWords(value, path),
        value: here,
        unit,
        words,
        least: minValue,
        most: maxValue,
        whole: number.isInt,
      });
    }
  };
  visit(value, []);
  return found;
}
