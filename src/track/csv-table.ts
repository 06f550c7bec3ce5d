import { type CsvError, type InfoRecord, parse } from 'csv-parse/browser/esm/sync';
import { InputError } from '../problems/input-error.ts';
import type { CsvVocabulary } from './csv-columns.ts';
import { type CsvHeader, readCsvHeader } from './csv-header.ts';
import { parseNumber } from './parse-number.ts';

/** A CSV file by its columns, in SI. */
export interface CsvTable<Field extends string> {
  readonly size: number;
  /** Line of each row in the file. */
  readonly line: Int32Array;
  /** Numbers of a field, null where the file has no such column; empty cells NaN, words for no number Infinity. */
  readonly numbers: (field: Field) => Float64Array | null;
  /** Cells of a column of words, null where the file has none. */
  readonly words: (field: Field) => readonly string[] | null;
}

/**
 * Reads a CSV file (RFC 4180 quoting): a header that names quantity and unit of each column, then a row a point.
 * Comma, semicolon or tab between columns, told from the header; with the latter two a decimal comma is read as
 * well as a point, but not both in one file.
 *
 * @param text the decoded file, not blank
 * @param file name for messages
 * @param vocabulary columns that there may be
 * @throws InputError with line and column: see readCsvHeader, and `ragged-row`, `csv-syntax`, `not-a-number`,
 *   `missing-value`, `out-of-range`, `mixed-decimal-marks`
 */
export function readCsvTable<Field extends string>(
  text: string,
  file: string,
  vocabulary: CsvVocabulary<Field>,
): CsvTable<Field> {
  const [headerLine, headerNumber] = firstLine(text);
  const header = readCsvHeader(headerLine, headerNumber, file, vocabulary);
  const cells = header.columns.map((): number[] => []);
  const words = header.columns.map((): string[] => []);
  const lines: number[] = [];
  const readCell = cellReader(header, vocabulary, file);
  let rows = -1;
  const onRow = (row: readonly string[], { lines: line }: InfoRecord): null => {
    if (++rows === 0) return null;
    for (let c = 0; c < cells.length; c++)
      if (header.columns[c]!.number === null) words[c]!.push(row[c]!);
      else cells[c]!.push(readCell(row[c]!, c, line));
    lines.push(line);
    return null;
  };
  try {
    parse(text, { delimiter: header.delimiter, trim: true, skip_empty_lines: true, on_record: onRow });
  } catch (error) {
    throw error instanceof InputError ? error : csvProblem(error as CsvError, header, file);
  }
  const indexOf = (field: Field): number => header.columns.findIndex((c) => c.field === field);
  return {
    size: lines.length,
    line: Int32Array.from(lines),
    numbers: (field) => {
      const index = indexOf(field);
      return index < 0 ? null : Float64Array.from(cells[index]!);
    },
    words: (field) => words[indexOf(field)] ?? null,
  };
}

function firstLine(text: string): [string, number] {
  const lines = text.slice(0, text.search(/\S/)).split(/\r\n|\n|\r/).length;
  const line = text.trimStart().split(/\r\n|\n|\r/, 1)[0]!;
  return [line, lines];
}

/** Turns a cell into SI, and holds the file to one decimal mark. */
function cellReader<Field extends string>(
  header: CsvHeader<Field>,
  { mayBeEmpty }: CsvVocabulary<Field>,
  file: string,
): (text: string, column: number, line: number) => number {
  const commas = header.delimiter !== ',';
  let mark: '.' | ',' | null = null;
  return (text, c, line) => {
    const { name, field, number } = header.columns[c]!;
    const refuse = (code: string, message: string, allowed: string): never => {
      throw new InputError({ code, place: { file, line, key: name }, message, found: `'${text}'`, allowed });
    };
    if (text === '') {
      if (mayBeEmpty.has(field)) return Number.NaN;
      return refuse('missing-value', 'the cell is empty', 'a number in each row');
    }
    const used = text.includes(',') ? ',' : text.includes('.') ? '.' : null;
    const value = parseNumber(commas ? text.replace(',', '.') : text);
    if (value === null)
      return refuse(
        'not-a-number',
        'the cell is not a number',
        commas ? 'such as 12.5 or 12,5' : 'such as 12.5',
      );
    if (used !== null && mark !== null && used !== mark)
      return refuse(
        'mixed-decimal-marks',
        'the file has both decimal points and decimal commas',
        'one of them',
      );
    mark = used ?? mark;
    if (value === Number.POSITIVE_INFINITY) return value;
    const { least, most, convert } = number!;
    if (value < least || value > most)
      return refuse('out-of-range', 'the value is out of range', `${least} to ${most}`);
    return convert(value);
  };
}

function csvProblem(error: CsvError, header: CsvHeader<string>, file: string): InputError {
  const line = typeof error.lines === 'number' ? error.lines : undefined;
  const place = { file, ...(line === undefined ? {} : { line }) };
  if (error.code === 'CSV_RECORD_INCONSISTENT_FIELDS_LENGTH') {
    const record: unknown = error.record;
    return new InputError({
      code: 'ragged-row',
      place,
      message: 'the row does not have as many cells as the header',
      found: `cells: ${Array.isArray(record) ? record.length : 'another number'}`,
      allowed: `${header.columns.length}${header.delimiter === ',' ? '; decimal commas need semicolons or tabs between cells' : ''}`,
    });
  }
  const quotes = error.code.includes('QUOTE');
  return new InputError({
    code: 'csv-syntax',
    place,
    message: quotes ? 'a quotation mark stands open or in the wrong place' : 'the row cannot be read',
    allowed: 'plain or wholly quoted cells (RFC 4180)',
  });
}
