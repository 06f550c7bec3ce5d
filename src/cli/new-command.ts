import { readdirSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { starterCase } from '../case/starter-case.ts';
import { InputError } from '../problems/input-error.ts';
import type { Invocation } from './commands.ts';
import { DONE } from './exit-status.ts';
import { fileProblem } from './file-problem.ts';
import { makeFolder } from './make-folder.ts';

/** `ridgehold new DIR`: a commented starter case, its vehicle and its track. */
export function newCommand({ operands: [folder], values }: Invocation<'new'>): number {
  const files = starterCase();
  try {
    makeFolder(folder);
    if (readdirSync(folder).length > 0)
      throw new InputError({
        code: 'folder-not-empty',
        place: { file: folder },
        message: 'the folder is not empty',
        allowed: 'a new or an empty folder',
      });
    for (const { name, text } of files) {
      makeFolder(dirname(join(folder, name)));
      writeFileSync(join(folder, name), text, { flag: 'wx' });
    }
  } catch (error) {
    throw fileProblem(error, folder, 'cannot be written');
  }
  if (!values.quiet) {
    const main = files[0]?.name ?? '';
    process.stderr.write(`Wrote ${files.map(({ name }) => join(folder, name)).join(', ')}\n`);
    process.stderr.write(`Next: ridgehold run ${join(folder, main)}\n`);
  }
  return DONE;
}
