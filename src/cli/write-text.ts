import { chmodSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { fileProblem } from './file-problem.ts';
import { makeFolder } from './make-folder.ts';

/** Writes one file whole or not at all: under a temporary name, then renamed; with these permissions, where they are given. */
export function writeText(path: string, text: string, mode?: number): void {
  const draft = join(dirname(path), `.${basename(path)}.${process.pid}`);
  try {
    makeFolder(dirname(path));
    writeFileSync(draft, text, { flag: 'wx' });
    if (mode !== undefined) chmodSync(draft, mode);
    renameSync(draft, path);
  } catch (error) {
    rmSync(draft, { force: true });
    throw fileProblem(error, path, 'cannot be written');
  }
}
