import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { type Plugin, transformWithOxc } from 'vite';

const RELATIVE = /((?:\bfrom|\bimport)\s*\(?\s*)(["'])(\.{1,2}\/[^"']+)\2(\s*with\s*\{[^}]*\})?/g;

/**
 * Lets tests import `src/` as modules that Node loads by itself: each file without its types, its imports as they
 * stand. Modules that vitest evaluates reach every import through an object, which makes the loop four times as slow.
 *
 * @param root folder of the project; what is written goes away with the process
 */
export function nativeSource(root: string): Plugin {
  const source = join(root, 'src');
  // Below node_modules, so that packages are found from there.
  const folder = join(root, 'node_modules', '.native-source');
  const target = join(folder, String(process.pid));
  removeOfEnded(folder);
  process.once('exit', () => rmSync(target, { recursive: true, force: true }));
  const written = new Map<string, Promise<void>>();
  const nativeOf = (path: string): string => `${join(target, relative(root, path))}.js`;

  /** Writes a file and, through it, all that it imports. */
  function write(path: string): Promise<void> {
    const known = written.get(path);
    if (known !== undefined) return known;
    const writing = (async () => {
      const imported: string[] = [];
      const text = readFileSync(path, 'utf8');
      const code = path.endsWith('.json')
        ? moduleOfJson(text)
        : (await transformWithOxc(text, path, { sourcemap: false, target: 'node20' })).code.replace(
            RELATIVE,
            (_, before: string, quote: string, name: string) => {
              imported.push(resolve(dirname(path), name));
              return `${before}${quote}${name}.js${quote}`;
            },
          );
      mkdirSync(dirname(nativeOf(path)), { recursive: true });
      writeFileSync(nativeOf(path), code);
      await Promise.all(imported.map(write));
    })();
    written.set(path, writing);
    return writing;
  }

  return {
    name: 'native-source',
    enforce: 'pre',
    async resolveId(id, importer) {
      if (importer === undefined || !id.startsWith('.') || !id.endsWith('.ts')) return null;
      const path = resolve(dirname(importer), id);
      if (!path.startsWith(`${source}/`) || !existsSync(path)) return null;
      await write(path);
      return { id: nativeOf(path), external: true };
    },
  };
}

/** JSON whose keys can be imported by name, which Node by itself does not offer. */
function moduleOfJson(text: string): string {
  const keys = Object.keys(JSON.parse(text)).map((key) => JSON.stringify(key));
  return [
    `const all = ${text};`,
    ...keys.map((key, i) => `const key${i} = all[${key}];`),
    `export { all as default${keys.map((key, i) => `, key${i} as ${key}`).join('')} };`,
  ].join('\n');
}

/** Removes what processes left that were killed: each has a folder by its number. */
function removeOfEnded(folder: string): void {
  if (!existsSync(folder)) return;
  for (const name of readdirSync(folder))
    try {
      process.kill(Number(name), 0);
    } catch {
      rmSync(join(folder, name), { recursive: true, force: true });
    }
}
