import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';
import { nativeSource } from './native-source.ts';

const root = fileURLToPath(new URL('..', import.meta.url));

// unit: the core, room by room. program: the built command line, started as a process. browser: pages in Chromium.
export default defineConfig({
  root,
  plugins: [nativeSource(root)],
  test: {
    reporters: ['default'],
    // All cores: by itself one is kept free, which on two cores is half of them.
    maxWorkers: '100%',
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: ['test/**/*.test.ts'],
          exclude: ['test/cli/**', 'test/browser/**'],
          pool: 'threads',
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'program',
          include: ['test/cli/**/*.test.ts'],
          pool: 'forks',
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'browser',
          include: ['test/browser/**/*.test.ts'],
          pool: 'forks',
          fileParallelism: false,
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
