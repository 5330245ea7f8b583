import path from 'node:path';
import { defineConfig } from 'vitest/config';

/** Two projects: pure units need nothing; the others share one PostgreSQL cluster made by the global set-up. */
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
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
