import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: {
    include: ['test/**/*.test.ts'],
    globalSetup: ['test/build-first.ts'],
    pool: 'forks',
    // Much of the time goes into waiting at real sockets and ptys: a worker for each core, none left out.
    maxWorkers: '100%',
    restoreMocks: true,
    unstubEnvs: true,
    testTimeout: 20_000,
    // Whole runs are made beforehand, and a busy machine takes its time.
    hookTimeout: 60_000,
    reporters: process.env['CI'] ? ['default', ['json', { outputFile: '.vitest-result.json' }]] : ['default'],
  },
});
