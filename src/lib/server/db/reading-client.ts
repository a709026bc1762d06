import type { PoolClient } from 'pg';
import type { Transaction } from 'sequelize';
import { sequelize } from './sequelize';
import { transactionStore } from './transaction-store';

interface ConnectionSource {
  getConnection(options: { type: 'SELECT' }): Promise<unknown>;
  releaseConnection(connection: unknown): void;
}

/**
 * Lends the driver's own connection for reading in bulk, past row objects: the one of the running transaction or snapshot, else
 * one of the pool for as long as `work` runs.
 */
export async function withReadingClient<Result>(
  work: (client: PoolClient) => Promise<Result>
): Promise<Result> {
  const running = transactionStore.getStore()?.get('transaction') as Transaction | undefined;
  const own: unknown = running ? Reflect.get(running, 'connection') : null;
  if (own) return work(own as PoolClient);
  const source = sequelize.connectionManager as unknown as ConnectionSource;
  const connection = await source.getConnection({ type: 'SELECT' });
  try {
    return await work(connection as PoolClient);
  } finally {
    source.releaseConnection(connection);
  }
}
