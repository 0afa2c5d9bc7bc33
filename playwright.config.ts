import { defineConfig } from '@playwright/test';

const { E2E_ORIGIN, DATABASE_URL, CHROMIUM_PATH, E2E_REPORT } = process.env;
if (!E2E_ORIGIN || !DATABASE_URL) {
  throw new Error(
    'Run the browser tests with `npm test -- e2e [filter]`: it makes their database and server.',
  );
}

/** One built server on one freshly filled demo database, one browser after another. */
export default defineConfig({
  testDir: 'tests/e2e',
  outputDir: 'test-results/e2e',
  workers: 1,
  retries: 0,
  forbidOnly: true,
  timeout: 60_000,
  expect: { timeout: 10_000 },
  reporter: [['line'], ['json', { outputFile: E2E_REPORT ?? 'test-results/e2e.json' }]],
  use: {
    baseURL: E2E_ORIGIN,
    locale: 'en-GB',
    screenshot: 'only-on-failure',
    trace: 'retain-on-failure',
    launchOptions: {
      executablePath: CHROMIUM_PATH || '/usr/bin/chromium',
      args: [
        '--no-sandbox',
        '--disable-gpu',
        '--disable-background-networking',
        '--disable-component-update',
        '--disable-sync',
        '--no-first-run',
        '--disable-quic',
      ],
    },
  },
  projects: [{ name: 'desk', use: { viewport: { width: 1280, height: 900 } } }],
});
