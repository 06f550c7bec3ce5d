import { readdirSync, readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { parse } from 'yaml';
import { caseJsonSchema, vehicleJsonSchema } from '../../src/case/json-schema.ts';
import { starterCase } from '../../src/case/starter-case.ts';

interface Schema {
  readonly type?: string;
  readonly properties?: Readonly<Record<string, Schema>>;
  readonly required?: readonly string[];
  readonly additionalProperties?: boolean;
  readonly items?: Schema;
  readonly anyOf?: readonly Schema[];
  readonly enum?: readonly unknown[];
  readonly const?: unknown;
  readonly minimum?: number;
  readonly maximum?: number;
  readonly minItems?: number;
  readonly maxItems?: number;
  readonly minLength?: number;
  readonly maxLength?: number;
  readonly pattern?: string;
  readonly description?: string;
  readonly default?: unknown;
}
const KEYWORDS =
  'type properties required additionalProperties items anyOf enum const minimum maximum minItems maxItems minLength maxLength pattern description default title $schema';

/** A validator of the keywords that the schemas use, by the text of JSON Schema draft 2020-12. */
function accepts(schema: Schema, value: unknown): boolean {
  for (const keyword of Object.keys(schema))
    if (!KEYWORDS.split(' ').includes(keyword)) throw new Error(keyword);
  if (schema.anyOf !== undefined && !schema.anyOf.some((option) => accepts(option, value))) return false;
  if (schema.enum !== undefined && !schema.enum.includes(value)) return false;
  if (schema.const !== undefined && schema.const !== value) return false;
  if (schema.type === 'number' && typeof value !== 'number') return false;
  if (schema.type === 'integer' && !Number.isInteger(value)) return false;
  if (schema.type === 'string' && typeof value !== 'string') return false;
  if (schema.type === 'array' && !Array.isArray(value)) return false;
  if (schema.type === 'object' && (typeof value !== 'object' || value === null || Array.isArray(value)))
    return false;
  if (
    typeof value === 'number' &&
    (value < (schema.minimum ?? -Infinity) || value > (schema.maximum ?? Infinity))
  )
    return false;
  if (typeof value === 'string') {
    if (value.length < (schema.minLength ?? 0) || value.length > (schema.maxLength ?? Infinity)) return false;
    if (schema.pattern !== undefined && !new RegExp(schema.pattern, 'u').test(value)) return false;
  }
  if (Array.isArray(value)) {
    if (value.length < (schema.minItems ?? 0) || value.length > (schema.maxItems ?? Infinity)) return false;
    if (schema.items !== undefined && !value.every((item) => accepts(schema.items!, item))) return false;
  } else if (typeof value === 'object' && value !== null) {
    const object = value as Record<string, unknown>;
    if (!(schema.required ?? []).every((key) => Object.hasOwn(object, key))) return false;
    for (const [key, inner] of Object.entries(object)) {
      const property = schema.properties?.[key];
      if (property === undefined ? schema.additionalProperties === false : !accepts(property, inner))
        return false;
    }
  }
  return true;
}

const schemas = { case: caseJsonSchema() as Schema, vehicle: vehicleJsonSchema() as Schema };
const read = (path: string): unknown =>
  parse(readFileSync(new URL(`../../${path}`, import.meta.url), 'utf8'));

const filesIn = (folder: string): string[] =>
  readdirSync(new URL(`../../${folder}/`, import.meta.url))
    .filter((name) => name.endsWith('.yaml'))
    .map((name) => `${folder}/${name}`);

it.each(filesIn('routes'))('accepts %s', (path) => {
  expect(accepts(schemas.case, read(path))).toBe(true);
});

it.each(filesIn('routes/vehicles'))('accepts %s', (path) => {
  expect(accepts(schemas.vehicle, read(path))).toBe(true);
});

it('accepts the starter', () => {
  const [theCase, vehicle] = starterCase();
  expect(accepts(schemas.case, parse(theCase!.text))).toBe(true);
  expect(accepts(schemas.vehicle, parse(vehicle!.text))).toBe(true);
});

/** Faults across fields, which a JSON Schema cannot have. */
const ACROSS_FIELDS = [
  'not-in-order',
  'mixed-list',
  'doubled-name',
  'unknown-candidate',
  'unknown-figure',
  'below-roughness',
  'wrong-sense',
];
const BAND = ['figure-without-band.yaml', 'band-without-meaning.yaml'];
const NOT_DATA = /yaml-syntax|tab-|duplicate-|documents|alias|bad-key/;

it.each(['case', 'vehicle'] as const)('refuses the broken files of a %s that parse', (kind) => {
  const folder = `test/broken/${kind}s`;
  const table = JSON.parse(readFileSync(new URL(`../../${folder}/table.json`, import.meta.url), 'utf8')) as {
    file: string;
    code: string;
    /** Says of a fault with an everyday code that it lies between fields. */
    across?: boolean;
  }[];
  const shown = table.filter(
    ({ file, code, across }) =>
      across !== true && !NOT_DATA.test(code) && !ACROSS_FIELDS.includes(code) && !BAND.includes(file),
  );
  expect(shown.length).toBeGreaterThan(15);
  for (const { file, code } of shown) {
    // JSON has no NaN and no Infinity.
    if (code !== 'not-finite') expect(accepts(schemas[kind], read(`${folder}/${file}`)), file).toBe(false);
  }
});

function* fields(schema: Schema, name = ''): Generator<[name: string, schema: Schema]> {
  yield [name, schema];
  for (const option of schema.anyOf ?? []) yield* fields(option, name);
  if (schema.items !== undefined) yield* fields(schema.items, `${name}[]`);
  for (const [key, inner] of Object.entries(schema.properties ?? {})) yield* fields(inner, key);
}

/** Endings of keys, longest first, with the unit that each stands for. */
const ENDINGS: readonly (readonly [ending: string, unit: string])[] = [
  ['_n_per_kmh2', 'N per (km/h)2'],
  ['_counts_per_kmh', 'counts per km/h'],
  ['_pct_s_per_kmh', '% s per km/h'],
  ['_pct_per_kmh_s', '% per km/h s'],
  ['_pct_per_kmh', '% per km/h'],
  ['_pct_per_s', '%/s'],
  ['_n_per_kmh', 'N per km/h'],
  ['_s2_per_m2', 's2/m2'],
  ['_per_rad2', '1/rad2'],
  ['_s_per_m', 's/m'],
  ['_kg_m3', 'kg/m3'],
  ['_m_s2', 'm/s2'],
  ['_m_s', 'm/s'],
  ['_mj_per_kg', 'MJ/kg'],
  ['_kg_per_l', 'kg/l'],
  ['_g_per_kwh', 'g/kWh'],
  ['_g_per_h', 'g/h'],
  ['_kg_m2', 'kg m2'],
  ['_ohm', 'ohm'],
  ['_rpm', 'rpm'],
  ['_hz', 'Hz'],
  ['_kmh', 'km/h'],
  ['_nm', 'N m'],
  ['_wh', 'Wh'],
  ['_pct', '%'],
  ['_deg', 'deg'],
  ['_hpa', 'hPa'],
  ['_bar', 'bar'],
  ['_m2', 'm2'],
  ['_km', 'km'],
  ['_kg', 'kg'],
  ['_kw', 'kW'],
  ['_c', 'deg C'],
  ['_w', 'W'],
  ['_v', 'V'],
  ['_l', 'l'],
  ['_n', 'N'],
  ['_s', 's'],
  ['_m', 'm'],
];
/** Ratios, whose keys carry no unit; efficiencies have theirs in the key around them; limits in the figure's name. */
const WITHOUT_UNIT =
  `crr factor ki_factor setpoint_weight damping at_least at_most falloff shape gear_ratios primary_ratio
final_ratio high_ratio low_ratio friction_dry friction_wet max_sensitivity weight`.split(/\s/);

it('says for every number its range, and the unit that its key ends in', () => {
  for (const schema of Object.values(schemas))
    for (const [name, field] of fields(schema)) {
      if (field.type !== 'number') continue;
      expect(field.minimum, name).toBeTypeOf('number');
      expect(field.maximum, name).toBeTypeOf('number');
      const key = `_${name.replaceAll('[]', '')}`;
      const ending = ENDINGS.find(([end]) => key.endsWith(end));
      const unit = /\[([^\]]+)\]/.exec(field.description ?? '')?.[1];
      if (name === 'drive' || name === 'regeneration') expect(unit).toBe('%');
      else if (ending === undefined) expect(WITHOUT_UNIT, name).toContain(key.slice(1));
      else expect(unit, name).toBe(ending[1]);
    }
});

it('describes every field, allows no unknown key, and requires no key that has a default', () => {
  for (const schema of Object.values(schemas))
    for (const [name, field] of fields(schema)) {
      if (name !== '') expect(field.description ?? field.anyOf?.[0]?.description, name).toBeTypeOf('string');
      if (field.type !== 'object') continue;
      expect(field.additionalProperties, name).toBe(false);
      for (const key of field.required ?? [])
        expect(field.properties?.[key]?.default, `${name}.${key}`).toBeUndefined();
    }
});

it('is a draft 2020-12 schema and the same twice', () => {
  expect(caseJsonSchema()).toMatchObject({
    $schema: 'https://json-schema.org/draft/2020-12/schema',
    type: 'object',
  });
  expect(JSON.stringify(caseJsonSchema())).toBe(JSON.stringify(caseJsonSchema()));
  expect(JSON.stringify(vehicleJsonSchema())).toBe(JSON.stringify(vehicleJsonSchema()));
});
