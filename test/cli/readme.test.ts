import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, symlinkSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { afterAll, expect, it } from 'vitest';

// The commands of README.md are run as they stand there, in a folder of their own. Lines that begin with npm are what runs this test.
const root = resolve(import.meta.dirname, '../..');
const folder = mkdtempSync(join(tmpdir(), 'readme-'));
symlinkSync(join(root, 'routes'), join(folder, 'routes'));
afterAll(() => rmSync(folder, { recursive: true }));

const blocks = [...readFileSync(join(root, 'README.md'), 'utf8').matchAll(/```sh\n([\s\S]*?)```/g)];
const commands = blocks
  .flatMap((block) => block[1]!.split('\n'))
  .filter((line) => line.startsWith('ridgehold '));

it('README.md shows commands', () => {
  expect(commands.length).toBeGreaterThanOrEqual(4);
});

it.each(commands)('%s', (command) => {
  const words = command.split(' ').slice(1);
  const done = spawnSync(process.execPath, [join(root, 'dist/cli.js'), ...words], {
    cwd: folder,
    encoding: 'utf8',
  });
  // 1: done, but a requirement is not met, which is part of the demo's story
  expect([0, 1], done.stderr).toContain(done.status);
});
