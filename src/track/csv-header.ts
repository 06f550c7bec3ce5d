import { InputError } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import { CSV_COLUMNS, type CsvColumn, meantColumns } from './csv-columns.ts';
import { parseNumber } from './parse-number.ts';

/** The first line of a CSV track, understood. */
export interface CsvHeader {
  readonly delimiter: ',' | ';' | '\t';
  readonly columns: readonly (CsvColumn & { readonly name: string })[];
}

const ALLOWED = Object.keys(CSV_COLUMNS).join(', ');
const DELIMITERS = [';', '\t', ','] as const;

/**
 * Understands the header line of a CSV track: its delimiter and its columns, whose names carry the units.
 *
 * @param line the first line that is not blank
 * @param number its number in the file
 * @param file name for messages
 * @throws InputError with line and column: `missing-header`, `unknown-column`, `column-without-unit`, `duplicate-column`,
 *   `missing-column`
 */
export function readCsvHeader(line: string, number: number, file: string): CsvHeader {
  const delimiter = DELIMITERS.find((mark) => line.includes(mark)) ?? ',';
  let at = 1;
  const seen = new Map<string, string>();
  if (line.split(delimiter).every((cell) => parseNumber(cell.trim().replace(',', '.')) !== null))
    throw new InputError({
      code: 'missing-header',
      place: { file, line: number },
      message: 'the first line has only numbers; it must name the columns',
      found: `'${line.trim().slice(0, 40)}'`,
      allowed: ALLOWED,
    });
  const columns = line.split(delimiter).map((cell) => {
    const name = cell.trim().replace(/^"(.*)"$/, '$1');
    const place = { file, line: number, column: at + cell.length - cell.trimStart().length };
    at += cell.length + 1;
    const column = Object.hasOwn(CSV_COLUMNS, name) ? CSV_COLUMNS[name] : undefined;
    if (column === undefined) throw unknownColumn(name, place);
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
    return { ...column, name };
  });
  requireColumns(seen, { file, line: number });
  return { delimiter, columns };
}

function unknownColumn(name: string, place: Place): InputError {
  const meant = meantColumns(name);
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
    allowed: ALLOWED,
  });
}

function requireColumns(seen: ReadonlyMap<string, string>, place: Place): void {
  const found = [...seen.values()].join(', ');
  const refuse = (message: string, allowed: string): never => {
    throw new InputError({ code: 'missing-column', place, message, found, allowed });
  };
  if (seen.has('latitudeDeg') !== seen.has('longitudeDeg'))
    refuse('a latitude needs a longitude', 'lat_deg, lon_deg');
  if (!seen.has('distance') && !seen.has('latitudeDeg'))
    refuse('the file does not say where its points are', 'distance_m or distance_km, or lat_deg and lon_deg');
  if (!seen.has('elevation') && !seen.has('grade'))
    refuse('the file has neither elevation nor grade', 'elevation_m or grade_pct');
}
