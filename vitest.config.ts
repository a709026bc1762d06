import { fileURLToPath } from 'node:url';
import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { playwright } from '@vitest/browser-playwright';
import { defineConfig } from 'vitest/config';
import { chromium } from './tests/browser.ts';

const alias = { $lib: fileURLToPath(new URL('./src/lib', import.meta.url)) };

export default defineConfig({
  test: {
    projects: [
      {
        resolve: { alias },
        test: {
          name: 'unit',
          include: ['tests/unit/**/*.test.ts', 'tests/reference/**/*.test.ts'],
          env: { LOG_LEVEL: 'silent' },
          testTimeout: 30_000
        }
      },
      {
        resolve: { alias },
        test: {
          name: 'integration',
          include: ['tests/integration/**/*.test.ts'],
          // A process a file, so that each file has a database and a pool of its own.
          pool: 'forks',
          maxWorkers: 2,
          globalSetup: ['tests/integration/server.ts'],
          setupFiles: ['tests/integration/setup.ts'],
          env: { LOG_LEVEL: 'silent' },
          testTimeout: 60_000,
          hookTimeout: 120_000
        }
      },
      {
        plugins: [tailwindcss(), sveltekit()],
        test: {
          name: 'component',
          include: ['tests/component/**/*.test.ts'],
          testTimeout: 30_000,
          browser: {
            enabled: true,
            headless: true,
            screenshotFailures: false,
            provider: playwright({ launchOptions: chromium }),
            instances: [{ browser: 'chromium' }]
          }
        }
      }
    ]
  }
});
