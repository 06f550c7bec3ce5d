import { existsSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { InputError } from '../problems/input-error.ts';
import { readSeries, type Series } from '../report/compare/read-series.ts';
import { type ResultSummary, readSummary, seriesName } from '../report/compare/read-summary.ts';
import { decodeText } from '../track/decode-text.ts';
import { readBytes } from './read-files.ts';

/** The mark of a whole result. */
const MARK = 'summary.json';

/** A folder that `ridgehold run` wrote. */
export interface ResultFolder {
  readonly summary: ResultSummary;
  /** Reads what a candidate did. */
  readonly series: (candidate: string) => Series;
}

/**
 * Reads the folder of a result; its series are read when they are asked for.
 *
 * @throws InputError `not-a-result` where the folder or its mark is missing, and what readSummary and readSeries refuse
 */
export function readResult(folder: string): ResultFolder {
  if (!existsSync(folder)) throw notResult(folder, 'there is no such folder');
  if (!statSync(folder).isDirectory()) throw notResult(folder, 'it is a file');
  const mark = join(folder, MARK);
  if (!existsSync(mark))
    throw notResult(folder, existsSync(join(folder, 'road.json')) ? 'a road alone' : `there is no ${MARK}`);
  const text = (path: string): string => decodeText(readBytes(path), path);
  return {
    summary: readSummary(text(mark), mark),
    series: (candidate) => {
      const path = join(folder, seriesName(candidate));
      return readSeries(text(path), path);
    },
  };
}

const notResult = (folder: string, found: string): InputError =>
  new InputError({
    code: 'not-a-result',
    place: { file: folder },
    message: 'is no whole result',
    found,
    allowed: 'a folder that ridgehold run wrote',
  });
