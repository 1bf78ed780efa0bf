import { defineConfig } from 'vitest/config';

/** Everything but the client (`ng test`) and the browser (`playwright test`); the drawing of the tape needs neither. */
export default defineConfig({
  test: {
    include: [
      'shared/**/*.spec.ts',
      'server/**/*.spec.ts',
      'spec/**/*.spec.ts',
      'samples/**/*.spec.ts',
      'src/app/tape/drawing/**/*.spec.ts',
    ],
    exclude: ['spec/browser/**', '**/node_modules/**'],
    // Upper bounds for a machine that does other things too; nothing is measured by them.
    testTimeout: 60_000,
    hookTimeout: 60_000,
    expect: { poll: { timeout: 30_000 } },
    pool: 'forks',
    maxWorkers: 2,
  },
  esbuild: {
    tsconfigRaw: { compilerOptions: { experimentalDecorators: true, useDefineForClassFields: false } },
  },
});
