import type { RuleFault } from './check-file.ts';
import type { Path } from './yaml-source.ts';

/** A fault where a list of numbers does not increase. */
export function increasing(values: readonly number[], path: (i: number) => Path, unit: string): RuleFault[] {
  return inOrder(values, path, unit, (value, before) => value > before, ['do not increase', 'more than']);
}

/** A fault where a list of numbers does not decrease. */
export function decreasing(values: readonly number[], path: (i: number) => Path, unit: string): RuleFault[] {
  return inOrder(values, path, unit, (value, before) => value < before, ['do not decrease', 'less than']);
}

function inOrder(
  values: readonly number[],
  path: (i: number) => Path,
  unit: string,
  holds: (value: number, before: number) => boolean,
  [message, allowed]: readonly [string, string],
): RuleFault[] {
  const ofUnit = unit === '' ? '' : ` ${unit}`;
  return values.flatMap((value, i) => {
    const before = values[i - 1];
    if (before === undefined || holds(value, before)) return [];
    return [
      {
        path: path(i),
        code: 'not-in-order',
        message: `the values ${message}`,
        found: `${value}${ofUnit} after ${before}${ofUnit}`,
        allowed: `${allowed} ${before}${ofUnit}`,
      },
    ];
  });
}

/** A table whose axes increase and whose rows and columns are as many as its axes have. */
export interface TableOfFile {
  readonly path: Path;
  readonly rows: { readonly key: string; readonly values: readonly number[]; readonly unit: string };
  readonly columns: { readonly key: string; readonly values: readonly number[]; readonly unit: string };
  readonly body: { readonly key: string; readonly values: readonly (readonly number[])[] };
}

/** Faults in the axes of a table and in its size. */
export function tableFaults({ path, rows, columns, body }: TableOfFile): RuleFault[] {
  const faults = [rows, columns].flatMap(({ key, values, unit }) =>
    increasing(values, (i) => [...path, key, i], unit),
  );
  const wrongLength = (at: Path, what: string, found: number, axis: string, allowed: number): RuleFault => ({
    path: at,
    code: 'wrong-length',
    message: `${what} than ${axis} has values`,
    found: `${found}`,
    allowed: `${allowed}`,
  });
  const more = (found: number, allowed: number): string => (found > allowed ? 'more' : 'fewer');
  const height = rows.values.length;
  if (body.values.length !== height)
    faults.push(
      wrongLength(
        [...path, body.key],
        `has ${more(body.values.length, height)} rows`,
        body.values.length,
        rows.key,
        height,
      ),
    );
  const width = columns.values.length;
  body.values.forEach((row, i) => {
    if (row.length !== width)
      faults.push(
        wrongLength(
          [...path, body.key, i],
          `has ${more(row.length, width)} figures`,
          row.length,
          columns.key,
          width,
        ),
      );
  });
  return faults;
}

/** A number that another is held against, and what it is. */
export interface Against {
  readonly value: number;
  readonly words: string;
}

/** One number that must lie above another. */
export function above(path: Path, value: number, than: Against, unit: string): RuleFault[] {
  return value > than.value ? [] : [misplaced(path, value, than, unit, 'above', 'more than')];
}

/** One number that must lie below another. */
export function below(path: Path, value: number, than: Against, unit: string): RuleFault[] {
  return value < than.value ? [] : [misplaced(path, value, than, unit, 'below', 'less than')];
}

/** One number that must not lie below another. */
export function atLeast(path: Path, value: number, than: Against, unit: string): RuleFault[] {
  return value >= than.value ? [] : [misplaced(path, value, than, unit, 'at or above', 'at least')];
}

/** One number that must not lie above another. */
export function atMost(path: Path, value: number, than: Against, unit: string): RuleFault[] {
  return value <= than.value ? [] : [misplaced(path, value, than, unit, 'at or below', 'at most')];
}

function misplaced(
  path: Path,
  value: number,
  than: Against,
  unit: string,
  where: string,
  allowed: string,
): RuleFault {
  const ofUnit = unit === '' ? '' : ` ${unit}`;
  return {
    path,
    code: 'not-in-order',
    message: `is not ${where} ${than.words}`,
    found: `${value}${ofUnit}`,
    allowed: `${allowed} ${than.value}${ofUnit}`,
  };
}
