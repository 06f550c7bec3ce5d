import { InputError } from '../problems/input-error.ts';

/** What the operating system refused, in words: by the error's code. */
const WORDS: Readonly<Record<string, readonly [code: string, message: string]>> = {
  ENOENT: ['file-not-found', 'there is no such file or folder'],
  EISDIR: ['not-a-file', 'a folder stands in place of a file'],
  ENOTDIR: ['not-a-folder', 'a file stands in place of a folder'],
  EEXIST: ['not-a-folder', 'a file stands in place of a folder'],
  EACCES: ['not-permitted', 'permission is denied'],
  EPERM: ['not-permitted', 'the operation is not permitted'],
  EROFS: ['not-permitted', 'the file system is read-only'],
  ENOSPC: ['disk-full', 'there is no space left on the device'],
  EDQUOT: ['disk-full', 'the disk quota is used up'],
  EFBIG: ['disk-full', 'the file grew past the largest size that is allowed here'],
  ENAMETOOLONG: ['name-too-long', 'the name is too long'],
  ELOOP: ['link-loop', 'the links lead round in a circle'],
  EMFILE: ['too-many-files', 'too many files are open'],
  EIO: ['device-error', 'the device reports an error'],
  EBUSY: ['device-error', 'the file is in use'],
  EXDEV: ['not-permitted', 'the folder spans two file systems'],
};

const codeOf = (error: unknown): string | undefined =>
  error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : undefined;

/** An error of the file system as refused input; anything else comes back unchanged. */
export function fileProblem(error: unknown, path: string, doing: string): unknown {
  const code = codeOf(error);
  if (error instanceof InputError || code === undefined || !/^E[A-Z]+$/.test(code)) return error;
  const [ours, words] = WORDS[code] ?? ['file-error', `the system says ${code}`];
  return new InputError({ code: ours, place: { file: path }, message: `${doing}: ${words}` });
}
