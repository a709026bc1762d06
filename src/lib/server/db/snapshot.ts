import { Transaction } from 'sequelize';
import { runningTransaction } from './transaction';
import { sequelize } from './sequelize';
import { transactionStore } from './transaction-store';

/**
 * Runs `work` on one unchanging view of the database, for readers of figures: whatever others store meanwhile, every query
 * inside sees the same data. Writing inside is refused by the database. Joins a running snapshot or transaction; a
 * transaction that needs the same certainty locks its study's row first, since every change of content ends with that row.
 */
export async function inSnapshot<Result>(work: () => Promise<Result>): Promise<Result> {
  if (runningTransaction() || transactionStore.getStore()?.get('transaction')) return work();
  return sequelize.transaction({ isolationLevel: Transaction.ISOLATION_LEVELS.REPEATABLE_READ }, async () => {
    await sequelize.query('SET TRANSACTION READ ONLY');
    return work();
  });
}
