import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { roomProblems } from '../scripts/rooms.mjs';

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'rooms-'));
});
afterEach(() => rmSync(folder, { recursive: true }));

function write(path: string, text: string): void {
  const file = join(folder, path);
  mkdirSync(dirname(file), { recursive: true });
  writeFileSync(file, text);
}

it('the rooms of src/ are in order', () => {
  expect(roomProblems()).toEqual([]);
});

it('an import from a room above passes', () => {
  write('road/a.ts', "import { b } from '../units/b.ts';\n");
  write('units/b.ts', 'export const b = 1;\n');
  expect(roomProblems(folder)).toEqual([]);
});

it.each([
  ['an import from a room below', 'units/a.ts', "import { b } from '../road/b.ts';\n", 'which stands below'],
  [
    'a type import from a room below',
    'units/a.ts',
    "import type { B } from '../road/b.ts';\n",
    'which stands below',
  ],
  ['a folder that is no room', 'misc/a.ts', 'export {};\n', 'is not a room'],
  ['a Node module outside cli', 'road/a.ts', "import { readFileSync } from 'node:fs';\n", 'only cli may'],
  ['a sine of the engine', 'road/a.ts', 'export const a = Math.sin(1);\n', 'differs between engines'],
  ['a power operator', 'road/a.ts', 'export const a = (b: number) => b ** 2;\n', 'differs between engines'],
  ['a clock', 'run/a.ts', 'export const a = Date.now();\n', 'no clock'],
  ['a random number without a seed', 'study/a.ts', 'export const a = Math.random();\n', 'seeded stream'],
])('%s is found', (_what, path, text, says) => {
  write('road/b.ts', 'export const b = 1;\nexport type B = number;\n');
  write(path, text);
  expect(roomProblems(folder).join('\n')).toContain(says);
});

it('a circle of imports is found', () => {
  write('road/a.ts', "import './b.ts';\n");
  write('road/b.ts', "import './a.ts';\n");
  expect(roomProblems(folder).join('\n')).toContain('circle');
});

it('words in comments and in cli are left alone', () => {
  write('road/a.ts', '// Math.sin differs between engines\n/* Date.now() */\nexport {};\n');
  write('cli/a.ts', "import { readFileSync } from 'node:fs';\nexport const now = Date.now();\n");
  expect(roomProblems(folder)).toEqual([]);
});
