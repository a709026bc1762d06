import { afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import { z } from 'zod';
import { config } from '../../src/lib/server/config';
import { sequelize } from '../../src/lib/server/db/sequelize';
import { installQueues } from '../../src/lib/server/jobs/install';
import { defineJob, handle } from '../../src/lib/server/jobs/job';
import { enqueue } from '../../src/lib/server/jobs/queue';
import { startWorker, type Worker } from '../../src/lib/server/jobs/worker';
import { requestContext } from '../../src/lib/server/request-context';

const label = z.object({ label: z.string() });
const note = defineJob('test.note', label, { retries: 0 });
const refresh = defineJob('test.refresh', label, { key: ({ label: key }) => key });
const jobs = [note, refresh];

let worker: Worker | null = null;
const done: string[] = [];

const work = async (run = async ({ label: text }: { label: string }) => void done.push(text)) => {
  worker = await startWorker(config().databaseUrl, jobs, [handle(note, run), handle(refresh, run)], 0.5);
};

beforeAll(() => installQueues(config().databaseUrl, jobs));

afterEach(async () => {
  await worker?.stop();
  worker = null;
  done.length = 0;
});

describe('the job queue', () => {
  it('does a job that was enqueued in a transaction, with an id of its own in the log context', async () => {
    let seen: string | undefined;
    await work(async ({ label: text }) => {
      seen = requestContext()?.requestId;
      done.push(text);
    });
    const id = await sequelize.transaction((transaction) => enqueue(transaction, note, { label: 'kept' }));
    await vi.waitFor(() => expect(done).toEqual(['kept']), { timeout: 20_000 });
    expect(seen).toBe(id);
  });

  it('knows nothing of a job whose transaction was rolled back', async () => {
    const attempt = sequelize.transaction(async (transaction) => {
      await enqueue(transaction, note, { label: 'rolled back' });
      throw new Error('changed my mind');
    });
    await expect(attempt).rejects.toThrow('changed my mind');
    await sequelize.transaction((transaction) => enqueue(transaction, note, { label: 'after it' }));
    await work();
    await vi.waitFor(() => expect(done).toEqual(['after it']), { timeout: 20_000 });
  });

  it('keeps one waiting job for a key, and one for each key', async () => {
    const ids = await sequelize.transaction(async (transaction) => [
      await enqueue(transaction, refresh, { label: 'study 1' }),
      await enqueue(transaction, refresh, { label: 'study 1' }),
      await enqueue(transaction, refresh, { label: 'study 2' })
    ]);
    expect(ids.map((id) => id !== null)).toEqual([true, false, true]);
    await work();
    await vi.waitFor(() => expect([...done].sort()).toEqual(['study 1', 'study 2']), { timeout: 20_000 });
  });

  it('refuses what a job cannot carry before it is stored', async () => {
    const wrong = { label: 7 } as unknown as { label: string };
    await expect(sequelize.transaction((transaction) => enqueue(transaction, note, wrong))).rejects.toThrow();
  });

  it('keeps of a failure its kind and not its words, which may be measured data', async () => {
    await work(async () => {
      throw new RangeError('area 48.2 in F18');
    });
    const id = await sequelize.transaction((transaction) => enqueue(transaction, note, { label: 'bad' }));
    const failed = async () => {
      const [rows] = await sequelize.query('SELECT state, output::text FROM job_queue.job WHERE id = $1', {
        bind: [id]
      });
      return rows[0] as { state: string; output: string } | undefined;
    };
    await vi.waitFor(async () => expect((await failed())?.state).toBe('failed'), { timeout: 20_000 });
    expect((await failed())?.output).toContain('RangeError');
    expect((await failed())?.output).not.toContain('48.2');
  });
});
