import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

const root = fileURLToPath(new URL('..', import.meta.url));

export default defineConfig({
  root,
  cacheDir: '.cache/vitest',
  test: {
    projects: [
      { root, test: { name: 'shared', include: ['shared/**/*.spec.ts'], environment: 'node' } },
      {
        root,

        test: {
          name: 'gateway',
          include: ['gateway/**/*.spec.ts', 'simulator/**/*.spec.ts', 'config/**/*.spec.ts'],
          exclude: ['**/*.integration.spec.ts'],
          environment: 'node',
        },
      },
      {
        root,

        test: {
          name: 'integration',
          include: ['gateway/**/*.integration.spec.ts', 'simulator/**/*.integration.spec.ts'],
          environment: 'node',
          fileParallelism: false,
          testTimeout: 60_000,
          hookTimeout: 60_000,
          globalSetup: ['config/vitest-database.ts'],
        },
      },
    ],
  },
});
