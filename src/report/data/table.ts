import type { None } from '../../study/findings.ts';
import { fixed, rounded } from './fixed.ts';

/** What one field of a table holds; null is a field that the source does not have, {none} a figure that does not exist. */
export type Cell = number | string | null | None;

/** A column of a data file over a source: a pure description, so that the docs and the files cannot differ. */
export interface Column<Source> {
  /** Header, with the unit. */
  readonly name: string;
  /** Decimals of its numbers. */
  readonly decimals: number;
  /** What it means, for the docs. */
  readonly about: string;
  readonly value: (source: Source, row: number) => Cell;
}

/** A field as RFC 4180 wants it: quoted where it holds a comma, a quote or a line break. */
function quoted(text: string): string {
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

function field<Source>(column: Column<Source>, source: Source, row: number): string {
  const cell = column.value(source, row);
  if (typeof cell === 'number') return fixed(cell, column.decimals, `${column.name}, row ${row + 1}`);
  return typeof cell === 'string' ? quoted(cell) : '';
}

/**
 * CSV text by RFC 4180: a header, CRLF after each record, decimal points, empty where there is no value.
 *
 * @throws NotFiniteError for a number that is not finite
 */
export function csvText<Source>(columns: readonly Column<Source>[], source: Source, rows: number): string {
  const lines: string[] = [columns.map((column) => quoted(column.name)).join(',')];
  for (let row = 0; row < rows; row++) {
    let line = '';
    for (let c = 0; c < columns.length; c++)
      line += (c === 0 ? '' : ',') + field(columns[c] as Column<Source>, source, row);
    lines.push(line);
  }
  return `${lines.join('\r\n')}\r\n`;
}

export type JsonRow = Record<string, number | string | null>;

/** One row as JSON: rounded as in the file; a figure that does not exist is null, with its reason beside it. */
export function jsonRow<Source>(columns: readonly Column<Source>[], source: Source, row: number): JsonRow {
  const json: JsonRow = {};
  for (const { name, decimals, value } of columns) {
    const cell = value(source, row);
    if (typeof cell === 'number') json[name] = rounded(cell, decimals, `${name}, row ${row + 1}`);
    else if (cell === null || typeof cell === 'string') json[name] = cell;
    else {
      json[name] = null;
      json[`${name}_reason`] = cell.none;
    }
  }
  return json;
}
