import { existsSync, readFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { expect, it } from 'vitest';

const root = resolve(import.meta.dirname, '..');

// Paths in backticks are below the root or below src/; a name between <> stands for any.
const named = (text: string): string[] =>
  [...text.matchAll(/`((?:[\w.-]+\/)+[\w.-]*)`/g)]
    .map((match) => match[1]!)
    .filter((path) => !path.startsWith('out/'));

it.each(['DEVELOPERS.md', 'README.md'])('%s names files and folders that exist', (file) => {
  const paths = named(readFileSync(join(root, file), 'utf8'));
  expect(paths.length).toBeGreaterThan(0);
  const missing = paths.filter(
    (path) => !existsSync(join(root, path)) && !existsSync(join(root, 'src', path)),
  );
  expect(missing).toEqual([]);
});
