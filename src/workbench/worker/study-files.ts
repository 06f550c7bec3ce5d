import { InputError } from '../../problems/input-error.ts';
import type { Reader } from '../../run/input-log.ts';
import type { StudyMessage } from './messages.ts';

/** The contents that a worker was sent: one array for the same bytes as long as it lives. */
export class StudyFiles {
  private readonly contents = new Map<number, Uint8Array>();

  /** Every question has to come by here, whether it is answered or not: what it brings is not sent again. */
  take({ fresh }: StudyMessage): void {
    for (const { content, bytes } of fresh) this.contents.set(content, bytes);
  }

  /** @returns what reads the files of a study; it throws InputError `file-not-found` for one that is missing */
  readerOf({ files }: StudyMessage): Reader {
    return (name) => {
      const file = files.find((one) => one.name === name);
      const bytes = file === undefined ? undefined : this.contents.get(file.content);
      if (bytes !== undefined) return bytes;
      throw new InputError({
        code: 'file-not-found',
        place: { file: name },
        message: 'is not here yet',
        allowed: 'a file of this name, dropped or opened',
      });
    };
  }
}
