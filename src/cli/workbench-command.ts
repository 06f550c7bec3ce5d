import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { InputError } from '../problems/input-error.ts';
import { carryCase, type Start, takesStart, withStart } from '../run/carried-case.ts';
import { readerOf } from './case-reader.ts';
import type { Invocation } from './commands.ts';
import { defaultFolder } from './default-folder.ts';
import { DONE } from './exit-status.ts';
import { readBytes } from './read-files.ts';
import { refuseTrack } from './refuse-track.ts';
import { say } from './tell.ts';
import { writeText } from './write-text.ts';

const PAGE = 'workbench.html';

/** `ridgehold workbench [CASE]`: the page with the case and its files in it, or with a demo. */
export function workbenchCommand(
  { operands: [path], values }: Invocation<'workbench'>,
  program: string,
): number {
  const target = values.out ?? join(path === undefined ? 'out' : defaultFolder(path), PAGE);
  checkTarget(target);
  const page = textOf(fileURLToPath(new URL(`./${PAGE}`, program)));
  writeText(target, withStart(page, path === undefined ? { demo: 0 } : startOf(path)));
  if (!values.quiet) say(`The workbench is at ${target}`);
  return DONE;
}

function startOf(path: string): Start {
  refuseTrack(path);
  const reader = readerOf(path);
  return { study: reader.telling(() => carryCase(reader.file, reader.read)) };
}

/** @throws InputError `option-value`; `foreign-file` for a file that is no earlier workbench */
function checkTarget(target: string): void {
  if (!/\.html?$/i.test(target))
    throw new InputError({
      code: 'option-value',
      place: {},
      message: `--out cannot be '${target}'`,
      allowed: 'a name that ends in .html',
    });
  if (existsSync(target) && !takesStart(textOf(target)))
    throw new InputError({
      code: 'foreign-file',
      place: { file: target },
      message: 'would be written over, and is no earlier workbench',
      allowed: 'another name, or the file moved away',
    });
}

const textOf = (path: string): string => Buffer.from(readBytes(path)).toString('utf8');
