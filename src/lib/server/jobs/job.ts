import type { z } from 'zod';

/** A kind of work that is done later, by the worker process. */
export interface Job<Data extends object> {
  /** Name of its queue, lasting: jobs of an older version of the program may still wait in it. */
  readonly name: string;
  /** What a job carries: ids, never bytes or measured data. Checked when it is put in and when it is taken out. */
  readonly data: z.ZodType<Data>;
  /** How often it is tried again after a failure, each time after a longer wait. */
  readonly retries: number;
  /** After this time a job counts as failed, and its worker as gone. */
  readonly expiresAfterSeconds: number;
  /** Times at which it also starts by itself, as five cron fields in UTC; its data must then accept `{}`. */
  readonly schedule: string | null;
  /** While a job with the same key waits, another is not added; one that already runs keeps nothing out. */
  readonly key: ((data: Data) => string) | null;
}

/** A job whose data nobody looks at: what lists of jobs hold. */
export type AnyJob = Omit<Job<object>, 'key' | 'data'> & { readonly key: unknown; readonly data: z.ZodType };

/** Describes a job; who handles it is said in handlers.ts, so that services can enqueue without loading the handler. */
export function defineJob<Data extends object>(
  name: string,
  data: z.ZodType<Data>,
  options: Readonly<{
    retries?: number;
    expiresAfterSeconds?: number;
    schedule?: string;
    key?: (data: Data) => string;
  }> = {}
): Job<Data> {
  return {
    name,
    data,
    retries: options.retries ?? 3,
    expiresAfterSeconds: options.expiresAfterSeconds ?? 15 * 60,
    schedule: options.schedule ?? null,
    key: options.key ?? null
  };
}

/** What a handler is told beside the data. */
export interface JobRun {
  readonly id: string;
  /** Aborted when the worker closes; long work looks at it between its parts and throws. */
  readonly signal: AbortSignal;
}

/** A job and the function that does it. */
export interface JobHandler {
  readonly job: AnyJob;
  readonly run: (data: object, run: JobRun) => Promise<void>;
}

/** Ties a function to a job. It may run twice for one job (a worker may die after the work), so it must bear that. */
export function handle<Data extends object>(
  job: Job<Data>,
  run: (data: Data, run: JobRun) => Promise<void>
): JobHandler {
  return { job, run: (data, details) => run(job.data.parse(data), details) };
}

/**
 * Every job must have exactly one handler, and no handler a job that nobody lists.
 * @throws Error naming the jobs that do not; a mistake in the program, found when the worker starts
 */
export function checkHandlers(jobs: readonly AnyJob[], handlers: readonly JobHandler[]): void {
  const count = (job: AnyJob) => handlers.filter((handler) => handler.job === job).length;
  const wrong = jobs.filter((job) => count(job) !== 1).map((job) => `${job.name}: ${count(job)} handlers`);
  const unlisted = handlers
    .filter((handler) => !jobs.includes(handler.job))
    .map((handler) => `${handler.job.name}: not in the list of jobs`);
  const names = jobs.map((job) => job.name);
  const twice = names
    .filter((name, index) => names.indexOf(name) !== index)
    .map((name) => `${name}: listed twice`);
  const problems = [...wrong, ...unlisted, ...twice];
  if (problems.length > 0) throw new Error(`jobs and handlers do not match (${problems.join('; ')})`);
}
