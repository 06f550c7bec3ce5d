// The command line, the library and its types, and the workbench, into dist/.
import { chmodSync, cpSync, existsSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { bin, must, root } from './run.mjs';

// `npm install -g .` in a fresh clone prepares the package before it has what the build needs.
if (!existsSync(join(root, 'node_modules', 'vite')))
  must('npm', ['ci', '--no-global', '--ignore-scripts', '--no-audit', '--no-fund']);
rmSync(join(root, 'dist'), { recursive: true, force: true });
must(...bin('vite/bin/vite.js', ['build', '--config', 'scripts/vite.node.config.ts', '--logLevel', 'warn']));
// A command of its own: the first line of src/cli/main.ts names its interpreter.
chmodSync(join(root, 'dist/cli.js'), 0o755);
must(...bin('typescript/bin/tsc', ['-b', 'scripts/tsconfig/core.json']));
cpSync(join(root, 'dist/.types/src'), join(root, 'dist/types'), { recursive: true });
// Loaded behind the installation of what it needs.
const { buildPage } = await import('./build-page.mjs');
await buildPage(join(root, 'dist', 'workbench.html'));
