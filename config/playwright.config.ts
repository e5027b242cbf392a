import { fileURLToPath } from 'node:url';
import { defineConfig } from '@playwright/test';

const root = fileURLToPath(new URL('..', import.meta.url));

/** Runs in Debian's Chromium against a whole Stillroom that config/test.mjs has started. */
export default defineConfig({
  testDir: `${root}e2e`,
  testMatch: '**/*.spec.ts',
  outputDir: `${root}test-results`,
  workers: 1,
  fullyParallel: false,
  timeout: 90_000,
  expect: { timeout: 15_000 },
  reporter: [['list'], ['json', { outputFile: `${root}.cache/test/e2e.json` }]],
  use: {
    actionTimeout: 15_000,
    baseURL: process.env['E2E_URL'],
    screenshot: 'only-on-failure',
    trace: 'retain-on-failure',
    timezoneId: 'Europe/London',
    locale: 'en-GB',
    reducedMotion: 'reduce',
    launchOptions: {
      executablePath: '/usr/bin/chromium',
      args: [
        '--no-sandbox',
        '--disable-dev-shm-usage',
        '--disable-background-networking',
        '--disable-component-update',
        '--disable-sync',
        '--no-first-run',
        '--disable-quic',
      ],
    },
  },
});
