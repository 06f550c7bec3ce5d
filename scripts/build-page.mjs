// The workbench as one file: its script put into the page, with the demos. Nothing of it is fetched when it runs.
import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { build } from 'vite';
import { root } from './run.mjs';

const DEMOS = [
  ['harrow-gap.yaml', 'Night post over Harrow Gap: a pass, a locked throttle and three designs'],
  ['tarrow-saltings.yaml', 'Round the Saltings: an electric scooter in the wind from the sea'],
  ['one-hill.yaml', 'One hill: the smallest case'],
];

/** A script without imports, as text. */
async function scriptOf(entry) {
  const { output } = await build({
    root,
    configFile: false,
    publicDir: false,
    logLevel: 'warn',
    build: {
      write: false,
      target: 'es2022',
      rolldownOptions: { input: join(root, entry), output: { format: 'iife', codeSplitting: false } },
    },
  });
  return output[0].code;
}

/** Modules of the program that this script needs, loaded once and left nowhere. */
async function moduleOf(entry) {
  const { output } = await build({
    root,
    configFile: false,
    publicDir: false,
    logLevel: 'warn',
    ssr: { noExternal: true },
    build: {
      ssr: true,
      write: false,
      target: 'node20',
      rolldownOptions: { input: join(root, entry), output: { codeSplitting: false } },
    },
  });
  const file = join(root, 'dist', `.${entry.replace(/\W/g, '-')}.mjs`);
  mkdirSync(join(root, 'dist'), { recursive: true });
  writeFileSync(file, output[0].code);
  try {
    return await import(pathToFileURL(file).href);
  } finally {
    rmSync(file);
  }
}

/** Writes the page to a file. */
export async function buildPage(file) {
  const [code, { workbenchPage, carryCase }] = await Promise.all([
    scriptOf('src/workbench/page/main.ts'),
    moduleOf('src/workbench/page/shell.ts'),
  ]);
  const read = (name) => readFileSync(join(root, 'routes', name));
  const demos = DEMOS.map(([name, words]) => ({ words, study: carryCase(name, read) }));
  writeFileSync(file, workbenchPage({ code, demos }));
}

// As a command: node scripts/build-page.mjs [FILE]
if (process.argv[1] === import.meta.filename)
  await buildPage(process.argv[2] ?? join(root, 'dist', 'workbench.html'));
