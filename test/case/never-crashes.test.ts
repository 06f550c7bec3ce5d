import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { parse, stringify } from 'yaml';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { InputError } from '../../src/problems/input-error.ts';

const route = (name: string): string =>
  readFileSync(new URL(`../../routes/${name}`, import.meta.url), 'utf8');
const CASES = ['harrow-gap.yaml', 'one-hill.yaml', 'tarrow-saltings.yaml', 'harrow-shifts.yaml'] as const;
const INLINED = ['one-hill.yaml', 'harrow-shifts.yaml'] as const;
const VEHICLES = [
  'vehicles/proving-125.yaml',
  'vehicles/proving-e.yaml',
  'vehicles/proving-belt.yaml',
  'vehicles/proving-125-cable.yaml',
] as const;
const READERS = [
  [readCaseFile, route('harrow-gap.yaml')],
  [readVehicleFile, route('vehicles/proving-e.yaml')],
  [readVehicleFile, route('vehicles/proving-125.yaml')],
  [readVehicleFile, route('vehicles/proving-belt.yaml')],
] as const;

/** Reads; whatever is refused must be refused properly, with a place. */
function readOrRefuse(read: (text: string, file: string) => unknown, text: string): void {
  try {
    read(text, 'f.yaml');
  } catch (error) {
    expect(error).toBeInstanceOf(InputError);
    const { problems } = error as InputError;
    for (const { place, message, code } of problems) {
      expect(place.file).toBe('f.yaml');
      if (code !== 'file-too-long') expect(place.line).toBeGreaterThanOrEqual(1);
      expect(`${message}${code}`).not.toMatch(/undefined|\[object|NaN/);
    }
    const lines = problems.map(({ place }) => place.line ?? 0);
    expect(lines).toEqual([...lines].sort((a, b) => a - b));
  }
}

const anything = fc.oneof(
  fc.anything({
    withNullPrototype: false,
    withBigInt: false,
    values: [fc.integer(), fc.double(), fc.string(), fc.boolean(), fc.constant(null)],
  }),
  fc.constantFrom<unknown>(
    [],
    {},
    [[]],
    [{}],
    null,
    '',
    '60',
    0,
    -1,
    1e300,
    'locked',
    { kind: 'pi' },
    { kind: 3 },
    { kind: null },
    { by: 'length' },
  ),
);

it('refuses properly, whatever is cut out of a file or put into it', () => {
  fc.assert(
    fc.property(
      fc.constantFrom(...READERS),
      fc.nat(),
      fc.nat(40),
      fc.string({ unit: 'grapheme', maxLength: 12 }),
      ([read, text], at, length, put) => {
        const start = at % text.length;
        readOrRefuse(read, text.slice(0, start) + put + text.slice(start + length));
      },
    ),
    { seed: 11, numRuns: 400 },
  );
});

it('refuses properly, whatever stands under a key', () => {
  const keys =
    'track road wind air vehicle hold rider candidates segments requirements output mass road_load drive actuator speed_sensor traction'.split(
      ' ',
    );
  fc.assert(
    fc.property(
      fc.constantFrom(...READERS),
      fc.constantFrom(...keys),
      anything,
      ([read, text], key, value) => {
        const without = text.replace(new RegExp(`^${key}:(.*\\n( .*\\n)*)`, 'm'), '');
        const put = stringify({ [key]: value }, { aliasDuplicateObjects: false });
        readOrRefuse(read, `${without}${put}`);
      },
    ),
    { seed: 12, numRuns: 400 },
  );
});

it('refuses properly what is nested far too deep, far too long or all line breaks', () => {
  for (const [read] of READERS)
    for (const text of [
      '['.repeat(10_000),
      '{a: '.repeat(5_000),
      '- '.repeat(5_000),
      '\n'.repeat(10_000),
      'a'.repeat(5_000_000),
      '? '.repeat(5_000),
      '&a '.repeat(10_000),
    ])
      readOrRefuse(read, text);
});

it('refuses overrides properly, whatever they are', () => {
  const [, text] = READERS[0];
  fc.assert(
    fc.property(
      fc.array(
        fc.constantFrom(
          'hold',
          'candidates',
          'pi-60s',
          '0',
          '9',
          'set_speed_kmh',
          'vehicle',
          '',
          'x',
          'requirements',
          'SH-01',
          '__proto__',
          'constructor',
        ),
        { maxLength: 4 },
      ),
      anything,
      (steps, value) => {
        try {
          readCaseFile(text, 'f.yaml', [`${steps.join('.')}=${JSON.stringify(value)}`]);
        } catch (error) {
          expect(error).toBeInstanceOf(InputError);
        }
      },
    ),
    { seed: 13, numRuns: 400 },
  );
});

type Keyed = Record<string | number, unknown>;
const isKeyed = (value: unknown): value is Keyed => typeof value === 'object' && value !== null;

/** The way to every key of every mapping of a file. */
const keysOf = (value: unknown, at: readonly (string | number)[] = []): (readonly (string | number)[])[] =>
  isKeyed(value)
    ? Object.entries(value).flatMap(([word, inner]) => {
        const path = [...at, Array.isArray(value) ? Number(word) : word];
        return Array.isArray(value) ? keysOf(inner, path) : [path, ...keysOf(inner, path)];
      })
    : [];

const inlined = (name: string): unknown => ({
  ...(parse(route(name)) as object),
  vehicle: parse(route(VEHICLES[0])) as unknown,
});

it.each([
  ...CASES.map((name) => [name, readCaseFile, parse(route(name)) as unknown] as const),
  ...INLINED.map((name) => [`${name} with its vehicle inside`, readCaseFile, inlined(name)] as const),
  ...VEHICLES.map((name) => [name, readVehicleFile, parse(route(name)) as unknown] as const),
])('refuses properly %s with any one key misspelt or gone', (_, read, file) => {
  const ways: readonly ((key: string) => string | null)[] = [
    () => null,
    (key) => `${key}s`,
    (key) => key.slice(0, -1),
    (key) => `${key.slice(1, 2)}${key.slice(0, 1)}${key.slice(2)}`,
    (key) => key.replace('_', ''),
    () => 'zzz',
  ];
  const misspelt = keysOf(file).flatMap((path) =>
    ways.map((way) => [path, way(String(path.at(-1)))] as const),
  );
  expect(misspelt.length).toBeGreaterThan(50);
  for (const [path, word] of misspelt) {
    const copy = structuredClone(file) as Keyed;
    let parent = copy;
    for (const step of path.slice(0, -1)) parent = parent[step] as Keyed;
    const key = path.at(-1)!;
    const value = parent[key];
    delete parent[key];
    if (word !== null) parent[word] = value;
    readOrRefuse(read, stringify(copy, { aliasDuplicateObjects: false }));
  }
});
