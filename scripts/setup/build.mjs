import { createHash } from 'node:crypto';
import fs from 'node:fs';
import path from 'node:path';
import { Refusal } from './refusal.mjs';
import { runStep } from './steps.mjs';

/** Everything that a build depends on. */
const inputs = [
  'src',
  'static',
  'package.json',
  'package-lock.json',
  'svelte.config.js',
  'tailwind.config.ts',
  'tsconfig.json',
  'vite.config.ts',
  'scripts/build-server.mjs'
];

/**
 * @param {string} root
 * @returns {string} a hash over names and contents of the build's inputs
 */
export function hashInputs(root) {
  const hash = createHash('sha256').update(process.version);
  const add = (/** @type {string} */ relative) => {
    const full = path.join(root, relative);
    if (!fs.existsSync(full)) return;
    if (fs.statSync(full).isDirectory()) {
      for (const name of fs.readdirSync(full).sort()) add(path.join(relative, name));
      return;
    }
    hash.update(`\0${relative}\0`).update(createHash('sha256').update(fs.readFileSync(full)).digest());
  };
  for (const input of inputs) add(input);
  return hash.digest('hex');
}

/**
 * Builds when there is no build or it is older than its inputs. The stamp is written last, so that a build that was
 * interrupted counts as none.
 * @param {string} root
 */
export async function ensureBuild(root) {
  const stamp = path.join(root, 'build', '.inputs');
  const wanted = hashInputs(root);
  const parts = ['handler.js', 'processes/worker.js'].map((file) => path.join(root, 'build', file));
  const whole = parts.every((file) => fs.existsSync(file));
  if (whole && fs.existsSync(stamp) && fs.readFileSync(stamp, 'utf8') === wanted) return;
  console.log('Building. This takes about half a minute.');
  fs.rmSync(stamp, { force: true });
  const { code, output } = await runStep('npm', ['run', 'build'], { cwd: root });
  if (code !== 0) throw new Refusal(`The build failed:\n${output}`);
  fs.writeFileSync(stamp, wanted);
}
