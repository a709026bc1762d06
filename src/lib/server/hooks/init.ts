import { config } from '../config';
import { closeDatabase, sequelize } from '../db/sequelize';
import { logger } from '../logger';
import { onShutdown, runShutdown } from '../shutdown';
import { answerTypedErrors } from './error';

/**
 * Once, before the first request: the configuration is read and the database reached, so that a server that cannot
 * work does not start; and what closes at the end is registered.
 */
export async function initialise(): Promise<void> {
  answerTypedErrors();
  const { logLevel } = config();
  logger.level = logLevel;
  onShutdown('database', 'connection pool', closeDatabase);
  // scripts/server.js waits for what is handed back before it ends the process.
  const listen = process as NodeJS.EventEmitter;
  listen.once('sveltekit:shutdown', (reason: string, wait?: (closing: Promise<void>) => void) => {
    const closing = runShutdown(reason);
    wait?.(closing);
  });
  await sequelize.authenticate();
}
