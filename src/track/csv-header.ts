import { InputError } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import type { CsvColumn, CsvVocabulary } from './csv-columns.ts';
import { parseNumber } from './parse-number.ts';

/** A column of a header: of numbers with their range, or of words. */
export type NamedColumn<Field extends string> = {
  readonly name: string;
  readonly field: Field;
  readonly number: CsvColumn<Field> | null;
};

/** The first line of a CSV file, understood. */
export interface CsvHeader<Field extends string> {
  readonly delimiter: ',' | ';' | '\t';
  readonly columns: readonly NamedColumn<Field>[];
}

const DELIMITERS = [';', '\t', ','] as const;

/**
 * Understands the header line of a CSV file: its delimiter and its columns, whose names carry the units.
 *
 * @param line the first line that is not blank
 * @param number its number in the file
 * @param file name for messages
 * @param vocabulary columns that there may be
 * @throws InputError with line and column: `missing-header`, `unknown-column`, `column-without-unit`, `duplicate-column`,
 *   `missing-column`
 */
export function readCsvHeader<Field extends string>(
  line: string,
  number: number,
  file: string,
  vocabulary: CsvVocabulary<Field>,
): CsvHeader<Field> {
  const delimiter = DELIMITERS.find((mark) => line.includes(mark)) ?? ',';
  let at = 1;
  const seen = new Map<Field, string>();
  if (line.split(delimiter).every((cell) => parseNumber(cell.trim().replace(',', '.')) !== null))
    throw new InputError({
      code: 'missing-header',
      place: { file, line: number },
      message: 'the first line has only numbers; it must name the columns',
      found: `'${line.trim().slice(0, 40)}'`,
      allowed: allNames(vocabulary),
    });
  const columns = line.split(delimiter).map((cell) => {
    const name = cell.trim().replace(/^"(.*)"$/, '$1');
    const place = { file, line: number, column: at + cell.length - cell.trimStart().length };
    at += cell.length + 1;
    const column = columnOf(name, vocabulary);
    if (column === null) throw unknownColumn(name, place, vocabulary);
    const before = seen.get(column.field);
    if (before !== undefined)
      throw new InputError({
        code: 'duplicate-column',
        place,
        message: before === name ? 'the column stands twice' : `the column says the same as ${before}`,
        found: `'${name}'`,
        allowed: 'each column once',
      });
    seen.set(column.field, name);
    return column;
  });
  vocabulary.check(seen, { file, line: number });
  return { delimiter, columns };
}

function columnOf<Field extends string>(
  name: string,
  { columns, words }: CsvVocabulary<Field>,
): NamedColumn<Field> | null {
  const number = Object.hasOwn(columns, name) ? (columns[name] ?? null) : null;
  if (number !== null) return { name, field: number.field, number };
  const word = Object.hasOwn(words, name) ? words[name] : undefined;
  return word === undefined ? null : { name, field: word.field, number: null };
}

const allNames = ({ columns, words }: Pick<CsvVocabulary, 'columns' | 'words'>): string =>
  [...Object.keys(columns), ...Object.keys(words)].join(', ');

function unknownColumn<Field extends string>(
  name: string,
  place: Place,
  vocabulary: CsvVocabulary<Field>,
): InputError {
  const meant = meantColumns(name, vocabulary);
  const found = name === '' ? 'an empty name' : `'${name}'`;
  if (meant.length > 0)
    return new InputError({
      code: 'column-without-unit',
      place,
      message: 'the column does not name its quantity and unit as needed',
      found,
      allowed: meant.join(' or '),
    });
  return new InputError({
    code: 'unknown-column',
    place,
    message: 'the column is not known',
    found,
    allowed: allNames(vocabulary),
  });
}

/** The allowed names that a wrong one probably means; empty when none is near. */
function meantColumns(name: string, { meant }: Pick<CsvVocabulary, 'meant'>): readonly string[] {
  const plain = name
    .toLowerCase()
    .replace(/[\s([/-]+/g, '_')
    .replace(/[)\]]/g, '');
  return meant.find(([pattern]) => pattern.test(plain))?.[1] ?? [];
}
