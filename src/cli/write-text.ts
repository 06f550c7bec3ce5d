import { renameSync, rmSync, writeFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { fileProblem } from './file-problem.ts';
import { makeFolder } from './make-folder.ts';

/** Writes one file whole or not at all: under a temporary name, then renamed. */
export function writeText(path: string, text: string): void {
  const draft = join(dirname(path), `.${basename(path)}.${process.pid}`);
  try {
    makeFolder(dirname(path));
    writeFileSync(draft, text, { flag: 'wx' });
    renameSync(draft, path);
  } catch (error) {
    rmSync(draft, { force: true });
    throw fileProblem(error, path, 'cannot be written');
  }
}
