import { join } from 'node:path';
import { defineConfig } from 'vitest/config';

/** The long rounds: hours, not minutes. `npm run soak`. */
export default defineConfig({
  root: join(import.meta.dirname, '..', '..'),
  test: { include: ['test/soak/**/*.test.ts'], testTimeout: 7_200_000, hookTimeout: 600_000, maxWorkers: 1, pool: 'forks' },
});
