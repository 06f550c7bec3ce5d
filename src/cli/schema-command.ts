import { caseJsonSchema, vehicleJsonSchema } from '../case/json-schema.ts';
import { InputError } from '../problems/input-error.ts';
import type { Invocation } from './commands.ts';
import { DONE } from './exit-status.ts';
import { writeText } from './write-text.ts';

const SCHEMAS: Readonly<Record<string, () => unknown>> = { case: caseJsonSchema, vehicle: vehicleJsonSchema };

/** `ridgehold schema case|vehicle`: the JSON Schema of a file, from the same source as its checks. */
export function schemaCommand({ operands: [what], values }: Invocation<'schema'>): number {
  const schema = Object.hasOwn(SCHEMAS, what) ? SCHEMAS[what] : undefined;
  if (schema === undefined)
    throw new InputError({
      code: 'unknown-schema',
      place: {},
      message: `there is no schema of '${what}'`,
      allowed: Object.keys(SCHEMAS).join(', '),
    });
  const text = `${JSON.stringify(schema(), null, 2)}\n`;
  if (values.out === undefined) process.stdout.write(text);
  else writeText(values.out, text);
  return DONE;
}
