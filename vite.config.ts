import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

const underPostgres = {
  environment: 'node' as const,
  globalSetup: ['tests/support/global-postgres.ts'],
  testTimeout: 30_000,
  hookTimeout: 60_000,
};

/** One file for three jobs: the client build, the server build (`--mode server`) and the tests. */
export default defineConfig(({ mode }) =>
  mode === 'server'
    ? {
        publicDir: false,
        build: {
          ssr: true,
          outDir: 'dist/server',
          target: 'node20',
          minify: false,
          sourcemap: true,
          emptyOutDir: true,
          rolldownOptions: {
            input: { start: 'server/commands/start.ts' },
            // Flat, so that a module's own place says as much after the build as before: two folders below the checkout.
            output: { entryFileNames: '[name].js', chunkFileNames: '[name]-[hash].js' },
          },
        },
      }
    : {
        plugins: [react(), tailwindcss()],
        publicDir: false,
        build: { outDir: 'dist/client', sourcemap: true, target: 'baseline-widely-available' },
        test: {
          projects: [
            {
              extends: true,
              test: {
                name: 'client',
                environment: 'jsdom',
                include: ['src/**/*.test.{ts,tsx}'],
                setupFiles: ['tests/support/client-setup.ts'],
                testTimeout: 30_000,
              },
            },
            {
              test: {
                name: 'unit',
                environment: 'node',
                include: ['{shared,server}/**/*.test.ts'],
                testTimeout: 30_000,
              },
            },
            { test: { ...underPostgres, name: 'database', include: ['tests/{api,database,proof}/**/*.test.ts'] } },
            // The last two start whole programs: one at a time, and after the others, so that nothing starves on two cores.
            {
              test: {
                name: 'commands',
                environment: 'node',
                include: ['tests/commands/**/*.test.ts'],
                testTimeout: 120_000,
                hookTimeout: 120_000,
                fileParallelism: false,
                sequence: { groupOrder: 1 },
              },
            },
            {
              test: {
                ...underPostgres,
                name: 'e2e',
                include: ['tests/e2e/**/*.test.ts'],
                globalSetup: ['tests/support/global-postgres.ts', 'tests/support/global-client-build.ts'],
                testTimeout: 120_000,
                hookTimeout: 120_000,
                fileParallelism: false,
                sequence: { groupOrder: 2 },
              },
            },
          ],
        },
      },
);
