import type { JobHandler } from './job';

/** Who does what in the worker: one handler for each job in definitions.ts, made with `handle(job, run)`. */
export const handlers: readonly JobHandler[] = [];
