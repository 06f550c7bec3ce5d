import { closeSync, existsSync, openSync, readSync, statSync } from 'node:fs';
import { dirname } from 'node:path';
import { InputError } from '../problems/input-error.ts';
import { JUNIT_HEAD } from '../report/junit-xml.ts';
import { fileProblem } from './file-problem.ts';
import { checkFolder } from './result-folder.ts';

/**
 * Refuses, before the work begins, a place for JUnit XML that could not be written, or that holds a file of somebody
 * else. By its ending it cannot be a file of a result, whose folder it may share.
 *
 * @throws InputError `option-value`, `not-a-file`, `foreign-file`, `not-a-folder`, `not-permitted`
 */
export function checkJunitFile(path: string): void {
  if (!/\.xml$/i.test(path))
    throw new InputError({
      code: 'option-value',
      place: {},
      message: `--junit cannot be '${path}'`,
      allowed: 'a name that ends in .xml',
    });
  checkFolder(dirname(path));
  if (!existsSync(path)) return;
  if (!statSync(path).isFile())
    throw new InputError({
      code: 'not-a-file',
      place: { file: path },
      message: 'cannot be written: a folder stands in place of the file',
    });
  if (headOf(path) === JUNIT_HEAD) return;
  throw new InputError({
    code: 'foreign-file',
    place: { file: path },
    message: 'would be written over, and no earlier run wrote it',
    allowed: 'another name, or the file moved away',
  });
}

/** As many bytes as the head of our own file has; it is ASCII. */
function headOf(path: string): string {
  try {
    const bytes = Buffer.alloc(JUNIT_HEAD.length);
    const file = openSync(path, 'r');
    try {
      return bytes.toString('latin1', 0, readSync(file, bytes, 0, bytes.length, 0));
    } finally {
      closeSync(file);
    }
  } catch (error) {
    throw fileProblem(error, path, 'cannot be read');
  }
}
