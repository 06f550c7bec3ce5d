import { InputError } from '../problems/input-error.ts';
import { readBytes } from './read-files.ts';
import { writeText } from './write-text.ts';

const MARK = '\ufeff';

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

/** @throws InputError `not-utf8`, as an edit would change every byte; as `readBytes` */
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
      writeText(path, mark + text);
    },
  };
}
