import { defineConfig } from 'vite';

// The command is bundled because importing mathjs file by file costs seconds at every start.
export default defineConfig({
  // The renderer of PNGs is native code, found by its own loader at run time.
  ssr: { noExternal: true, external: ['@resvg/resvg-js'], resolve: { conditions: ['source', 'node'], externalConditions: ['node'] } },
  build: {
    ssr: true,
    target: 'node20',
    sourcemap: true,
    emptyOutDir: false,
    rollupOptions: {
      input: { ringtrue: 'src/main.ts', 'ensemble-worker': 'src/ensemble-worker.ts', 'sweep-worker': 'src/sweep-worker.ts' },
      output: { entryFileNames: '[name].js', chunkFileNames: '[name]-shared.js' },
    },
  },
});
