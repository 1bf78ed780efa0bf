import { defineConfig } from '@playwright/test';

const PORT = 4791;
const DATA = 'test-results/browser-data';
export const DEMO_PASSWORD = 'a password for the tests';

const WIDE_ONLY = '**/*.wide.spec.ts';
const PHONE_ONLY = '**/*.phone.spec.ts';
/** What has nothing to do with the look is seen once. */
const ONCE = /@once/;

const server = [
  `rm -rf ${DATA}`,
  `exec env DATA_DIR=${DATA} DEMO_PASSWORD='${DEMO_PASSWORD}' HOST=127.0.0.1 PORT=${PORT} LOG_LEVEL=warn NODE_ENV=test \\
   node --enable-source-maps dist/server/main.js`,
].join(' && ');

/** The browser in front of a server of its own with the demo workspace, in light, in dark and on a phone. */
export default defineConfig({
  testDir: 'spec/browser',
  outputDir: 'test-results/browser',
  workers: 2,
  fullyParallel: false,
  timeout: 60_000,
  reporter: [['line'], ['json', { outputFile: 'test-results/browser.json' }]],
  use: {
    baseURL: `http://127.0.0.1:${PORT}`,
    trace: 'retain-on-failure',
    screenshot: 'only-on-failure',
    launchOptions: {
      executablePath: process.env['CHROMIUM'] ?? '/usr/bin/chromium',
      args: [
        '--no-sandbox',
        '--disable-gpu',
        '--disable-background-networking',
        '--disable-component-update',
        '--disable-sync',
      ],
    },
  },
  projects: [
    {
      name: 'light',
      testIgnore: PHONE_ONLY,
      use: { viewport: { width: 1440, height: 900 }, colorScheme: 'light' },
    },
    {
      name: 'dark',
      testIgnore: PHONE_ONLY,
      grepInvert: ONCE,
      use: { viewport: { width: 1440, height: 900 }, colorScheme: 'dark' },
    },
    {
      name: 'phone',
      testIgnore: WIDE_ONLY,
      grepInvert: ONCE,
      use: {
        viewport: { width: 390, height: 844 },
        isMobile: true,
        hasTouch: true,
        deviceScaleFactor: 2,
        colorScheme: 'light',
      },
    },
  ],
  webServer: {
    command: `sh -c "${server.replace(/"/g, '\\"')}"`,
    url: `http://127.0.0.1:${PORT}/healthz`,
    timeout: 120_000,
    gracefulShutdown: { signal: 'SIGTERM', timeout: 5000 },
  },
});
