import { parse } from 'csv-parse/sync';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { type Column, csvText, jsonRow } from '../../../src/report/data/table.ts';

interface Pair {
  readonly name: string;
  readonly speed: number | null | { readonly none: string };
}
const COLUMNS: readonly Column<readonly Pair[]>[] = [
  { name: 'name', decimals: 0, about: '', value: (rows, i) => rows[i]!.name },
  { name: 'speed_kmh', decimals: 1, about: '', value: (rows, i) => rows[i]!.speed },
];

test('a table has a header, CRLF after every record, and empty fields where there is no value', () => {
  const rows = [
    { name: 'a', speed: 1.25 },
    { name: 'b', speed: null },
    { name: 'c', speed: { none: 'the run ended before' } },
  ];
  expect(csvText(COLUMNS, rows, 3)).toBe('name,speed_kmh\r\na,1.3\r\nb,\r\nc,\r\n');
  expect(csvText(COLUMNS, [], 0)).toBe('name,speed_kmh\r\n');
});

test('any text comes back from a reader of RFC 4180', () => {
  fc.assert(
    fc.property(fc.array(fc.string({ unit: 'binary' }), { minLength: 1, maxLength: 5 }), (names) => {
      const rows = names.map((name) => ({ name: `_${name}`, speed: 0 }));
      const read = parse(csvText(COLUMNS, rows, rows.length), { record_delimiter: '\r\n' }) as string[][];
      expect(read.slice(1).map((record) => record[0])).toEqual(names.map((name) => `_${name}`));
    }),
    { seed: 4180 },
  );
});

test('a figure that does not exist is null in JSON, with its reason beside it', () => {
  const row = jsonRow(COLUMNS, [{ name: 'a', speed: { none: 'it never recovered' } }], 0);
  expect(row).toEqual({ name: 'a', speed_kmh: null, speed_kmh_reason: 'it never recovered' });
});

test('a number that is not finite names its column and row', () => {
  expect(() => csvText(COLUMNS, [{ name: 'a', speed: Number.NaN }], 1)).toThrow('speed_kmh, row 1 is NaN');
});
