import { accessSync, constants, realpathSync, statSync } from 'node:fs';
import { InputError } from '../problems/input-error.ts';
import { fileProblem } from './file-problem.ts';
import { readBytes } from './read-files.ts';
import { writeText } from './write-text.ts';

const MARK = '\ufeff';
/** Bits of the permissions of a file: that anybody may write it, and all of them. */
const ANY_WRITES = 0o222;
const PERMISSIONS = 0o777;

/** A file of text that an edit shall leave as it is but for its own place: UTF-8, with or without a byte order mark. */
export interface EditedFile {
  readonly text: string;
  /**
   * Writes another text in place of it.
   *
   * @throws InputError `file-changed` where somebody wrote the file meanwhile
   */
  readonly write: (text: string) => void;
}

/** @throws InputError `not-utf8`, as an edit would change every byte; `not-permitted`; as `readBytes` */
export function fileToEdit(path: string): EditedFile {
  const bytes = Buffer.from(readBytes(path));
  const whole = bytes.toString('utf8');
  if (!Buffer.from(whole, 'utf8').equals(bytes))
    throw new InputError({
      code: 'not-utf8',
      place: { file: path },
      message: 'is not written in UTF-8, so that no candidate can be added without changing the rest',
      allowed: 'UTF-8',
    });
  const { real, mode } = writable(path);
  const mark = whole.startsWith(MARK) ? MARK : '';
  return {
    text: whole.slice(mark.length),
    write: (text) => {
      if (!Buffer.from(readBytes(path)).equals(bytes))
        throw new InputError({
          code: 'file-changed',
          place: { file: path },
          message: 'was changed while its gains were sought; no candidate was added',
        });
      writeText(real, mark + text, mode);
    },
  };
}

/** Where a file really is, behind links, and its permissions. A draft could take the place of a file that is read-only. */
function writable(path: string): { readonly real: string; readonly mode: number } {
  try {
    const real = realpathSync(path);
    const { mode } = statSync(real);
    if ((mode & ANY_WRITES) === 0)
      throw new InputError({
        code: 'not-permitted',
        place: { file: path },
        message: 'is read-only, so that no candidate can be added',
        allowed: 'a file that may be written, or no --add',
      });
    accessSync(real, constants.W_OK);
    return { real, mode: mode & PERMISSIONS };
  } catch (error) {
    throw fileProblem(error, path, 'cannot be written');
  }
}
