import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { defineConfig } from '@playwright/test';
import { chromium } from './tests/browser.ts';

/*
 * The browser tests run against a server started as a person starts it. `npm test` gives it a database in DATABASE_URL
 * and a port in E2E_PORT; alone (npx playwright test) it makes everything in a folder of its own.
 */
const port = process.env.E2E_PORT ?? '4173';
const given = process.env.E2E_DATA_DIR;
const dataDir = given ?? mkdtempSync(join(tmpdir(), 'headwater-e2e-'));
if (given === undefined) process.once('exit', () => rmSync(dataDir, { recursive: true, force: true }));
// Workers of the runner read this file again and must not make another folder.
process.env.E2E_DATA_DIR = dataDir;

export default defineConfig({
  testDir: 'tests/e2e',
  outputDir: 'test-results',
  fullyParallel: false,
  workers: 1,
  forbidOnly: process.env.CI !== undefined,
  timeout: 120_000,
  expect: { timeout: 15_000 },
  reporter: 'list',
  use: {
    baseURL: `http://127.0.0.1:${port}`,
    browserName: 'chromium',
    launchOptions: chromium,
    viewport: { width: 1440, height: 900 },
    trace: 'retain-on-failure',
    screenshot: 'only-on-failure'
  },
  webServer: {
    command: 'node scripts/start.mjs',
    url: `http://127.0.0.1:${port}/readyz`,
    timeout: 300_000,
    reuseExistingServer: false,
    gracefulShutdown: { signal: 'SIGTERM', timeout: 60_000 },
    stdout: 'pipe',
    env: {
      PORT: port,
      HOST: '127.0.0.1',
      ORIGIN: '',
      DATA_DIR: join(dataDir, 'data'),
      DEMO_LAB: 'yes',
      LOG_LEVEL: process.env.E2E_LOG_LEVEL ?? 'error',
      ...(process.env.DATABASE_URL ? { DATABASE_URL: process.env.DATABASE_URL } : {})
    }
  }
});
