import * as z from 'zod';
import { caseSchema } from './case-schema.ts';
import { fieldNotes } from './fields.ts';
import { vehicleSchema } from './vehicle-schema.ts';

/** JSON Schema (draft 2020-12) of a case file, from the source of its checks: keys, units, ranges, defaults and their sources. */
export function caseJsonSchema(): Record<string, unknown> {
  return jsonSchemaOf(caseSchema, 'Ridgehold case');
}

/** JSON Schema (draft 2020-12) of a vehicle file. */
export function vehicleJsonSchema(): Record<string, unknown> {
  return jsonSchemaOf(vehicleSchema, 'Ridgehold vehicle');
}

/** Rules across fields (order of stretches, doubled names, ...) are beyond it: the program's own checks have them. */
function jsonSchemaOf(schema: z.ZodType, title: string): Record<string, unknown> {
  const { $schema, ...rest } = z.toJSONSchema(schema, {
    target: 'draft-2020-12',
    io: 'input',
    override: ({ zodSchema, jsonSchema }) => {
      const source = fieldNotes.get(zodSchema)?.source;
      if (source === undefined) return;
      jsonSchema.description = `${jsonSchema.description ?? ''} (left out: ${source})`.trimStart();
    },
  });
  return { $schema, title, ...rest };
}
