import { fileURLToPath } from 'node:url';
import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { playwright } from '@vitest/browser-playwright';
import { defineConfig } from 'vitest/config';
import { chromium } from './tests/browser.ts';

const file = (path: string): string => fileURLToPath(new URL(path, import.meta.url));
const alias = { $lib: file('./src/lib') };
/** Modules of the framework that exist only while it builds or serves, and that Auth.js asks for. */
const framework = {
  '$app/environment': file('./tests/integration/framework/environment.ts'),
  '$app/paths': file('./tests/integration/framework/paths.ts'),
  '$env/dynamic/private': file('./tests/integration/framework/private-env.ts')
};

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
        resolve: { alias: { ...alias, ...framework } },
        test: {
          name: 'integration',
          server: { deps: { inline: ['@auth/sveltekit'] } },
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
