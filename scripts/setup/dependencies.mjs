import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import fs from 'node:fs';
import path from 'node:path';
import { installedPrograms } from './postgres-programs.mjs';
import { Refusal } from './refusal.mjs';
import { runStep } from './steps.mjs';

/**
 * Installs the node packages when they are missing or the lock file has changed since.
 * @param {string} root of the project
 */
export async function ensureNodePackages(root) {
  const lock = fs.readFileSync(path.join(root, 'package-lock.json'), 'utf8');
  const stamp = path.join(root, 'node_modules', '.headwater-stamp');
  const wanted = createHash('sha256').update(lock).update(process.version).digest('hex');
  if (fs.existsSync(stamp) && fs.readFileSync(stamp, 'utf8') === wanted) return;
  if (!installedMatches(lock, path.join(root, 'node_modules', '.package-lock.json'))) {
    console.log('Installing the node packages. This takes about a minute.');
    const { code, output } = await runStep('npm', ['ci', '--include=dev', '--no-audit', '--no-fund'], {
      cwd: root
    });
    if (code !== 0) {
      throw new Refusal(`The node packages could not be installed (npm ci): ${reasonIn(output)}`);
    }
  }
  try {
    fs.writeFileSync(stamp, wanted);
  } catch {
    // Packages that another user installed serve as well; they are compared again at the next start.
  }
}

/**
 * Whether what npm noted as installed is what the lock file names. Packages for other platforms are optional.
 * @param {string} lock
 * @param {string} noteFile npm's own note of what it installed
 */
export function installedMatches(lock, noteFile) {
  if (!fs.existsSync(noteFile)) return false;
  const { packages: wanted } = JSON.parse(lock);
  const { packages: installed } = JSON.parse(fs.readFileSync(noteFile, 'utf8'));
  return Object.entries(wanted).every(([place, { version, optional }]) => {
    if (place === '') return true;
    const found = installed[place];
    return found ? found.version === version : optional === true;
  });
}

/**
 * Writes what the framework generates from the routes; type check, tsx and tests read it.
 * @param {string} root
 * @param {boolean} [always] also when it is there: a check wants it fresh
 */
export async function ensureSynced(root, always = false) {
  if (!always && fs.existsSync(path.join(root, '.svelte-kit', 'tsconfig.json'))) return;
  const { code, output } = await runStep(
    process.execPath,
    ['node_modules/@sveltejs/kit/svelte-kit.js', 'sync'],
    {
      cwd: root
    }
  );
  if (code !== 0) throw new Error(`svelte-kit sync failed:\n${output}`);
}

/** The last telling line of a package manager's output. */
export function reasonIn(/** @type {string} */ output) {
  const lines = output
    .split('\n')
    .map((line) => line.trim())
    .filter(Boolean);
  const telling = lines.filter((line) =>
    /^(E:|npm error (?!A complete log|code|errno|syscall|path))/.test(line)
  );
  return (telling[0] ?? lines.at(-1) ?? 'no reason was given').replace(/^(E:|npm error)\s*/, '');
}

/** PostgreSQL, unless a server of one's own is named. */
export async function ensurePostgres() {
  if (installedPrograms().length > 0) return;
  // Debian would start a server of its own on the standard port: nobody asked for that one.
  const folder = '/etc/postgresql-common/createcluster.d';
  const file = path.join(folder, 'headwater.conf');
  requireRoot('PostgreSQL is not installed', 'postgresql', 'or name a server of your own in DATABASE_URL');
  fs.mkdirSync(folder, { recursive: true });
  fs.writeFileSync(file, 'create_main_cluster = false\n');
  try {
    await installDebianPackages(['postgresql'], 'PostgreSQL');
  } finally {
    fs.rmSync(file, { force: true });
  }
  if (installedPrograms().length === 0) {
    throw new Refusal(
      'PostgreSQL is installed, but its programs are not in /usr/lib/postgresql: reinstall the Debian package postgresql.'
    );
  }
}

/**
 * @param {string} what
 * @param {string} debianPackage
 * @param {string} [otherwise]
 */
function requireRoot(what, debianPackage, otherwise) {
  if (process.getuid?.() === 0) return;
  const rest = otherwise ? `, ${otherwise}` : '';
  throw new Refusal(`${what}: ask an administrator to run 'apt-get install ${debianPackage}'${rest}.`);
}

/**
 * @param {readonly string[]} packages
 * @param {string} what for the sentences
 */
async function installDebianPackages(packages, what) {
  if (spawnSync('apt-get', ['--version'], { stdio: 'ignore' }).status !== 0) {
    throw new Refusal(
      `${what} is missing, and this system has no apt-get to install it with: install it by hand.`
    );
  }
  console.log(`Installing ${what} (apt-get install ${packages.join(' ')}).`);
  const apt = (/** @type {string[]} */ ...args) =>
    runStep('apt-get', ['-o', 'DPkg::Lock::Timeout=120', ...args], {
      cwd: '/',
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive', LC_ALL: 'C.UTF-8' }
    });
  const install = () => apt('install', '-y', '--no-install-recommends', ...packages);
  const first = await install();
  if (first.code === 0) return;
  // A bare machine has no lists yet, and old lists name versions that are gone.
  await apt('update');
  const { code, output } = await install();
  if (code !== 0) {
    throw new Refusal(
      `${what} could not be installed (apt-get install ${packages.join(' ')}): ${reasonIn(output)}`
    );
  }
}

/** @returns {string | null} */
const chromiumPath = () =>
  [process.env.CHROMIUM, '/usr/bin/chromium'].find((file) => file && fs.existsSync(file)) ?? null;

/** The browser of the component and browser tests. */
export async function ensureChromium() {
  if (chromiumPath()) return;
  requireRoot('Chromium is not installed, and the tests need it', 'chromium');
  await installDebianPackages(['chromium', 'fonts-liberation'], 'Chromium');
}

/** Programs whose figures and files some tests compare with; without them those tests say that they are skipped. */
const referencePrograms = [
  { name: 'R', file: '/usr/bin/Rscript', debianPackage: 'r-base-core' },
  { name: 'LibreOffice', file: '/usr/bin/soffice', debianPackage: 'libreoffice-calc' }
];

/** Installs what it may of them; nothing depends on its success. */
export async function ensureReferencePrograms() {
  for (const { name, file, debianPackage } of referencePrograms) {
    if (fs.existsSync(file)) continue;
    try {
      requireRoot(`${name} is not installed`, debianPackage);
      await installDebianPackages([debianPackage], name);
    } catch (error) {
      if (!(error instanceof Refusal)) throw error;
      console.log(`${error.message} The checks against it will be skipped.`);
    }
  }
}
