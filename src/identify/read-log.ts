import { atan2, cos, sin } from '../numeric/elementary.ts';
import { InputError, type Problem } from '../problems/input-error.ts';
import { type CsvTable, readCsvTable } from '../track/csv-table.ts';
import type { Direction } from './coast-down.ts';
import { LOG_VOCABULARY, type LogField } from './log-columns.ts';

/** Most rows of a log: at 100 Hz two and a half hours. */
const MOST_ROWS = 1_000_000;

/** A stretch of a log without a break, in SI. Null columns: the log has none. */
export interface LoggedRun {
  readonly file: string;
  /** The file's name without its folders, and the run's where the file has several. */
  readonly name: string;
  /** Line of each row in the file. */
  readonly line: Int32Array;
  /** Null: the log does not say. */
  readonly direction: Direction | null;
  /** Mean heading, clockwise from north [rad]; null: the log has none. */
  readonly heading: number | null;
  /** From the first row [s], rising. */
  readonly time: Float64Array;
  readonly speed: Float64Array;
  readonly distance: Float64Array | null;
  readonly elevation: Float64Array | null;
  readonly grade: Float64Array | null;
  readonly headwind: Float64Array | null;
  readonly latitudeDeg: Float64Array | null;
  readonly longitudeDeg: Float64Array | null;
  /** -1 to 1. */
  readonly throttle: Float64Array | null;
  /** Power at the driven wheel [W]. */
  readonly wheelPower: Float64Array | null;
}

/**
 * Reads a log: CSV as tracks have it, with `time_s` and `speed_kmh` or `speed_m_s`, and what else was measured. A column
 * `run` tells runs apart; a column `direction` (there or back), or else `heading_deg`, says which way a run went.
 *
 * @param text the decoded file
 * @param file name for messages
 * @returns its runs in the order of the file, at least one, each of two rows or more
 * @throws InputError with line and column: of readCsvTable, and `log-too-short`, `log-too-long`, `not-finite`,
 *   `time-not-rising`, `distance-falling`, `run-twice`, `unknown-direction`, `direction-changes`
 */
export function readLog(text: string, file: string): readonly LoggedRun[] {
  const table = readCsvTable(text, file, LOG_VOCABULARY);
  if (table.size > MOST_ROWS)
    throw new InputError({
      code: 'log-too-long',
      place: { file },
      message: 'the log has too many rows',
      found: `${table.size}`,
      allowed: `up to ${MOST_ROWS}; thinned to some 10 rows a second it is as good`,
    });
  const columns = columnsOf(table, file);
  const base = file.split(/[\\/]/).at(-1) ?? file;
  const runs = boundsOf(table, file).map(({ from, to, name }): LoggedRun => {
    if (to - from < 2) throw tooShort(file, table.line[from], to - from, name);
    const part = (field: LogField): Float64Array | null => columns(field)?.slice(from, to) ?? null;
    const line = table.line.slice(from, to);
    const time = part('time')!;
    const run: LoggedRun = {
      file,
      name: name === null ? base : `${base} run ${name}`,
      line,
      direction: directionOf(table, from, to, file),
      heading: meanHeading(part('heading')),
      time: time.map((t) => t - time[0]!),
      speed: part('speed')!,
      distance: part('distance'),
      elevation: part('elevation'),
      grade: part('grade'),
      headwind: part('headwind'),
      latitudeDeg: part('latitudeDeg'),
      longitudeDeg: part('longitudeDeg'),
      throttle: part('throttle'),
      wheelPower: part('wheelPower'),
    };
    refuseOrder(run);
    return run;
  });
  if (runs.length === 0) throw tooShort(file, 1, 0, null);
  return runs;
}

const tooShort = (file: string, line: number | undefined, rows: number, run: string | null): InputError =>
  new InputError({
    code: 'log-too-short',
    place: { file, ...(line === undefined ? {} : { line }) },
    message: run === null ? 'the log has too few rows' : `run ${run} has too few rows`,
    found: `${rows}`,
    allowed: '2 or more',
  });

/** Columns of numbers, all of them finite. */
function columnsOf(table: CsvTable<LogField>, file: string): (field: LogField) => Float64Array | null {
  return (field) => {
    const column = table.numbers(field);
    const at = column?.findIndex((value) => !Number.isFinite(value)) ?? -1;
    if (at < 0) return column;
    throw new InputError({
      code: 'not-finite',
      place: { file, line: table.line[at]! },
      message: `the ${WORDS[field] ?? field} is no number`,
      allowed: 'a number in each row; leave out rows that the logger lost',
    });
  };
}

const WORDS: Partial<Record<LogField, string>> = {
  latitudeDeg: 'latitude',
  longitudeDeg: 'longitude',
  wheelPower: 'wheel power',
};

interface Bounds {
  readonly from: number;
  readonly to: number;
  /** Null: the file is one run. */
  readonly name: string | null;
}

function boundsOf(table: CsvTable<LogField>, file: string): readonly Bounds[] {
  const words = table.words('run');
  if (words === null) return table.size === 0 ? [] : [{ from: 0, to: table.size, name: null }];
  const found: Bounds[] = [];
  for (let from = 0; from < table.size; ) {
    let to = from;
    while (to < table.size && words[to] === words[from]) to++;
    const name = words[from]!;
    const place = { file, line: table.line[from]!, key: 'run' };
    if (name === '')
      throw new InputError({ code: 'missing-value', place, message: 'the cell is empty', allowed: 'a run' });
    if (found.some((run) => run.name === name))
      throw new InputError({
        code: 'run-twice',
        place,
        message: 'the run was left and begins again',
        found: `'${name}'`,
        allowed: 'the rows of a run together',
      });
    found.push({ from, to, name });
    from = to;
  }
  return found;
}

function directionOf(table: CsvTable<LogField>, from: number, to: number, file: string): Direction | null {
  const words = table.words('direction');
  if (words === null) return null;
  const first = words[from]!;
  for (let i = from; i < to; i++) {
    const place = { file, line: table.line[i]!, key: 'direction' };
    const found = `'${words[i]!}'`;
    if (words[i] !== 'there' && words[i] !== 'back')
      throw new InputError({
        code: 'unknown-direction',
        place,
        message: 'the direction is not known',
        found,
        allowed: 'there or back',
      });
    if (words[i] !== first)
      throw new InputError({
        code: 'direction-changes',
        place,
        message: 'the direction changes within a run',
        found,
        allowed: `'${first}' as in the rows before, or a column run that tells the runs apart`,
      });
  }
  return first as Direction;
}

/** Mean heading [rad], by the sum of unit vectors. */
function meanHeading(heading: Float64Array | null): number | null {
  if (heading === null) return null;
  const [north, east] = heading.reduce(([n, e], angle) => [n! + cos(angle), e! + sin(angle)], [0, 0]);
  return atan2(east!, north!);
}

function refuseOrder({ file, line, time, distance }: LoggedRun): void {
  const fault = (i: number, problem: Pick<Problem, 'code' | 'message' | 'allowed' | 'found'>): InputError =>
    new InputError({ place: { file, line: line[i]! }, ...problem });
  for (let i = 1; i < time.length; i++) {
    if (!(time[i]! > time[i - 1]!))
      throw fault(i, {
        code: 'time-not-rising',
        message: 'the time does not rise',
        found: `${(time[i]! - time[i - 1]!).toFixed(3)} s after the row before`,
        allowed: 'rising times; a column run where several runs stand in one file',
      });
    if (distance !== null && distance[i]! < distance[i - 1]!)
      throw fault(i, {
        code: 'distance-falling',
        message: 'the distance falls',
        found: `${(distance[i]! - distance[i - 1]!).toFixed(2)} m after the row before`,
        allowed: 'the distance ridden, which never falls; direction says which way',
      });
  }
}
