import { createBoss } from './boss';
import type { AnyJob } from './job';
import { jobs as allJobs } from './definitions';

/** Brings the queue's own tables up to date and makes or updates a queue for each job. Runs with the migrations. */
export async function installQueues(databaseUrl: string, jobs: readonly AnyJob[] = allJobs): Promise<void> {
  const boss = createBoss(databaseUrl, { supervise: false, schedule: false });
  await boss.start();
  try {
    for (const job of jobs) {
      const options = {
        name: job.name,
        policy: job.key === null ? ('standard' as const) : ('short' as const),
        retryLimit: job.retries,
        retryDelay: 5,
        retryBackoff: true,
        expireInSeconds: job.expiresAfterSeconds,
        retentionDays: 14
      };
      if (await boss.getQueue(job.name)) await boss.updateQueue(job.name, options);
      else await boss.createQueue(job.name, options);
      if (job.schedule === null) await boss.unschedule(job.name);
      else await boss.schedule(job.name, job.schedule, {});
    }
  } finally {
    await boss.stop({ graceful: false });
  }
}
