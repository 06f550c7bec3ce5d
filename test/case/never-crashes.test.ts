import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { stringify } from 'yaml';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { InputError } from '../../src/problems/input-error.ts';

const route = (name: string): string =>
  readFileSync(new URL(`../../routes/${name}`, import.meta.url), 'utf8');
const READERS = [
  [readCaseFile, route('harrow-gap.yaml')],
  [readVehicleFile, route('vehicles/proving-e.yaml')],
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
    'track road wind air vehicle hold rider candidates segments requirements output mass road_load drive actuator'.split(
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
