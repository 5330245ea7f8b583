import path from 'node:path';
import { defineConfig } from 'vitest/config';

/** Three projects: pure units need nothing; live tests share one PostgreSQL cluster; e2e journeys share one whole product. */
const alias = { '@': path.resolve(import.meta.dirname) };

export default defineConfig({
  resolve: { alias },
  test: {
    projects: [
      {
        resolve: { alias },
        test: {
          name: 'units',
          environment: 'node',
          include: ['tests/{analysis,editor,components,db,scripts}/**/*.test.{ts,tsx}'],
          exclude: ['tests/db/live/**'],
          setupFiles: ['tests/helpers/fuzz-seed.ts'],
          testTimeout: 60_000,
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'live',
          environment: 'node',
          include: ['tests/{db/live,ws-server,app}/**/*.test.ts'],
          globalSetup: ['tests/helpers/global-cluster.ts'],
          setupFiles: ['tests/helpers/fuzz-seed.ts'],
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'e2e',
          environment: 'node',
          include: ['tests/e2e/**/*.test.ts'],
          globalSetup: ['tests/e2e/global-stack.ts'],
          // Journeys share two cores with the product they drive: one file at a time.
          fileParallelism: false,
          testTimeout: 300_000,
          hookTimeout: 900_000,
        },
      },
    ],
  },
});
