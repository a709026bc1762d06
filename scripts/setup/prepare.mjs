import { ensureBuild } from './build.mjs';
import { keptSecret, lockDataFolder, prepareDataFolder } from './data-folder.mjs';
import { ensureNodePackages, ensurePostgres, ensureSynced } from './dependencies.mjs';
import { startPostgres } from './postgres.mjs';
import { Refusal } from './refusal.mjs';
import { nodeVersionProblem, readSettings, requireFreePort } from './settings.mjs';
import { runStep } from './steps.mjs';

/**
 * @typedef {{ role: string, name: string, email: string, password: string }} DemoAccount
 * @typedef {{
 *   settings: import('./settings.mjs').Settings,
 *   env: NodeJS.ProcessEnv,
 *   demoAccounts: readonly DemoAccount[],
 *   closeDatabase: () => void
 * }} Prepared env: what the processes of the application get
 */

/**
 * Everything between an empty machine and a migrated database: packages, server, secrets, schema, build.
 * @param {string} root of the project
 * @param {Readonly<{ build: boolean, onDatabase: (close: () => void) => void }>} options onDatabase: called as soon as a
 *   database of ours runs, so that an interruption can close it
 * @returns {Promise<Prepared>}
 */
export async function prepare(root, { build, onDatabase }) {
  const nodeProblem = nodeVersionProblem(process.versions.node);
  if (nodeProblem) throw new Refusal(nodeProblem);
  const settings = readSettings(process.env, root);
  await requireFreePort(settings.host, settings.port);
  prepareDataFolder(settings.dataDir);
  await lockDataFolder(settings.dataDir);
  if (settings.databaseUrl === null) await ensurePostgres();
  await ensureNodePackages(root);
  await ensureSynced(root);

  let databaseUrl = settings.databaseUrl;
  let closeDatabase = () => {};
  if (databaseUrl === null) {
    const server = await startPostgres(settings.dataDir);
    databaseUrl = server.url;
    closeDatabase = server.stop;
    onDatabase(closeDatabase);
    if (server.adopted) console.log('The database was still running from an earlier start.');
  }
  const env = {
    ...process.env,
    PORT: String(settings.port),
    HOST: settings.host,
    DATA_DIR: settings.dataDir,
    DATABASE_URL: databaseUrl,
    AUTH_SECRET: process.env.AUTH_SECRET?.trim() || keptSecret(settings.dataDir, 'auth-secret')
  };
  const demoAccounts = await migrate(root, env, settings.demoLab);
  if (build) await ensureBuild(root);
  return { settings, env, demoAccounts, closeDatabase };
}

/**
 * Runs the migrations in a process of their own.
 * @param {string} root
 * @param {NodeJS.ProcessEnv} env
 * @param {boolean} demoLab
 * @returns {Promise<readonly DemoAccount[]>} the demo accounts, when there is a demo lab
 */
export async function migrate(root, env, demoLab) {
  /** @type {readonly DemoAccount[]} */
  let accounts = [];
  const { code, output } = await runStep(process.execPath, ['--import', 'tsx', 'scripts/migrate.ts'], {
    cwd: root,
    env: { ...env, HEADWATER_PROCESS: 'migrate', DEMO_LAB: demoLab ? 'yes' : 'no' },
    onMessage: (message) => {
      const sent = /** @type {{ demoAccounts?: unknown }} */ (message)?.demoAccounts;
      if (Array.isArray(sent)) accounts = sent;
    }
  });
  if (code !== 0) throw new Refusal(output.trim() || 'The database could not be brought up to date.');
  return accounts;
}
