import { config, ConfigurationError } from '../config';
import { closeDatabase } from '../db/sequelize';
import { logger } from '../logger';
import { onShutdown, runShutdown } from '../shutdown';
import { jobs } from './definitions';
import { handlers } from './handlers';
import { startWorker } from './worker';

/** The worker process: takes jobs until it is told to end, or its parent is gone. */
async function run(): Promise<void> {
  onShutdown('database', 'connection pool', closeDatabase);
  const worker = await startWorker(config().databaseUrl, jobs, handlers);
  onShutdown('work', 'jobs', () => worker.stop());
  logger.info({ jobs: handlers.length }, 'the worker takes jobs');
  process.send?.('ready');
}

async function end(reason: string): Promise<void> {
  await runShutdown(reason);
  process.exit();
}

process.on('SIGTERM', () => void end('SIGTERM'));
process.on('SIGINT', () => void end('SIGINT'));
process.on('disconnect', () => void end('the parent process is gone'));

try {
  await run();
} catch (error) {
  if (error instanceof ConfigurationError) console.error(error.message);
  else logger.fatal({ err: error }, 'the worker could not start');
  process.exitCode = 1;
  await end('the start failed');
}
