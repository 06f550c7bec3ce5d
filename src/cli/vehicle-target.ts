import { existsSync, statSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import { InputError } from '../problems/input-error.ts';
import { readBytes } from './read-files.ts';

/** Where a file goes that people may go on to change by hand. */
export interface Target {
  readonly folder: string;
  readonly name: string;
}

/**
 * Takes a path apart, and refuses one that holds a file of somebody else: only a file whose SHA-256 the mark beside it
 * tells, so that it was written here and nobody changed it since, is written over.
 *
 * @param path as the user typed it
 * @param mark name of the JSON file beside it that has `output: {name, sha256}`
 * @throws InputError `option-value`, `not-a-file`, `foreign-file`
 */
export function targetOf(path: string, mark: string): Target {
  if (!/\.ya?ml$/i.test(path))
    throw new InputError({
      code: 'option-value',
      place: {},
      message: `--out cannot be '${path}'`,
      allowed: 'the name of a file that ends in .yaml or .yml',
    });
  const target = { folder: dirname(path), name: basename(path) };
  if (!existsSync(path)) return target;
  if (!statSync(path).isFile())
    throw new InputError({
      code: 'not-a-file',
      place: { file: path },
      message: 'cannot be written: a folder stands in place of the file',
    });
  if (writtenHash(join(target.folder, mark), target.name) !== bytesToHex(sha256(readBytes(path))))
    throw new InputError({
      code: 'foreign-file',
      place: { file: path },
      message: 'would be written over, and is not what ridgehold identify wrote there',
      allowed: 'another name, or the file moved away',
    });
  return target;
}

function writtenHash(mark: string, name: string): string | null {
  try {
    const { output } = JSON.parse(new TextDecoder().decode(readBytes(mark))) as {
      output?: { name?: unknown; sha256?: unknown };
    };
    return output?.name === name && typeof output.sha256 === 'string' ? output.sha256 : null;
  } catch {
    return null;
  }
}
