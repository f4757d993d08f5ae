import { defineConfig } from 'vitest/config';

// Packages resolve to their sources, so that a test needs no build of the core before it.
const conditions = ['source', 'node', 'module', 'development|production'];
const sources = { resolve: { conditions }, ssr: { resolve: { conditions } } };

export default defineConfig({
  test: {
    reporters: ['default', ['json', { outputFile: 'test-results.json' }]],
    coverage: { include: ['packages/*/src/**/*.ts'], exclude: ['**/*.test.ts'], reporter: ['text-summary', 'html'] },
    projects: [
      {
        ...sources,
        test: {
          name: 'unit',
          include: ['packages/*/src/**/*.test.ts', 'test/**/*.test.ts'],
          exclude: ['test/browser/**', 'test/cli/**'],
          testTimeout: 60_000,
        },
      },
      {
        ...sources,
        test: {
          name: 'built',
          include: ['test/browser/**/*.test.ts', 'test/cli/**/*.test.ts'],
          fileParallelism: false,
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
