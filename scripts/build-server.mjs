import fs from 'node:fs';
import path from 'node:path';
import { build } from 'vite';

/**
 * Builds the processes beside the web server: every NAME.process.ts below src/lib/server becomes
 * build/processes/NAME.js.
 * Packages stay outside, as in the web server's build.
 */
const root = path.resolve(import.meta.dirname, '..');
const entries = fs
  .readdirSync(path.join(root, 'src/lib/server'), { recursive: true, encoding: 'utf8' })
  .filter((file) => file.endsWith('.process.ts'))
  .map((file) => [path.basename(file, '.process.ts'), path.join(root, 'src/lib/server', file)]);

await build({
  root,
  configFile: false,
  logLevel: 'warn',
  publicDir: false,
  ssr: { external: true },
  build: {
    ssr: true,
    target: 'node20',
    outDir: 'build/processes',
    emptyOutDir: true,
    sourcemap: true,
    rolldownOptions: { input: Object.fromEntries(entries), output: { entryFileNames: '[name].js' } }
  }
});
