import { defineConfig } from 'vite';

export default defineConfig({
  base: './',
  resolve: { conditions: ['source', 'module', 'browser', 'development|production'] },
  build: { target: 'es2022', sourcemap: true },
  worker: { format: 'es' },
});
