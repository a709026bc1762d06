import { randomBytes } from 'node:crypto';
import { fork } from 'node:child_process';
import { Client } from 'pg';
import { inject } from 'vitest';
import { runShutdown } from '../../src/lib/server/shutdown';

export interface TemplateNames {
  /** Common beginning of the names of this run's databases. */
  readonly run: string;
  /** Migrated, no rows. */
  readonly empty: string;
  /** Migrated and seeded with the demo lab; made at the first use. */
  readonly demo: string;
}

/** A database that exists for one test file. */
export interface TestDatabase {
  readonly url: string;
  readonly drop: () => Promise<void>;
}

const ours = /^headwater_test_[a-z0-9_]+$/;

function checked(name: string): string {
  if (!ours.test(name)) throw new Error(`'${name}' is not a database of the tests`);
  return name;
}

/** The same server, another database. */
export function databaseUrl(serverUrl: string, name: string): string {
  const url = new URL(serverUrl);
  url.pathname = `/${name}`;
  return url.href;
}

/** Runs statements one by one over a connection of their own to the server's named database. */
async function onServer(serverUrl: string, work: (client: Client) => Promise<void>): Promise<void> {
  const client = new Client({ connectionString: serverUrl });
  await client.connect();
  try {
    await work(client);
  } finally {
    await client.end();
  }
}

export async function dropDatabase(serverUrl: string, name: string): Promise<void> {
  await onServer(serverUrl, async (client) => {
    await client.query(`DROP DATABASE IF EXISTS ${checked(name)} WITH (FORCE)`);
  });
}

/** Makes a database and runs the migrations in it, in a process of their own as at every start. */
export async function createMigratedDatabase(
  serverUrl: string,
  name: string,
  { demo }: Readonly<{ demo: boolean }>
): Promise<void> {
  await onServer(serverUrl, async (client) => {
    await client.query(`CREATE DATABASE ${checked(name)} ENCODING 'UTF8' TEMPLATE template0`);
  });
  await migrate(databaseUrl(serverUrl, name), demo);
}

function migrate(url: string, demo: boolean): Promise<void> {
  return new Promise((resolve, reject) => {
    const child = fork('scripts/migrate.ts', {
      execArgv: ['--import', 'tsx'],
      env: {
        ...process.env,
        DATABASE_URL: url,
        DEMO_LAB: demo ? 'yes' : 'no',
        AUTH_SECRET: 'a-secret-that-guards-nothing-but-tests',
        NODE_OPTIONS: ''
      },
      stdio: ['ignore', 'ignore', 'pipe', 'ipc']
    });
    let complaint = '';
    child.stderr?.setEncoding('utf8').on('data', (text: string) => (complaint += text));
    child.once('error', reject);
    child.once('close', (code) =>
      code === 0 ? resolve() : reject(new Error(`the migrations failed:\n${complaint}`))
    );
  });
}

/** Makes the demo template unless another worker has; a lock on the server keeps two from trying at once. */
async function ensureDemoTemplate(serverUrl: string, templates: TemplateNames): Promise<void> {
  await onServer(serverUrl, async (client) => {
    await client.query('SELECT pg_advisory_lock(hashtext($1))', [templates.demo]);
    const { rows } = await client.query('SELECT FROM pg_database WHERE datname = $1', [templates.demo]);
    if (rows.length > 0) return;
    try {
      await createMigratedDatabase(serverUrl, templates.demo, { demo: true });
    } catch (error) {
      await client.query(`DROP DATABASE IF EXISTS ${checked(templates.demo)} WITH (FORCE)`);
      throw error;
    }
  });
}

/**
 * A fresh copy of a template; several connections may copy one at the same time only in turn, so a refusal is retried.
 * The caller drops it.
 */
export async function createTestDatabase(from: 'empty' | 'demo'): Promise<TestDatabase> {
  const serverUrl = inject('serverUrl');
  const templates = inject('templates');
  if (from === 'demo') await ensureDemoTemplate(serverUrl, templates);
  const name = checked(`${templates.run}_${randomBytes(4).toString('hex')}`);
  await onServer(serverUrl, async (client) => {
    // Two copies of one template at once refuse each other.
    await client.query('SELECT pg_advisory_lock(hashtext($1))', [templates.run]);
    await client.query(`CREATE DATABASE ${name} TEMPLATE ${checked(templates[from])}`);
  });
  return { url: databaseUrl(serverUrl, name), drop: () => dropDatabase(serverUrl, name) };
}

/**
 * Gives this test file a database of its own and points DATABASE_URL at it. Every file under tests/integration has
 * called it with 'empty' before its imports run. A file that wants the demo lab calls `useDemoLab` at its top.
 */
export async function useOwnDatabase(from: 'empty' | 'demo'): Promise<TestDatabase> {
  const database = await createTestDatabase(from);
  process.env.DATABASE_URL = database.url;
  return {
    url: database.url,
    drop: async () => {
      // Whatever the file opened closes first, the pool last, so that the drop cuts nobody off.
      await runShutdown('the test file is done');
      await database.drop();
    }
  };
}
