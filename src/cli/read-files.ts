import { readFileSync, statSync } from 'node:fs';
import { InputError } from '../problems/input-error.ts';
import { fileProblem } from './file-problem.ts';

/** A text past this cannot be held as one string [bytes]. */
const LARGEST = 512 * 1024 * 1024;

/**
 * The bytes of a regular file.
 *
 * @throws InputError `file-not-found`, `not-a-file`, `not-permitted`, `file-too-large`
 */
export function readBytes(path: string, shown = path): Uint8Array {
  try {
    const found = statSync(path);
    if (!found.isFile())
      throw new InputError({
        code: 'not-a-file',
        place: { file: shown },
        message: 'cannot be read',
        found: found.isDirectory() ? 'a folder' : 'something that is no regular file',
        allowed: 'a file',
      });
    if (found.size > LARGEST)
      throw new InputError({
        code: 'file-too-large',
        place: { file: shown },
        message: 'is too large',
        found: `${Math.ceil(found.size / 1048576)} MiB`,
        allowed: `up to ${LARGEST / 1048576} MiB`,
      });
    return readFileSync(path);
  } catch (error) {
    throw fileProblem(error, shown, 'cannot be read');
  }
}
