import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

const root = fileURLToPath(new URL('..', import.meta.url));

// One self-contained ES module per entry: nothing is read from node_modules when it runs.
export default defineConfig({
  root,
  ssr: { noExternal: true },
  build: {
    ssr: true,
    target: 'node20',
    outDir: 'dist',
    emptyOutDir: false,
    minify: false,
    rolldownOptions: {
      input: { cli: `${root}src/cli/main.ts`, index: `${root}src/index.ts` },
      output: { entryFileNames: '[name].js', chunkFileNames: 'chunks/[name]-[hash].js' },
    },
  },
});
