import path from 'node:path';
import { defineConfig } from 'vitest/config';

const root = import.meta.dirname;

export default defineConfig({
  resolve: { alias: { '@': root }, conditions: ['react-server', 'node', 'import', 'default'] },
  ssr: { resolve: { conditions: ['react-server', 'node', 'import', 'default'] } },
  test: {
    environment: 'node',
    setupFiles: [path.join(root, 'tests/setup/data-folder.ts'), path.join(root, 'tests/setup/unexpected-console.ts')],
    testTimeout: 30_000,
    hookTimeout: 60_000,
    // Two cores: more workers only make each test wait for the others.
    maxWorkers: 2,
    restoreMocks: true,
    projects: [
      { extends: true, test: { name: 'unit', include: ['tests/unit/**/*.test.ts'] } },
      { extends: true, test: { name: 'db', include: ['tests/db/**/*.test.ts'] } },
      { extends: true, test: { name: 'outside', include: ['tests/outside/**/*.test.ts'], testTimeout: 120_000 } },
      {
        extends: true,
        test: { name: 'api', include: ['tests/api/**/*.test.ts'], testTimeout: 60_000, fileParallelism: false },
      },
      {
        extends: true,
        test: {
          name: 'browser',
          include: ['tests/browser/**/*.test.ts'],
          testTimeout: 120_000,
          hookTimeout: 240_000,
          // A page may take its time on a busy machine; what it must come to show is asserted all the same.
          expect: { poll: { timeout: 20_000 } },
          fileParallelism: false,
        },
      },
    ],
  },
});
