import { type CsvError, type InfoRecord, parse } from 'csv-parse/browser/esm/sync';
import { InputError } from '../problems/input-error.ts';
import { type CsvHeader, readCsvHeader } from './csv-header.ts';
import { parseNumber } from './parse-number.ts';
import type { RawTrack } from './raw-track.ts';

/** Columns whose empty cells the cleaning can fill; elsewhere an empty cell is refused. */
const MAY_BE_EMPTY: ReadonlySet<string> = new Set(['elevation', 'grade', 'heading', 'headwind', 'speed']);

/**
 * Reads a CSV track (RFC 4180 quoting): a header that names quantity and unit of each column, then a row a point.
 * Comma, semicolon or tab between columns, told from the header; with the latter two a decimal comma is read as
 * well as a point, but not both in one file.
 *
 * @param text the decoded file
 * @param file name for messages
 * @returns the points as the file gives them; empty cells NaN, words for no number Infinity
 * @throws InputError with line and column: see readCsvHeader, and `ragged-row`, `csv-syntax`, `not-a-number`,
 *   `missing-value`, `out-of-range`, `mixed-decimal-marks`
 */
export function readCsv(text: string, file: string): RawTrack {
  const [headerLine, headerNumber] = firstLine(text);
  const header = readCsvHeader(headerLine, headerNumber, file);
  const cells = header.columns.map((): number[] => []);
  const lines: number[] = [];
  const readCell = cellReader(header, file);
  let rows = -1;
  const onRow = (row: readonly string[], { lines: line }: InfoRecord): null => {
    if (++rows === 0) return null;
    for (let c = 0; c < cells.length; c++) cells[c]!.push(readCell(row[c]!, c, line));
    lines.push(line);
    return null;
  };
  try {
    parse(text, { delimiter: header.delimiter, trim: true, skip_empty_lines: true, on_record: onRow });
  } catch (error) {
    throw error instanceof InputError ? error : csvProblem(error as CsvError, header, file);
  }
  const column = (field: string): Float64Array | null => {
    const index = header.columns.findIndex((c) => c.field === field);
    return index < 0 ? null : Float64Array.from(cells[index]!);
  };
  return {
    file,
    name: null,
    format: 'csv',
    size: lines.length,
    line: Int32Array.from(lines),
    segment: new Int32Array(lines.length),
    distance: column('distance'),
    latitudeDeg: column('latitudeDeg'),
    longitudeDeg: column('longitudeDeg'),
    elevation: column('elevation'),
    grade: column('grade'),
    heading: column('heading'),
    headwind: column('headwind'),
    time: column('time'),
    speed: column('speed'),
  };
}

function firstLine(text: string): [string, number] {
  const lines = text.slice(0, text.search(/\S/)).split(/\r\n|\n|\r/).length;
  const line = text.trimStart().split(/\r\n|\n|\r/, 1)[0]!;
  return [line, lines];
}

/** Turns a cell into SI, and holds the file to one decimal mark. */
function cellReader(header: CsvHeader, file: string): (text: string, column: number, line: number) => number {
  const commas = header.delimiter !== ',';
  let mark: '.' | ',' | null = null;
  return (text, c, line) => {
    const { name, field, least, most, convert } = header.columns[c]!;
    const refuse = (code: string, message: string, allowed: string): never => {
      throw new InputError({ code, place: { file, line, key: name }, message, found: `'${text}'`, allowed });
    };
    if (text === '') {
      if (MAY_BE_EMPTY.has(field)) return Number.NaN;
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
    if (value < least || value > most)
      return refuse('out-of-range', 'the value is out of range', `${least} to ${most}`);
    return convert(value);
  };
}

function csvProblem(error: CsvError, header: CsvHeader, file: string): InputError {
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
