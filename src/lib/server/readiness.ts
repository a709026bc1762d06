import { sequelize } from './db/sequelize';
import { logger } from './logger';
import { isShuttingDown } from './shutdown';

/** The database answers, and this process is not about to end. */
export async function isReady(): Promise<boolean> {
  if (isShuttingDown()) return false;
  try {
    await sequelize.query('SELECT 1');
    return true;
  } catch (error) {
    logger.warn({ err: error }, 'not ready: the database does not answer');
    return false;
  }
}
