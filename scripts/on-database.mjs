import fs from 'node:fs';
import path from 'node:path';
import { keptSecret, lockDataFolder, prepareDataFolder } from './setup/data-folder.mjs';
import { ensureNodePackages, ensurePostgres, ensureSynced } from './setup/dependencies.mjs';
import { closeInOrder } from './setup/interruption.mjs';
import { startPostgres } from './setup/postgres.mjs';
import { Refusal, runCommand } from './setup/refusal.mjs';
import { readSettings } from './setup/settings.mjs';
import { runStep } from './setup/steps.mjs';

/*
 * Runs one of our scripts on the database of this installation, whether the program is running or not:
 *   node scripts/on-database.mjs create-lab.ts --lab …
 * The schema must be there, so the program has been started once.
 */
const root = path.resolve(import.meta.dirname, '..');
const closers = closeInOrder({ exitCode: 1 });

await runCommand(async () => {
  try {
    const [script = '', ...args] = process.argv.slice(2);
    const settings = readSettings(process.env, root);
    await ensureNodePackages(root);
    await ensureSynced(root);
    const databaseUrl = settings.databaseUrl ?? (await ownDatabase(settings.dataDir));
    const env = {
      ...process.env,
      LOG_LEVEL: process.env.LOG_LEVEL ?? 'warn',
      PORT: String(settings.port),
      HOST: settings.host,
      DATA_DIR: settings.dataDir,
      DATABASE_URL: databaseUrl,
      AUTH_SECRET: process.env.AUTH_SECRET?.trim() || keptSecret(settings.dataDir, 'auth-secret')
    };
    const { code } = await runStep(
      process.execPath,
      ['--import', 'tsx', path.join('scripts', script), ...args],
      { cwd: root, env, show: true }
    );
    process.exitCode = code;
  } finally {
    await closers.close();
  }
});

/**
 * The database of the data folder: the running program's, or started for the moment.
 * @param {string} dataDir
 */
async function ownDatabase(dataDir) {
  if (!fs.existsSync(path.join(dataDir, 'database-url'))) {
    throw new Refusal(
      `There is no database in ${dataDir} yet: run npm start once, or set DATA_DIR or DATABASE_URL.`
    );
  }
  prepareDataFolder(dataDir);
  try {
    await lockDataFolder(dataDir);
  } catch (error) {
    // Held by the running program, whose database is up.
    if (error instanceof Refusal) return fs.readFileSync(path.join(dataDir, 'database-url'), 'utf8').trim();
    throw error;
  }
  await ensurePostgres();
  const server = await startPostgres(dataDir);
  closers.add(server.stop);
  return server.url;
}
