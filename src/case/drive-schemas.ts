import * as z from 'zod';
import type { Drive } from '../vehicle/drive.ts';
import { electricSchema } from './electric-schema.ts';
import { engineSchema } from './engine-schema.ts';
import { forceSchema } from './force-schema.ts';
import { variatorSchema } from './variator-schema.ts';

/** A kind of drive without a schema does not compile. */
const driveSchemas = {
  force: forceSchema,
  engine: engineSchema,
  variator: variatorSchema,
  electric: electricSchema,
} satisfies Record<Drive['kind'], z.ZodType>;

const { force, engine, variator, electric } = driveSchemas;

/** What drives the vehicle. */
export const driveSchema = z.union([force, engine, variator, electric]).meta({ description: 'Drive' });

export type DriveFile = z.output<typeof driveSchema>;
export type DriveFileOf<K extends Drive['kind']> = z.output<(typeof driveSchemas)[K]>;
