import { defineConfig } from 'vite';

// The command is bundled because importing mathjs file by file costs seconds at every start.
export default defineConfig({
  ssr: { noExternal: true, resolve: { conditions: ['source', 'node'], externalConditions: ['node'] } },
  build: {
    ssr: 'src/main.ts',
    target: 'node20',
    sourcemap: true,
    emptyOutDir: false,
    rollupOptions: { output: { entryFileNames: 'ringtrue.js' } },
  },
});
