import { setTimeout as wait } from 'node:timers/promises';
import type { Client } from 'pg';
import { KillableCluster } from './cluster';
import { StoringServer, type ServerAnswer } from './storing-server';

/** What is killed: the server, one process of the database, the whole database, or the child that reads the file. */
export type Victim = 'server' | 'database process' | 'database' | 'reader';

/** The table whose rows are the next to be written when the kill comes; everything before it is written and not committed. */
export type Point = 'extracts' | 'injections' | 'measurements' | 'audit_events';

type Prepared = Extract<ServerAnswer, { kind: 'prepared' }>;

/** How much of a file the database holds. */
export interface Found {
  readonly state: string;
  readonly extracts: number;
  readonly injections: number;
  readonly measurements: number;
  /** The values, ascending. */
  readonly values: readonly number[];
}

/** Rows that hang off nothing that is stored, anywhere in the database. */
const orphans = `
  SELECT 'measurement' AS what FROM measurements m LEFT JOIN imports i ON i.id = m.import_id
    WHERE i.state IS NULL OR i.state NOT IN ('stored', 'superseded', 'withdrawn')
  UNION ALL SELECT 'measurement without injection' FROM measurements m
    WHERE NOT EXISTS (SELECT 1 FROM injections j WHERE j.id = m.injection_id)
  UNION ALL SELECT 'injection' FROM injections j JOIN imports i ON i.id = j.import_id WHERE i.state IN ('received', 'dropped')
  UNION ALL SELECT 'injection without value' FROM injections j
    WHERE NOT EXISTS (SELECT 1 FROM measurements m WHERE m.injection_id = j.id)
  UNION ALL SELECT 'extract' FROM extracts x JOIN imports i ON i.id = x.import_id WHERE i.state IN ('received', 'dropped')
  UNION ALL SELECT 'sequence' FROM sequences s JOIN imports i ON i.id = s.import_id WHERE i.state IN ('received', 'dropped')
  UNION ALL SELECT 'stored without history' FROM imports i
    WHERE i.state = 'stored' AND NOT EXISTS (
      SELECT 1 FROM audit_events a WHERE a.entity_id = i.id::text AND a.action = 'stored')
  UNION ALL SELECT 'history without storing' FROM audit_events a
    JOIN imports i ON i.id::text = a.entity_id WHERE a.action = 'stored' AND i.state = 'received'`;

/** A study that files are brought into while things are killed. */
export class KilledImports {
  private constructor(
    readonly cluster: KillableCluster,
    private server: StoringServer,
    private readonly prepared: Prepared,
    private readonly samples: number,
    private readonly analytes: number
  ) {}

  static async make(samples: number, analytes: number): Promise<KilledImports> {
    const cluster = await KillableCluster.make();
    try {
      const server = await StoringServer.start(cluster.url);
      const prepared = await server.ask({ kind: 'prepare', samples, analytes });
      if (prepared.kind !== 'prepared') throw new Error(`no study was made: ${JSON.stringify(prepared)}`);
      return new KilledImports(cluster, server, prepared, samples, analytes);
    } catch (error) {
      cluster.stop();
      throw error;
    }
  }

  /** The values of the file of a round, ascending and close to the 50 ng spiked; no two rounds have a file in common. */
  valuesOf(round: number): readonly number[] {
    return Array.from({ length: this.samples * this.analytes }, (_, index) =>
      Number((48 + round / 1000 + index / 1_000_000).toFixed(6))
    );
  }

  private textOf(round: number): string {
    const values = this.valuesOf(round);
    const rows = values.map((value, index) => {
      const sample = Math.floor(index / this.analytes) + 1;
      return `S${sample},Elution,Analyte ${(index % this.analytes) + 1},${value}`;
    });
    return ['Sample,Fraction,Analyte,Amount (ng)', ...rows].join('\n');
  }

  /** Brings the file of a round. */
  bring(round: number, store: boolean): Promise<ServerAnswer> {
    const { actor, study } = this.prepared;
    const fileName = `round-${round}.csv`;
    return this.server.ask({ kind: 'bring', actor, study, fileName, text: this.textOf(round), store });
  }

  /** What the database holds of the file of a round; null: nothing at all. */
  async found(round: number): Promise<Found | null> {
    const client = await this.cluster.connect();
    try {
      const { rows } = await client.query<{ id: string; state: string }>(
        `SELECT id, state FROM imports WHERE file_name = $1`,
        [`round-${round}.csv`]
      );
      if (rows.length > 1) throw new Error(`the file of round ${round} is kept ${rows.length} times`);
      const [row] = rows;
      if (!row) return null;
      const count = async (table: string): Promise<number> =>
        Number(
          (await client.query(`SELECT count(*) FROM ${table} WHERE import_id = $1`, [row.id])).rows[0].count
        );
      const values = await client.query<{ reported: number }>(
        'SELECT reported FROM measurements WHERE import_id = $1 ORDER BY reported',
        [row.id]
      );
      return {
        state: row.state,
        extracts: await count('extracts'),
        injections: await count('injections'),
        measurements: await count('measurements'),
        values: values.rows.map(({ reported }) => reported)
      };
    } finally {
      await client.end();
    }
  }

  /** What hangs off nothing, by kind. */
  async orphans(): Promise<readonly string[]> {
    const client = await this.cluster.connect();
    try {
      return (await client.query<{ what: string }>(orphans)).rows.map(({ what }) => what);
    } finally {
      await client.end();
    }
  }

  /**
   * Has the file of a round stored up to a point and no further, kills, and brings everything back up.
   * @returns what the server answered: nothing, when it was killed itself
   */
  async killAt(round: number, victim: Exclude<Victim, 'reader'>, point: Point): Promise<ServerAnswer> {
    const barrier = await this.cluster.connect();
    await barrier.query('BEGIN');
    await barrier.query(`LOCK TABLE ${point} IN SHARE MODE`);
    const answer = this.bring(round, true);
    const early = answer.then((given) => {
      throw new Error(`the file was answered before anything was killed: ${JSON.stringify(given)}`);
    });
    const pid = await Promise.race([waitingAt(barrier, point), early]);
    early.catch(() => undefined);
    await this.kill(victim, pid);
    // Gone already where the whole database was killed.
    await barrier.query('ROLLBACK').catch(() => undefined);
    await barrier.end().catch(() => undefined);
    const answered = await answer;
    await this.revive();
    return answered;
  }

  /** Kills every child that reads the file of a round, as often as one is started. */
  async killReaders(round: number): Promise<ServerAnswer> {
    const answer = this.bring(round, true);
    let isAnswered = false;
    void answer.then(() => (isAnswered = true));
    while (!isAnswered) {
      const pid = this.server.readerPid();
      if (pid !== null) {
        try {
          process.kill(pid, 'SIGKILL');
        } catch {
          // It has ended by itself.
        }
      }
      await wait(2);
    }
    return answer;
  }

  /** Kills at some moment of the storing, whatever it is doing then. */
  async killAfter(round: number, victim: Victim, milliseconds: number): Promise<ServerAnswer> {
    const answer = this.bring(round, true);
    await wait(milliseconds);
    if (victim === 'reader') {
      const pid = this.server.readerPid();
      if (pid !== null) process.kill(pid, 'SIGKILL');
    } else {
      const client = await this.cluster.connect();
      const { rows } = await client.query<{ pid: number }>(
        `SELECT pid FROM pg_stat_activity WHERE application_name = 'headwater' AND datname = current_database()
          ORDER BY xact_start NULLS LAST LIMIT 1`
      );
      await client.end();
      await this.kill(victim, rows[0]?.pid ?? null);
    }
    const answered = await answer;
    await this.revive();
    return answered;
  }

  private async kill(victim: Exclude<Victim, 'reader'>, pid: number | null): Promise<void> {
    if (victim === 'server') await this.server.kill();
    else if (victim === 'database') this.cluster.killPostmaster();
    else if (pid !== null) process.kill(pid, 'SIGKILL');
  }

  /** Brings back what was killed, and waits until no transaction of before is left. */
  private async revive(): Promise<void> {
    const before = this.cluster.url;
    await this.cluster.answering().catch(() => this.cluster.restart());
    await this.cluster.answering();
    if (!this.server.isAlive || this.cluster.url !== before) {
      await this.server.kill();
      this.server = await StoringServer.start(this.cluster.url);
    }
    const client = await this.cluster.connect();
    try {
      for (let attempt = 0; attempt < 400; attempt += 1) {
        const { rows } = await client.query<{ open: string }>(
          `SELECT count(*) AS open FROM pg_stat_activity WHERE application_name = 'headwater' AND xact_start IS NOT NULL`
        );
        if (Number(rows[0]?.open) === 0) return;
        await wait(25);
      }
      throw new Error('a transaction of the killed process stays open');
    } finally {
      await client.end();
    }
  }

  async stop(): Promise<void> {
    await this.server.kill();
    this.cluster.stop();
  }
}

/** Waits until a transaction stands before a table, and names its process. */
async function waitingAt(client: Client, table: Point): Promise<number> {
  for (let attempt = 0; attempt < 1200; attempt += 1) {
    const { rows } = await client.query<{ pid: number }>(
      'SELECT pid FROM pg_locks WHERE NOT granted AND relation = $1::regclass',
      [table]
    );
    if (rows[0]) return rows[0].pid;
    await wait(25);
  }
  throw new Error(`nothing was about to be written into ${table}`);
}
