import PgBoss from 'pg-boss';
import type { Transaction } from 'sequelize';
import { queueSchema } from './boss';
import type { Job } from './job';

/** Runs one statement; the connection of a transaction does. */
interface Connection {
  query(text: string, values: unknown[]): Promise<{ rows: unknown[] }>;
}

// Used for its statements only: it opens no connection, since each job travels on the caller's.
const statements = new PgBoss({
  schema: queueSchema,
  db: {
    executeSql: () => Promise.reject(new Error('a job is enqueued on the connection of a transaction'))
  }
});

/** The driver's connection that a Sequelize transaction holds. */
function connectionOf(transaction: Transaction): Connection {
  const connection: unknown = Reflect.get(transaction, 'connection');
  if (typeof connection !== 'object' || connection === null) {
    throw new Error('the transaction has no connection: it is over, or has not begun');
  }
  return connection as Connection;
}

/**
 * Puts a job into its queue within a transaction, so that a rollback takes it back.
 * @param options.startAfter not before this time
 * @returns the job's id, or null when one with the same key already waits
 */
export async function enqueue<Data extends object>(
  transaction: Transaction,
  job: Job<Data>,
  data: Data,
  options: Readonly<{ startAfter?: Date }> = {}
): Promise<string | null> {
  const connection = connectionOf(transaction);
  return statements.send(job.name, job.data.parse(data), {
    ...(job.key === null ? {} : { singletonKey: job.key(data) }),
    ...(options.startAfter === undefined ? {} : { startAfter: options.startAfter }),
    db: {
      executeSql: async (text, values) => {
        const { rows } = await connection.query(text, values);
        return { rows };
      }
    }
  });
}
