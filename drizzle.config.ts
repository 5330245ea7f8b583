import { defineConfig } from 'drizzle-kit';

// Only `drizzle-kit generate` is used: migrations are applied by db/setup/migrate.ts, forward only, under a lock.
export default defineConfig({ dialect: 'postgresql', schema: './db/schema/index.ts', out: './drizzle' });
