import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

/** One file for three jobs: the client build, the server build (`--mode server`) and the tests. */
export default defineConfig(({ mode }) =>
  mode === 'server'
    ? {
        publicDir: false,
        build: {
          ssr: 'server/main.ts',
          outDir: 'dist/server',
          target: 'node20',
          minify: false,
          sourcemap: true,
          emptyOutDir: true,
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
              },
            },
            { test: { name: 'unit', environment: 'node', include: ['{shared,server}/**/*.test.ts'] } },
            {
              test: {
                name: 'database',
                environment: 'node',
                include: ['tests/{api,database}/**/*.test.ts'],
                globalSetup: ['tests/support/global-postgres.ts'],
                testTimeout: 30_000,
                hookTimeout: 60_000,
              },
            },
            {
              test: {
                name: 'e2e',
                environment: 'node',
                include: ['tests/e2e/**/*.test.ts'],
                globalSetup: ['tests/support/global-postgres.ts', 'tests/support/global-client-build.ts'],
                testTimeout: 120_000,
                hookTimeout: 120_000,
                fileParallelism: false,
              },
            },
          ],
        },
      },
);
