import { AsyncLocalStorage } from 'node:async_hooks';

/** Who and what the running code works for; log lines and audit events read it. */
export interface RequestContext {
  readonly requestId: string;
  /** The user's id once they are known; null before that, for strangers and for jobs of the program itself. */
  actorId: string | null;
  /** The lab whose data the request works on. */
  labId: string | null;
}

const storage = new AsyncLocalStorage<RequestContext>();

/** Runs `work` with a context of its own; everything awaited inside sees it. */
export function runInContext<Result>(
  context: Readonly<{ requestId: string; actorId?: string | null; labId?: string | null }>,
  work: () => Result
): Result {
  return storage.run(
    { requestId: context.requestId, actorId: context.actorId ?? null, labId: context.labId ?? null },
    work
  );
}

/** The context of the running request or job, or null outside of one. */
export function requestContext(): Readonly<RequestContext> | null {
  return storage.getStore() ?? null;
}

/** Notes on the running context who is signed in. Does nothing outside of a context. */
export function noteActor(actorId: string | null, labId: string | null = null): void {
  const context = storage.getStore();
  if (!context) return;
  context.actorId = actorId;
  context.labId = labId;
}
