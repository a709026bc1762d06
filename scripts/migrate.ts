import { existsSync } from 'node:fs';
import { resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { Client } from 'pg';
import { config, ConfigurationError } from '../src/lib/server/config';
import { closeDatabase, sequelize } from '../src/lib/server/db/sequelize';
import { migrator, seeder } from '../src/lib/server/db/umzug';
import { installQueues } from '../src/lib/server/jobs/install';
import { describeError } from '../src/lib/server/logger';

/*
 * Brings a database up to date, in a process of its own: schema, job queues and, unless DEMO_LAB=no, the demo lab.
 * Prints one sentence and ends with code 1 when it cannot. To a parent that listens it sends the demo accounts.
 */

/** A name under which two starts on one database wait for each other. */
const migrationLock = 'headwater migrations';

/** Reasons the server gives for not letting us in, as sentences. */
function connectionProblem(error: unknown): string | null {
  const code: unknown = error instanceof Error ? Reflect.get(error, 'code') : null;
  switch (code) {
    case 'ECONNREFUSED':
    case 'ETIMEDOUT':
    case 'EHOSTUNREACH':
      return 'The database server named in DATABASE_URL does not answer.';
    case 'ENOTFOUND':
    case 'EAI_AGAIN':
      return 'The host named in DATABASE_URL is not known.';
    case '28P01':
    case '28000':
      return 'The database server refuses the user or the password in DATABASE_URL.';
    case '3D000':
      return 'The database named in DATABASE_URL does not exist on its server: create it first.';
    case '42501':
      return 'The user in DATABASE_URL may not create tables in that database: make it the owner of the database.';
    default:
      return null;
  }
}

async function run(): Promise<void> {
  const { databaseUrl } = config();
  const lock = new Client({ connectionString: databaseUrl });
  await lock.connect();
  try {
    const { rows } = await lock.query<{ version: number }>(
      `SELECT current_setting('server_version_num')::int / 10000 AS version`
    );
    const version = rows[0]?.version ?? 0;
    if (version < 15) {
      throw new ConfigurationError(
        `The database server is PostgreSQL ${version}, and 15 or newer is needed.`
      );
    }
    await lock.query('SELECT pg_advisory_lock(hashtext($1))', [migrationLock]);
    await migrator(sequelize).up();
    await installQueues(databaseUrl);
    if (process.env.DEMO_LAB !== 'no') {
      await seeder(sequelize).up();
      await sendDemoAccounts();
    }
  } finally {
    await lock.end();
    await closeDatabase();
  }
}

async function sendDemoAccounts(): Promise<void> {
  const file = resolve('seeders', 'demo-accounts.ts');
  if (!process.send || !existsSync(file)) return;
  const { demoAccounts } = (await import(pathToFileURL(file).href)) as { demoAccounts: unknown };
  await new Promise<void>((done) => process.send?.({ demoAccounts }, () => done()));
}

try {
  await run();
} catch (error) {
  if (error instanceof ConfigurationError) console.error(error.message);
  else {
    const { message, stack } = describeError(error);
    console.error(
      connectionProblem(error) ?? `The database could not be brought up to date: ${message}\n${stack}`
    );
  }
  process.exitCode = 1;
} finally {
  if (process.connected) process.disconnect();
}
