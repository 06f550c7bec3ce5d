import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

const root = fileURLToPath(new URL('..', import.meta.url));

// Self-contained ES modules: nothing is read from node_modules when they run. Packages are taken in the form they have
// for pages, so that the library needs nothing of Node, and both programs run the same code. What draws PNG stays a package:
// a large binary that few runs load.
export default defineConfig({
  root,
  ssr: { noExternal: true, resolve: { conditions: ['module', 'browser', 'production'] } },
  build: {
    ssr: true,
    target: 'node20',
    outDir: 'dist',
    emptyOutDir: false,
    minify: false,
    rolldownOptions: {
      external: ['@resvg/resvg-wasm'],
      input: {
        cli: `${root}src/cli/main.ts`,
        'cell-worker': `${root}src/cli/cell-worker.ts`,
        index: `${root}src/index.ts`,
      },
      output: { entryFileNames: '[name].js', chunkFileNames: 'chunks/[name]-[hash].js' },
    },
  },
});
