import * as z from 'zod';
import { readYaml } from '../../case/yaml-source.ts';
import { InputError } from '../../problems/input-error.ts';
import type { Place } from '../../problems/place.ts';

const text = z.string();
const number = z.number();
const figure = z.number().nullable();
const VERDICTS = ['met', 'not met', 'too close to call', 'not judged'] as const;

const candidate = z.looseObject({
  name: z.string().regex(/^[a-z0-9][a-z0-9-]{0,40}$/),
  kind: text,
  status: text,
  end_m: number,
  gains: z.record(z.string(), z.unknown()).nullable(),
});

const hillRow = z.looseObject({
  hill: number,
  candidate: text,
  kind: text,
  from_km: number,
  to_km: number,
  mean_grade_pct: number,
  speed_change_kmh: number,
  time_at_limit_s: number,
  recovery_s: figure,
  cause: text.nullable(),
  /** Not in results of earlier versions. */
  derating: text.nullable().optional(),
});

const requirement = z.object({
  id: text,
  figure: text,
  candidate: text,
  measured: figure,
  measured_reason: text.optional(),
  limit: number,
  sense: z.enum(['at least', 'at most']),
  band_kmh: number.optional(),
  where: text,
  margin: figure,
  worst_at_km: figure,
  verdict: z.enum(VERDICTS),
  words: text,
});

/** One combination of loads, winds, directions, gears and set speeds, with its verdicts. */
const combination = z.object({
  load: text,
  wind: text,
  direction: text,
  gear: figure,
  set_speed_kmh: number,
  requirements: z.array(z.object({ id: text, candidate: text, verdict: z.enum(VERDICTS) })),
});

const value = z.object({ key: text, value: text, of: z.enum(['vehicle', 'case']) });

const summarySchema = z.object({
  schema_version: text,
  tool: z.object({ version: text }),
  status: text,
  title: text,
  case: text,
  inputs: z.array(z.object({ name: text, sha256: z.string().regex(/^[0-9a-f]{64}$/) })).min(1),
  overrides: z.array(text),
  scheme: text,
  route: z.object({ name: text, length_m: number, climb_m: number, holdable_pct: number }),
  vehicle: z.object({ name: text, mass_kg: number }),
  hold: z.object({ set_speed_kmh: number, band_kmh: number }),
  candidates: z.array(candidate),
  hills: z.array(hillRow),
  requirements: z.array(requirement),
  defaults: z.array(value),
  files: z.array(text),
  /** Only of a case that has one. */
  matrix: z.object({ combinations: z.array(combination) }).optional(),
  /** Not before schema 1.1. */
  given: z.array(value).optional(),
});

/** A summary.json that was read: in the file's own keys and units, only what a comparison needs. */
export type ResultSummary = z.infer<typeof summarySchema>;
export type SummaryCandidate = ResultSummary['candidates'][number];
export type SummaryRequirement = ResultSummary['requirements'][number];
export type MatrixCombination = z.infer<typeof combination>;
export type SummaryHillRow = ResultSummary['hills'][number];

/** Name of a candidate's series below the folder of a result. */
export const seriesName = (candidate: string): string => `series-${candidate}.csv`;

/**
 * Reads the summary that `ridgehold run` wrote.
 *
 * @param file name for messages
 * @throws InputError `json-syntax` with line and column, `not-a-summary` with the key, `other-schema-version`,
 *   `missing-file` for a series that the summary does not list
 */
export function readSummary(text: string, file: string): ResultSummary {
  const value = parsed(text, file);
  checkVersion(value, file);
  const read = summarySchema.safeParse(value);
  if (!read.success) {
    const { path, message } = read.error.issues[0]!;
    throw notSummary({ file, ...(path.length === 0 ? {} : { key: path.join('.') }) }, message);
  }
  const names = read.data.candidates.map(({ name }) => name);
  const twice = names.find((name, i) => names.indexOf(name) !== i);
  if (twice !== undefined) throw notSummary({ file, key: 'candidates' }, `two are called ${twice}`);
  const unlisted = names.map(seriesName).find((name) => !read.data.files.includes(name));
  if (unlisted !== undefined)
    throw new InputError({
      code: 'missing-file',
      place: { file, key: 'files' },
      message: `does not list ${unlisted}`,
      allowed: 'the series of every candidate',
    });
  return read.data;
}

function parsed(text: string, file: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    throw new InputError({
      code: 'json-syntax',
      place: { file, ...damageIn(text, file) },
      message: 'is damaged: it is not valid JSON',
      allowed: 'the file as ridgehold run wrote it',
    });
  }
}

/** Engines tell the place of a fault each in its own way, or not at all: JSON is YAML, whose reader tells it. */
function damageIn(text: string, file: string): Place {
  try {
    readYaml(text, file);
    return {};
  } catch (error) {
    return error instanceof InputError ? error.problems[0]!.place : {};
  }
}

function checkVersion(value: unknown, file: string): void {
  const version =
    typeof value === 'object' && value !== null && 'schema_version' in value
      ? value.schema_version
      : undefined;
  if (typeof version !== 'string' || !/^\d+\.\d+$/.test(version))
    throw notSummary({ file, key: 'schema_version' }, 'there is no version of its shape');
  if (version.startsWith('1.')) return;
  throw new InputError({
    code: 'other-schema-version',
    place: { file, key: 'schema_version' },
    message: 'is of a shape that this version does not read',
    found: version,
    allowed: '1.0 and later 1.x: run the case again with this version',
  });
}

const notSummary = (place: Place, found: string): InputError =>
  new InputError({
    code: 'not-a-summary',
    place,
    message: 'is not what ridgehold run writes',
    found: found.charAt(0).toLowerCase() + found.slice(1),
  });
