import PgBoss from 'pg-boss';
import { logger } from '../logger';

/** The schema in which the queue keeps its tables, apart from the application's. */
export const queueSchema = 'job_queue';

/** A client of the queue; the caller starts it, and stops it on shutdown. */
export function createBoss(databaseUrl: string, options: Readonly<PgBoss.ConstructorOptions> = {}): PgBoss {
  const boss = new PgBoss({ connectionString: databaseUrl, schema: queueSchema, max: 4, ...options });
  boss.on('error', (error) => logger.error({ err: error }, 'the job queue reports an error'));
  return boss;
}
