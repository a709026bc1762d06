import { logger } from '../logger';
import { runInContext } from '../request-context';
import { createBoss } from './boss';
import { checkHandlers, type AnyJob, type JobHandler } from './job';

/** A worker that takes jobs until it is stopped. */
export interface Worker {
  /** Takes no more jobs, lets the running ones end (they are told to) and puts back those that do not. */
  readonly stop: () => Promise<void>;
}

/**
 * Starts taking jobs from the queues, one at a time from each.
 * @param pollingSeconds how often an idle queue is looked at
 */
export async function startWorker(
  databaseUrl: string,
  jobs: readonly AnyJob[],
  handlers: readonly JobHandler[],
  pollingSeconds = 1
): Promise<Worker> {
  checkHandlers(jobs, handlers);
  // The queue's tables were made with the migrations: a worker that finds other ones must not change them.
  const boss = createBoss(databaseUrl, { migrate: false });
  await boss.start();
  const closing = new AbortController();
  for (const handler of handlers) {
    const { name } = handler.job;
    await boss.work<object>(name, { pollingIntervalSeconds: pollingSeconds, batchSize: 1 }, async ([job]) => {
      if (!job) return;
      await runInContext({ requestId: job.id }, async () => {
        const begun = Date.now();
        try {
          await handler.run(job.data, { id: job.id, signal: closing.signal });
          logger.info({ job: name, ms: Date.now() - begun }, 'job done');
        } catch (error) {
          logger.error({ job: name, ms: Date.now() - begun, err: error }, 'job failed');
          // The queue keeps only this: what else the error holds may be measured data.
          throw new Error(error instanceof Error ? error.name : 'failed');
        }
      });
    });
  }
  return {
    stop: async () => {
      closing.abort();
      await boss.stop({ graceful: true, timeout: 10_000 });
    }
  };
}
