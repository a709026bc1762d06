import { randomUUID } from 'node:crypto';
import type { Handle } from '@sveltejs/kit';
import { logger } from '../logger';
import { requestContext, runInContext } from '../request-context';

/** Addresses that are asked so often that a line for each would hide the rest. */
const quiet = new Set(['/healthz', '/readyz']);

/**
 * Gives each request an id, carries it along everything the request awaits, answers with it and logs one line.
 * An id sent by the client is not taken: it would let a stranger choose what our log lines say.
 */
export const nameRequest: Handle = ({ event, resolve }) => {
  const requestId = randomUUID();
  event.locals.requestId = requestId;
  return runInContext({ requestId }, async () => {
    const begun = performance.now();
    const response = await resolve(event);
    response.headers.set('x-request-id', requestId);
    if (!quiet.has(event.url.pathname)) {
      logger.info(
        {
          method: event.request.method,
          route: event.route.id,
          status: response.status,
          ms: Math.round(performance.now() - begun),
          userId: requestContext()?.actorId ?? undefined
        },
        'request'
      );
    }
    return response;
  });
};
