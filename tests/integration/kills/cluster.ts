import { chmodSync, existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { Client } from 'pg';
import { prepareDataFolder } from '../../../scripts/setup/data-folder.mjs';
import { runningServer } from '../../../scripts/setup/postmaster-file.mjs';
import { startPostgres } from '../../../scripts/setup/postgres.mjs';
import { createMigratedDatabase, databaseUrl } from '../database';

const databaseName = 'headwater_test_kills';

/** A PostgreSQL of its own, durable as in earnest, whose processes may be killed. */
export class KillableCluster {
  private constructor(
    private readonly folder: string,
    private server: Awaited<ReturnType<typeof startPostgres>>
  ) {}

  /** Makes the cluster and a migrated database in it. */
  static async make(): Promise<KillableCluster> {
    // Named like other throw-away servers, so that one whose process was killed is cleared away by the next.
    const folder = mkdtempSync(join(tmpdir(), 'headwater-throwaway-'));
    if (process.getuid?.() === 0) chmodSync(folder, 0o711);
    writeFileSync(join(folder, 'owner'), String(process.pid));
    const dataDir = join(folder, 'data');
    prepareDataFolder(dataDir);
    const server = await startPostgres(dataDir, { mayCreateDatabases: true });
    const cluster = new KillableCluster(folder, server);
    await createMigratedDatabase(server.url, databaseName, { demo: false });
    return cluster;
  }

  /** Where the database is; another address after each restart. */
  get url(): string {
    return databaseUrl(this.server.url, databaseName);
  }

  /** A connection of one's own, which no kill of another ends silently. */
  async connect(): Promise<Client> {
    const client = new Client({ connectionString: this.url, application_name: 'kills' });
    // The server may be killed while this one is open.
    client.on('error', () => undefined);
    await client.connect();
    return client;
  }

  /** Ends the postmaster as a power cut would; its other processes notice and end. */
  killPostmaster(): void {
    const elsewhere = join(this.folder, 'data', 'database-folder');
    const place = existsSync(elsewhere)
      ? readFileSync(elsewhere, 'utf8').trim()
      : join(this.folder, 'data', 'postgres');
    const running = runningServer(place);
    if (!running) throw new Error('the database does not run');
    process.kill(running.pid, 'SIGKILL');
  }

  /** Starts the database again after it was killed: it recovers from its log by itself. */
  async restart(): Promise<void> {
    for (let attempt = 0; ; attempt += 1) {
      try {
        this.server = await startPostgres(join(this.folder, 'data'), { mayCreateDatabases: true });
        return;
      } catch (error) {
        // The processes of the old server may still be ending.
        if (attempt >= 20) throw error;
        await wait(250);
      }
    }
  }

  /** Waits until the database answers, as after one of its processes was killed. */
  async answering(): Promise<void> {
    for (let attempt = 0; ; attempt += 1) {
      try {
        const client = await this.connect();
        await client.query('SELECT 1');
        await client.end();
        return;
      } catch (error) {
        if (attempt >= 200) throw error;
        await wait(50);
      }
    }
  }

  stop(): void {
    this.server.stop();
    rmSync(this.folder, { recursive: true, force: true });
  }
}
