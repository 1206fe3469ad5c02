import { defineConfig } from 'vitest/config';

/** Where to leave a report for a machine to read, if anywhere. */
const report = process.env.TRIGPOINT_REPORT;

export default defineConfig({
  root: new URL('..', import.meta.url).pathname,
  test: {
    include: ['test/**/*.test.ts'],
    setupFiles: ['test/setup.ts'],
    reporters: report ? ['default', ['json', { outputFile: report }]] : ['default'],
    testTimeout: 60_000,
    hookTimeout: 60_000,
    maxWorkers: 2,
  },
});
