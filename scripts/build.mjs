// The command line, the library and its types, into dist/.
import { cpSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { bin, must, root } from './run.mjs';

rmSync(join(root, 'dist'), { recursive: true, force: true });
must(...bin('vite/bin/vite.js', ['build', '--config', 'scripts/vite.node.config.ts', '--logLevel', 'warn']));
must(...bin('typescript/bin/tsc', ['-b', 'scripts/tsconfig/core.json']));
cpSync(join(root, 'dist/.types/src'), join(root, 'dist/types'), { recursive: true });
