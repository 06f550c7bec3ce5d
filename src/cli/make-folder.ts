import { existsSync, mkdirSync, rmSync } from 'node:fs';
import { dirname, resolve } from 'node:path';

/**
 * Makes a folder and those above it, one at a time: the recursive call of Node does not return where a file system
 * answers that a new folder does not exist, as /proc does.
 *
 * Where one cannot be made, those already made are taken away.
 *
 * @returns the topmost folder that had to be made; undefined where all were there
 */
export function makeFolder(folder: string): string | undefined {
  const missing: string[] = [];
  for (let here = resolve(folder); !existsSync(here) && dirname(here) !== here; here = dirname(here))
    missing.push(here);
  let made: string | undefined;
  try {
    for (const each of missing.toReversed()) {
      mkdirSync(each);
      made ??= each;
    }
  } catch (error) {
    if (made !== undefined) rmSync(made, { recursive: true, force: true });
    throw error;
  }
  return made;
}
